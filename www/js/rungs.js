// The rungs: one for each question, and what hangs from them.

import { element, setText, wordButton } from "./dom.js";
import { Layers } from "./layers.js";
import { WORDS, isSettling, rungState } from "./questions.js";
import { richNode } from "./rich.js";
import { runNodes, runWords } from "./run-nodes.js";
import * as lines from "./views/lines.js";
import * as splitting from "./views/splitting.js";
import * as states from "./views/states.js";

const VIEWS = { states, lines, splitting };

/** A rung: its line, its question, its state in stroke and words, and the space under it. */
export class Rung {
  #view;
  #name;
  #words = element("span", { class: "words" });
  #short = element("span", { class: "short" });
  #button;
  #first = element("span", { class: "first" });

  constructor({ name, question, numeral, view, onUnfold = null, open = false }) {
    this.#name = name;
    this.#view = view;
    this.onUnfold = onUnfold;
    this.#button = element("button", { type: "button", class: "rung-button", "aria-controls": `${name}-hang` },
      element("span", { class: "numeral", "aria-hidden": "true", text: String(numeral) }),
      element("span", { class: "question", id: `${name}-name`, text: question }),
      this.#words, this.#short);
    this.#button.addEventListener("click", () => this.unfold(!this.open));
    this.hang = element("div", { class: "hang", id: `${name}-hang` });
    this.node = element("section", { class: "rung", id: name, "aria-labelledby": `${name}-name` },
      element("div", { class: "stroke", "aria-hidden": "true" }, this.#first, element("span", { class: "gap" }), element("span", { class: "second" })),
      element("h2", { class: "rung-head" }, this.#button),
      this.hang);
    this.unfold(view.get(`rung:${name}`) ?? open);
    this.state({ kind: "ready", words: "open to ask" });
  }

  get open() {
    return !this.hang.hidden;
  }

  unfold(open) {
    this.hang.hidden = !open;
    this.node.classList.toggle("unfolded", open);
    this.#button.setAttribute("aria-expanded", String(open));
    this.#view.set(`rung:${this.#name}`, open);
    this.onUnfold?.(open);
  }

  focus() {
    this.#button.focus();
  }

  /** Stroke and words; `part` (0 to 1) is how far a run has come, when it tells. */
  state({ kind, words, part = 0 }) {
    this.node.dataset.state = kind;
    setText(this.#words, words);
    this.#first.style.width = kind === "running" ? `${Math.round(100 * part)}%` : "";
  }

  /** The answer cut short, for the closed rung. */
  short(rich, settings) {
    this.#short.replaceChildren(...(rich ? [richNode(rich, settings)] : []));
  }
}

/** The rung of one of the core's questions. */
export class QuestionRung {
  #questions;
  #context;
  #layers;
  #needs = element("div", { class: "needs" });
  #run = element("div", { class: "run" });
  #note = element("p", { class: "old-note" });
  #announcer;
  #spoken = "";

  constructor({ name, numeral, view, questions, context, announcer, fieldsNode = null, more = null, open, act }) {
    this.name = name;
    this.#questions = questions;
    this.#context = context;
    this.#announcer = announcer;
    this.act = act;
    this.rung = new Rung({ name, question: WORDS[name], numeral, view, open, onUnfold: () => this.show() });
    this.#layers = new Layers({ name, render: VIEWS[name].render, context, view, more });
    this.rung.hang.append(...[fieldsNode, this.#needs, this.#run, this.#note, this.#layers.node].filter(Boolean));
  }

  /** Brings the rung in line with what stands at its question. */
  show(shownFaults = this.shownFaults ?? 0) {
    this.shownFaults = shownFaults;
    const entry = this.#questions.entries.get(this.name);
    // The rung is folded once while it is being made.
    if (entry === undefined || this.#layers === undefined) return;
    const state = rungState(entry, shownFaults);
    const old = entry.answer !== null && state.kind !== "answered";
    this.rung.state(state);
    this.rung.node.dataset.settling = String(isSettling(entry));
    this.rung.short(entry.answer?.say ?? null, this.#context.settings.values);
    this.#showNeeds(entry);
    this.#showRun(entry, state);
    this.#note.hidden = !old;
    setText(this.#note, old ? oldNote(entry, state) : "");
    if (entry.answer === null) this.#layers.clear();
    else this.#layers.show(entry.answer, { old, unfolded: this.rung.open });
    if (entry.fresh && this.rung.open) this.#speak();
  }

  #speak() {
    const speech = this.#layers.speech();
    if (speech === this.#spoken) return;
    // The first answers after opening the page are there to be read, not spoken over it.
    if (this.#spoken !== "") this.#announcer.later(this.name, speech);
    this.#spoken = speech;
  }

  #showNeeds(entry) {
    const lacking = entry.status === "lacks";
    const key = lacking ? JSON.stringify([entry.needs, entry.way]) : "";
    if (this.#needs.dataset.shown === key) return;
    this.#needs.dataset.shown = key;
    this.#needs.replaceChildren();
    if (!lacking) return;
    this.#needs.append(element("p", { text: `Needs ${entry.needs}.` }));
    if (entry.way) {
      this.#needs.append(element("button", {
        type: "button", class: "action", text: entry.way.label,
        on: { click: () => this.act.takeWay(this.name, entry.way) },
      }));
    }
  }

  #showRun(entry, state) {
    const running = entry.run?.shown === true;
    const key = running ? "run" : JSON.stringify([state.kind, state.words, entry.waits, entry.panic, entry.stopped]);
    if (this.#run.dataset.shown === key) {
      // The button stays under the finger while the words tell how far it is.
      if (running) setText(this.#run.querySelector("p"), runWords(entry.run));
      return;
    }
    this.#run.dataset.shown = key;
    const inside = this.#run.contains(document.activeElement);
    this.#run.replaceChildren(...runNodes(entry, entry.answer !== null, {
      stop: this.act.stop, save: this.act.save, start: () => this.act.start(this.name), again: () => this.act.again(this.name),
    }));
    if (inside) (this.#run.querySelector("button") ?? this.rung).focus();
  }
}

function oldNote(entry, state) {
  if (state.kind === "running") return "The last answer, from before your change:";
  if (entry.status === "fault") return "Out of date: the last answer, from before your change.";
  return "The last answer, from before your change:";
}

/** A list of links to the rungs, for the bar at the foot of a phone. */
export function ladderList(rungs, go) {
  return element("ol", {}, ...rungs.map(({ name, question }) => element("li", {}, wordButton(question, () => go(name)))));
}
