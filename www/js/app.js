// Wires the page together.

import { sameSheet } from "./address.js";
import { makeAnnouncer } from "./announce.js";
import { showCannotStart } from "./cannot-start.js";
import { makeChoice } from "./choice.js";
import { element, setText, wordButton } from "./dom.js";
import { Engine } from "./engine.js";
import { enteredList } from "./entered.js";
import { FieldSweep } from "./field-sweep.js";
import { FaultTiming, Fields, faultNode, faultWords, wayButton } from "./fields.js";
import { acceptDrops } from "./files.js";
import { Filing } from "./filing.js";
import { Head, headWords } from "./head.js";
import { Keeper } from "./keeper.js";
import { listen } from "./keys.js";
import { Notes } from "./notes.js";
import { keepOffline } from "./offline.js";
import { openPanel } from "./opening.js";
import { Orbitals } from "./orbitals.js";
import { valueAt } from "./pointer.js";
import { Questions, WORDS } from "./questions.js";
import { questionFields } from "./question-fields.js";
import { RecordRung } from "./record.js";
import { QuestionRung, ladderList } from "./rungs.js";
import { panicNode } from "./run-nodes.js";
import { Settings, settingsPanel } from "./settings.js";
import { SheetStore } from "./sheet.js";
import { compileCore, workerStarter } from "./startup.js";
import { Storage } from "./storage.js";
import { ViewState } from "./view-state.js";
import { OrbitalsPart } from "./views/orbitals.js";

const OF_SPLITTING = ["field", "line", "nucleus", "isotopes", "level"];

const byId = (id) => document.getElementById(id);

async function start() {
  // The core compiles while the page is put together.
  const compiling = compileCore();
  compiling.catch(() => {});
  const workers = workerStarter();
  const startWorker = () => workers.start();

  const notes = new Notes(byId("notes"));
  const storage = new Storage((trouble) => showStorageTrouble(notes, trouble));
  const settings = new Settings(storage);
  const view = new ViewState(storage);
  const store = new SheetStore();
  const examples = RUNGLINE_EXAMPLES;
  const keeper = new Keeper({ store, storage, notes, first: examples[0] });
  const announcer = makeAnnouncer(byId("announcements"));
  keeper.begin();

  const core = await compiling;
  const engine = new Engine(startWorker, core);
  // What computes has a worker of its own, which starts once something is to be computed.
  let second = null;
  const heavy = () => {
    second ??= new Engine(startWorker, core);
    return second;
  };
  const questions = new Questions(engine, heavy, store);
  const orbitals = new Orbitals(heavy, store, questions);
  const sweep = new FieldSweep(heavy, store, questions);
  await questions.begin();

  new Page({ notes, storage, settings, view, store, examples, keeper, announcer, engine, heavy, questions, orbitals, sweep }).begin();
  byId("cannot-start").remove();
  keepForOffline(notes);
}

function keepForOffline(notes) {
  const take = keepOffline((state) => {
    if (state === "waiting") {
      notes.put("version", {
        text: "A newer version of this page is here and waits. It starts when every tab with this one is closed, or now; your sheet is kept either way.",
        buttons: [["Start it now", () => take()]], lasting: true,
      });
    }
  });
}

function showStorageTrouble(notes, trouble) {
  if (trouble === null) notes.remove("storage");
  else {
    notes.put("storage", {
      text: trouble === "full"
        ? "The browser's storage is full: this sheet is not kept when the page closes. Save it as a file; all else works."
        : "The browser refuses its storage to this page: the sheet is not kept when the page closes. Save it as a file; all else works.",
    });
  }
}

class Page {
  #charts = new Map();

  constructor(parts) {
    Object.assign(this, parts);
    this.timing = new FaultTiming(() => this.showReading());
    this.fields = new Fields(this.store, this.settings, this.timing);
    this.panels = { open: byId("open-panel"), settings: byId("settings-panel") };
    this.filing = new Filing({
      engine: this.engine, heavy: this.heavy, store: this.store, notes: this.notes,
      replace: (sheet, label) => this.replace(sheet, label),
      verdict: (name, record) => this.record.verdict(name, record),
      toFirstFault: () => this.toFirstFault(),
    });
    this.stopButton = wordButton("Stop", () => this.stop(), { class: "word stop", hidden: true });
  }

  begin() {
    this.head = new Head({
      store: this.store, fields: this.fields, settings: this.settings, view: this.view,
      chart: (charge) => this.chart(charge),
      toFirstFault: () => this.toFirstFault(),
    });
    this.words = headWords({
      open: () => this.togglePanel("open"),
      save: () => this.filing.saveSheet(),
      undo: () => this.undo(),
      redo: () => this.redo(),
      settings: () => this.togglePanel("settings"),
    });
    openPanel(this.panels.open, this.examples, {
      choose: () => byId("file").click(),
      replace: (sheet, label) => this.replace(sheet, label),
    });
    this.panels.settings.append(element("h2", { text: "Settings" }), settingsPanel(this.settings, () => this.keeper.clear(), this.questions.about.notices));
    this.makeRungs();
    this.makeFootBar();
    byId("title-block").after(enteredList(this.store));
    byId("version").textContent = `Rungline ${this.questions.about.version}, constants CODATA ${this.questions.about.codata}.${RUNGLINE_PROFILE === "quick" ? " This is a quick build: slower than the one that is shipped." : ""}`;
    byId("file").addEventListener("change", ({ target }) => {
      const [file] = target.files;
      if (file) this.filing.open(file);
      target.value = "";
    });
    acceptDrops((file) => this.filing.open(file), (fault) => this.filing.refuse(fault));
    listen({
      undo: () => this.undo(), redo: () => this.redo(), save: () => this.filing.saveSheet(),
      open: () => this.togglePanel("open", true), escape: () => this.escape(),
    });
    this.store.subscribe((change) => this.changed(change));
    this.questions.subscribe((what) => (what === "reading" ? this.showReading() : this.showQuestion(what)));
    this.orbitals.subscribe(() => this.showStop());
    this.sweep.subscribe((what) => {
      if (what === "run" || what === "map") this.showStop();
    });
    this.settings.subscribe(() => this.showAll());
    this.changed({ kind: "load" });
    measureHead();
  }

  makeRungs() {
    const context = {
      settings: this.settings, store: this.store, view: this.view, choice: makeChoice(),
      setField: (path, value, label) => this.put(path, value, label),
      announce: (text) => this.announcer.now(text),
      chart: (charge) => this.chart(charge), sweep: this.sweep,
      toField: (path) => this.toField(path),
      act: {
        start: () => this.sweep.start(), stop: () => this.stop(), save: () => this.filing.saveSheet(),
        putField: () => this.takeQuestionWay("splitting", { path: "/field/flux_density", value: "0.5 T", label: "Put in 0.5 T" }),
      },
    };
    const act = {
      takeWay: (name, way) => this.takeQuestionWay(name, way),
      start: (name) => this.questions.ask(name, true).then(() => this.showQuestion(name)),
      again: (name) => this.questions.ask(name),
      stop: () => this.stop(),
      save: () => this.filing.saveSheet(),
    };
    this.orbitalsPart = new OrbitalsPart({
      orbitals: this.orbitals, context, fields: this.fields,
      act: { stop: act.stop, save: act.save, takeWay: (fault, way) => this.fields.takeWay(fault, way), speak: (text) => this.announcer.later("orbitals", text) },
    });
    this.rungs = [...this.questions.entries.keys()].map((name, index) => new QuestionRung({
      name, numeral: index + 1, view: this.view, questions: this.questions, context, announcer: this.announcer, act,
      open: name === questionOf(this.store.sheet), more: name === "states" ? this.orbitalsPart.node : null,
      fieldsNode: questionFields(name, this.fields, this.questions, (path, value, label) => this.put(path, value, label), { choice: context.choice, store: this.store, view: this.view, sweep: this.sweep, openCsv: () => byId("file").click() }),
    }));
    this.questions.isUnfolded = (name) => this.rungOf(name).open;
    this.record = new RecordRung({
      numeral: this.rungs.length + 1, view: this.view, store: this.store, fields: this.fields,
      act: { saveSheet: () => this.filing.saveSheet(), saveRecord: () => this.filing.saveRecord(), open: () => byId("file").click() },
    });
    byId("ladder").append(...this.rungs.map(({ rung }) => rung.node), this.record.rung.node);
  }

  makeFootBar() {
    const list = element("div", { class: "ladder-list", id: "ladder-list", hidden: true },
      ladderList([...this.rungs.map(({ name }) => ({ name, question: WORDS[name] })), { name: "record", question: "Record" }], (name) => {
        fold(false);
        const rung = this.rungOf(name);
        rung.unfold(true);
        rung.node.scrollIntoView();
        rung.focus();
      }));
    const fold = (open) => {
      list.hidden = !open;
      ladder.setAttribute("aria-expanded", String(open));
    };
    const ladder = wordButton("Ladder", () => fold(list.hidden), { "aria-expanded": "false", "aria-controls": "ladder-list" });
    this.foldLadder = () => {
      const was = !list.hidden;
      fold(false);
      return was;
    };
    this.footUndo = wordButton("Undo", () => this.undo());
    byId("foot-bar").append(list, ladder, this.footUndo, this.stopButton);
  }

  rungOf(name) {
    return name === "record" ? this.record.rung : this.rungs.find((rung) => rung.name === name).rung;
  }

  changed(change) {
    if (change.kind === "load" && this.keeper.isNew) this.rungOf(questionOf(this.store.sheet)).unfold(true);
    if (change.kind === "typing") this.announcer.hold();
    else {
      this.timing.rest();
      if (change.kind !== "step") this.head.reset();
    }
    this.head.arrange();
    this.fields.refill(change.kind === "typing");
    this.record.changed();
    this.showWords();
    this.showTitle();
    this.questions.isOther = change.kind === "load" || change.isOther === true;
    this.questions.refresh();
  }

  showWords() {
    for (const [button, label, what] of [
      [this.words.undo, this.store.undoLabel, "Undo"], [this.footUndo, this.store.undoLabel, "Undo"], [this.words.redo, this.store.redoLabel, "Redo"],
    ]) {
      // Disabled buttons would lose the focus of whoever has just pressed them.
      button.setAttribute("aria-disabled", String(label === null));
      button.title = label === null ? `Nothing to ${what.toLowerCase()}` : `${what}: ${label}`;
    }
  }

  showTitle() {
    const { title, note } = this.store.sheet;
    const example = this.examples.some((sheet) => sameSheet(sheet, this.store.sheet));
    const block = byId("title-block");
    block.replaceChildren(
      ...(typeof title === "string" && title.trim() !== "" ? [element("p", { class: "title", text: title })] : []),
      ...(typeof note === "string" && note.trim() !== "" ? [element("p", { class: "note", text: note })] : []),
      ...(example ? [element("p", { class: "note of-screen", text: "This is an example: type over it. Others, and an empty sheet, are under Open." })] : []));
    block.hidden = block.childElementCount === 0;
  }

  shownFaults() {
    return this.questions.reading === null ? [] : this.timing.shown(this.questions.reading.faults);
  }

  showReading() {
    const { broken, reading } = this.questions;
    if (broken === null) this.notes.remove("broken");
    else this.notes.put("broken", { kind: "fault", lasting: true, more: panicNode(broken, () => this.questions.refresh(), () => this.filing.saveSheet()) });
    if (broken !== null) for (const rung of this.rungs) rung.show();
    if (reading === null || broken !== null) return;
    const faults = this.shownFaults();
    this.fields.read(reading);
    this.head.read(reading, faults);
    this.showElsewhere(faults);
    for (const rung of this.rungs) rung.show(this.questions.count(rung.name, faults));
    this.announcer.later("faults", this.newFaultWords(faults));
    this.showStop();
  }

  newFaultWords(faults) {
    const words = faults.map((fault) => `Fault${this.fields.labelOf(fault.path) ? ` in ${this.fields.labelOf(fault.path)}` : ""}: ${faultWords(fault)}`).join(" ");
    if (words === this.spokenFaults) return "";
    this.spokenFaults = words;
    return words;
  }

  // Faults of the sheet whose place has no field on the page.
  showElsewhere(faults) {
    const elsewhere = faults.filter((fault) => !this.fields.has(fault.path));
    const key = JSON.stringify(elsewhere);
    if (this.elsewhere === key) return;
    this.elsewhere = key;
    if (elsewhere.length === 0) {
      this.notes.remove("elsewhere");
      return;
    }
    this.notes.put("elsewhere", {
      kind: "fault", lasting: true,
      more: element("div", {}, ...elsewhere.slice(0, 20).flatMap((fault) => {
        const value = valueAt(this.store.sheet, fault.path);
        return [
          faultNode(fault, typeof value === "string" ? value : ""),
          element("p", { class: "bound", text: fault.path ? `At ${fault.path}.` : "In the sheet as a whole." }),
          element("div", { class: "ways" },
            ...fault.ways.map((way) => wayButton(way, () => this.fields.takeWay(fault, way))),
            ...(fault.path ? [wayButton({ label: "Take it out" }, () => this.put(fault.path, undefined, `Take out ${fault.path}`))] : [])),
        ];
      }), elsewhere.length > 20 ? element("p", { text: `… and ${elsewhere.length - 20} more.` }) : null),
    });
  }

  showQuestion(name) {
    this.rungs.find((rung) => rung.name === name)?.show(this.questions.count(name, this.shownFaults()));
    this.showStop();
    if (this.questions.reading !== null) this.fields.read(this.questions.reading);
  }

  showStop() {
    const running = this.isRunning();
    this.stopButton.hidden = !running;
    byId("foot-bar").classList.toggle("running", running);
  }

  isRunning() {
    return this.questions.running || this.orbitals.running || this.sweep.running;
  }

  showAll() {
    if (this.questions.reading !== null) this.showReading();
    this.orbitalsPart.show();
  }

  toFirstFault() {
    const [fault] = this.shownFaults();
    if (fault === undefined) return;
    if (/^\/(species|configurations)/.test(fault.path)) this.head.unfold(true, false);
    else if (/^\/(field|line|nucleus|isotopes|level)(\/|$)/.test(fault.path)) this.rungs.find((rung) => rung.name === "splitting")?.rung.unfold(true);
    else if (/^\/(window|medium|source|refractive_index|air|measured|structure\/(energies|mixing|correlation|scale|given))/.test(fault.path)) this.rungOf("lines").unfold(true);
    else if (/^\/structure/.test(fault.path)) {
      this.rungOf("states").unfold(true);
      this.orbitalsPart.open();
    } else if (/^\/(title|note)$/.test(fault.path)) this.record.rung.unfold(true);
    this.head.makeRoom(fault.path);
    if (!this.fields.focus(fault.path)) document.querySelector('[data-note="elsewhere"] button')?.focus();
  }

  toField(path) {
    if (/^\/(field|line|nucleus|isotopes|level)(\/|$)/.test(path)) this.rungOf("splitting").unfold(true);
    this.head.makeRoom(path);
    this.fields.focus(path);
  }

  put(path, value, label) {
    const changes = this.head.changes(path, value);
    this.head.makeRoom(path);
    this.store.put(changes, label);
  }

  takeQuestionWay(name, way) {
    this.put(way.path, way.value, way.label);
    this.rungOf(name).unfold(true);
    if (!this.fields.focus(way.path)) this.rungOf(name).focus();
  }

  replace(sheet, label) {
    this.head.reset();
    this.store.replace(sheet, label, true);
    this.head.reset();
    this.togglePanel("open", false);
    if (questionOf(sheet) === "splitting") this.toQuestion("splitting");
    this.announcer.now(`${label}. Undo brings back what was here.`);
  }

  // A sheet that was opened is read where its question stands.
  toQuestion(name) {
    const { rung } = this.rungs.find((each) => each.name === name);
    rung.unfold(true);
    rung.focus();
    rung.node.scrollIntoView();
  }

  undo() {
    const label = this.store.undo();
    this.announcer.now(label === null ? "Nothing to undo." : `Undone: ${label}.`);
  }

  redo() {
    const label = this.store.redo();
    this.announcer.now(label === null ? "Nothing to redo." : `Redone: ${label}.`);
  }

  stop() {
    this.questions.stop();
    this.orbitals.stop();
    this.sweep.stop();
    this.announcer.now("Stopped.");
  }

  escape() {
    if (this.isRunning()) {
      this.stop();
      return true;
    }
    if (this.foldLadder()) return true;
    const open = Object.keys(this.panels).find((name) => !this.panels[name].hidden);
    if (open === undefined) return false;
    this.togglePanel(open, false);
    this.words[open].focus();
    return true;
  }

  togglePanel(name, open = this.panels[name].hidden) {
    for (const [other, panel] of Object.entries(this.panels)) {
      const shown = other === name && open;
      panel.hidden = !shown;
      this.words[other].setAttribute("aria-expanded", String(shown));
    }
    if (!open) return;
    window.scrollTo({ top: 0 });
    this.panels[name].querySelector("button, select, a")?.focus();
  }

  chart(charge) {
    if (!this.#charts.has(charge)) {
      this.#charts.set(charge, this.engine.request(`chart:${charge}`, "chart", [charge]).then((result) => {
        if (result.text !== undefined) return JSON.parse(result.text);
        this.#charts.delete(charge);
        return null;
      }));
    }
    return this.#charts.get(charge);
  }
}

// The question that a sheet is about.
function questionOf(sheet) {
  return OF_SPLITTING.some((key) => sheet[key] !== undefined) ? "splitting" : "states";
}

// Focus must never land under the head, nor in the words that have scrolled away above it: what
// scrolls into view stops below the head, and a key's focus brings the words back.
function measureHead() {
  const words = byId("words");
  document.addEventListener("focusin", ({ target }) => {
    byId("head").classList.toggle("by-keyboard", words.contains(target) && target.matches(":focus-visible"));
  });
  const line = document.querySelector(".atom-line");
  const measure = () => {
    document.documentElement.style.scrollPaddingTop = `${line.getBoundingClientRect().height + 8}px`;
    byId("head").style.setProperty("--words-height", `${words.getBoundingClientRect().height}px`);
  };
  const observer = new ResizeObserver(measure);
  observer.observe(line);
  // It measures both at once, after the first layout: asked here, the layout would be done twice.
  observer.observe(words);
}

start().catch(showCannotStart);
