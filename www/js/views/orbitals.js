// The evidence "Orbitals" under Which states?: fields of its own, a run of its own, and what came out.

import { scopedChoice } from "../choice.js";
import { element, freshId, setText } from "../dom.js";
import { faultNode, wayButton } from "../fields.js";
import { focusPlace } from "../layers.js";
import { ALONG, HEIGHTS, MARKERS, radialLayout, radialWalk } from "../plot/radial.js";
import { picture } from "../plot/picture.js";
import { valueAt } from "../pointer.js";
import { duration, estimateWords } from "../questions.js";
import { richNode, richPlain } from "../rich.js";
import { panicNode } from "../rungs.js";
import { tableAndPicture } from "./beside.js";
import { fold, pointerWords, select } from "./fold.js";
import { shapeNode } from "./orbital-shape.js";
import { convergenceTable, curvesTable, diracTable, energiesTable, historyTable, integralsTable, orbitalId, polarisationTable } from "./orbital-tables.js";
import { workingNode } from "./working.js";

const OPEN = "states:orbitals";
const BESIDE = { species: "orbitals:beside-species", configuration: "orbitals:beside-configuration" };
const POLARISATION = "/structure/polarisation";

/** The fold; `act` offers stop, save and takeWay(fault, way). */
export class OrbitalsPart {
  #orbitals;
  #context;
  #act;
  #choice;
  #labelOf;
  #shown = [];
  #status = element("div", { class: "orbitals-status" });
  #beside = element("div", { class: "orbitals-status" });
  #result = element("div", { class: "evidence-parts" });

  constructor({ orbitals, context, fields, act }) {
    this.#orbitals = orbitals;
    this.#context = context;
    this.#act = act;
    this.#choice = scopedChoice(context.choice);
    this.#labelOf = (path) => fields.labelOf(path);
    const { view } = context;
    this.node = element("details", { class: "fold part orbitals" }, element("summary", { text: "Orbitals: radial functions, energies, integrals" }),
      element("div", { class: "fold-body" }, this.#fields(fields), this.#status, this.#beside, this.#result));
    this.node.open = view.get(OPEN) ?? false;
    this.node.addEventListener("toggle", () => {
      view.set(OPEN, this.node.open);
      orbitals.show(this.node.open);
    });
    orbitals.subscribe(() => this.show());
    orbitals.compare({ species: view.get(BESIDE.species) ?? "", configuration: view.get(BESIDE.configuration) ?? "" });
    orbitals.show(this.node.open);
  }

  open() {
    this.node.open = true;
  }

  #fields(fields) {
    const { store, setField, view } = this.#context;
    const box = element("input", { type: "checkbox" });
    const fill = () => {
      box.checked = valueAt(store.sheet, "/structure/relativity") !== false;
    };
    box.addEventListener("change", () => setField("/structure/relativity", box.checked ? undefined : false, box.checked ? "Relativity on" : "Relativity off"));
    store.subscribe(fill);
    fill();
    const typed = (key, label, hint) => {
      const id = freshId("beside");
      const input = element("input", { id, type: "text", class: "key", autocomplete: "off", autocapitalize: "off", autocorrect: "off", spellcheck: "false", "aria-describedby": `${id}-hint ${id}-echo` });
      input.value = view.get(BESIDE[key]) ?? "";
      input.addEventListener("input", () => {
        view.set(BESIDE[key], input.value.trim());
        this.#orbitals.compare({ ...this.#orbitals.beside.typed, [key]: input.value.trim() });
      });
      const echo = element("div", { class: "echo", id: `${id}-echo` });
      this[`${key}Echo`] = { echo, input };
      return element("div", { class: "field" }, element("label", { for: id, text: label }), element("span", { class: "hint", id: `${id}-hint`, text: hint }), input, echo, element("div", { class: "ways" }));
    };
    return element("div", { class: "question-fields" },
      element("label", { class: "check" }, box, element("span", { text: "Relativity in the radial equation" })),
      element("div", { class: "field-row" },
        fields.make(`${POLARISATION}/alpha`, { label: "Core polarisability", hint: "such as 0.95 a0^3; empty for none", group: POLARISATION }),
        fields.make(`${POLARISATION}/radius`, { label: "Cut-off radius", hint: "such as 1.2 a0", group: POLARISATION })),
      element("div", { class: "field-row" },
        typed("species", "Beside it: atom or ion", "to compare; empty for this atom"),
        typed("configuration", "Beside it: configuration", "empty for its ground one")));
  }

  /** Brings the fold in line with what is computed, under way or missing. */
  show() {
    const { own, beside } = this.#orbitals;
    if (!this.node.open) return;
    this.#showStatus(this.#status, own, "");
    this.#showStatus(this.#beside, beside, "Beside it: ");
    this.#showEchoes(beside);
    this.#result.classList.toggle("old", own.old);
    const shown = [own.result, beside.result, this.#context.settings.values];
    if (shown.every((part, i) => part === this.#shown[i])) return;
    this.#shown = shown;
    this.#draw();
  }

  #draw() {
    const { own, beside } = this.#orbitals;
    const place = focusPlace(this.#result);
    this.#choice.release();
    const context = { ...this.#context, settings: this.#context.settings.values, choice: this.#choice };
    this.#result.replaceChildren(...(own.result === null ? [] : evidence(own.result, beside.result, { ...context, sections: (l) => this.#orbitals.sections(l) })));
    place?.();
  }

  #showStatus(node, slot, before) {
    const { run } = slot;
    const kind = run?.shown ? "run" : slot.panic ?? JSON.stringify([slot.needs, slot.waits, slot.stopped, slot.faults, slot.old]);
    if (node.dataset.shown !== kind) {
      const inside = node.contains(document.activeElement);
      node.dataset.shown = kind;
      node.replaceChildren(...this.#statusNodes(slot, before));
      if (inside) (node.querySelector("button") ?? this.node.querySelector("summary")).focus();
    }
    if (run?.shown) setText(node.querySelector("p"), before + runWords(run));
  }

  #statusNodes(slot, before) {
    const line = (text, ...more) => element("p", {}, before, text, ...more);
    const start = (text) => element("button", { type: "button", class: "action", text, on: { click: () => this.#orbitals.start(slot) } });
    if (slot.run?.shown) return [element("div", { class: "run" }, element("p"), element("button", { type: "button", class: "action", text: "Stop", on: { click: () => this.#act.stop() } }))];
    if (slot.panic !== null) return [panicNode(slot.panic, () => this.#orbitals.start(slot), () => this.#act.save())];
    if (slot.waits !== null) return [element("div", { class: "run" }, line(`This will take ${estimateWords(slot.waits)}. It starts when you say so.`), start("Start"))];
    if (slot.stopped) return [element("div", { class: "run" }, line(slot.result ? "Stopped. The last answer is still here." : "Stopped."), start("Start again"))];
    if (slot.needs !== null) return [line(`Needs ${slot.needs}.`)];
    if (slot.faults.length > 0) return slot.faults.map((fault) => this.#faultNode(slot, fault));
    return slot.old ? [element("p", { class: "old-note", text: `${before}The last answer, from before your change:` })] : [];
  }

  // Only the sheet's own text has a field that a way out can fill.
  #faultNode(slot, fault) {
    const value = valueAt(slot.sheet, fault.path);
    const label = slot.name === "own" ? this.#labelOf(fault.path) : null;
    return element("div", { class: "at-fault" },
      label === null ? null : element("p", { class: "note", text: `${label}:` }),
      faultNode(fault, typeof value === "string" ? value : ""),
      slot.name === "own" ? element("div", { class: "ways" }, ...fault.ways.map((way) => wayButton(way, () => this.#act.takeWay(fault, way)))) : null);
  }

  #showEchoes({ reading, typed }) {
    for (const [key, path] of [["species", "/species"], ["configuration", "/configurations/0"]]) {
      const { echo, input } = this[`${key}Echo`];
      const faults = reading?.faults.filter((fault) => fault.path === path) ?? [];
      const rich = reading?.echo.find((one) => one.path === path)?.rich;
      echo.classList.toggle("at-fault", faults.length > 0);
      if (faults.length > 0) input.setAttribute("aria-invalid", "true");
      else input.removeAttribute("aria-invalid");
      const nodes = faults.length > 0 ? faults.map((fault) => faultNode(fault, typed[key])) : rich && typed[key] ? [richNode(rich, this.#context.settings.values)] : [];
      echo.replaceChildren(...nodes);
    }
  }
}

function runWords({ progress, estimate }) {
  const about = estimate ? `About ${duration(estimate.seconds)} in all.` : "";
  if (progress === null) return `Calculating. ${about}`.trim();
  const { label, configuration, of, iteration, residual } = progress;
  const which = of > 1 ? `, ${configuration + 1} of ${of}` : "";
  return `Calculating ${label}${which}: iteration ${iteration}, residual ${residual.toExponential(1).replace("-", "\u2212")}. ${about}`.trim();
}

// Every configuration of either atom, in the order in which they are compared; `short` is the name
// that tells them apart.
function setsOf(own, beside) {
  const of = ({ answer }) => [answer, ...answer.configurations].map((block) => {
    const { configuration, orbitals } = block;
    const outer = configuration ? [{ configuration: { core: null, subshells: configuration.subshells } }] : [`n = ${orbitals[0]?.n}`];
    return { species: answer.species, outer, name: [...answer.species, " ", ...(configuration?.rich ?? outer)], block, kinds: answer.kinds };
  });
  const all = [...of(own), ...(beside ? of(beside) : [])];
  const one = all.every(({ species }) => richPlain(species) === richPlain(all[0].species));
  return all.map(({ species, outer, ...set }, index) => ({ ...set, index, plain: richPlain(set.name), short: one ? outer : [...species, " ", ...outer] }));
}

// The curves of the picture door come in the order of the configurations, subshell by subshell.
function curvesOf(sets, own, beside) {
  const all = [...own.curves, ...(beside?.curves ?? [])];
  let at = 0;
  return sets.flatMap((set) => set.block.orbitals.map((orbital) => {
    const curve = all[at];
    at += 1;
    return { ...curve, id: orbitalId(set, orbital.label), set: set.index, outer: isOuter(set, orbital), name: [`${curve.label} of `, ...set.short], plain: `${curve.label} of ${set.plain}`, kind: set.kinds["orbitals.r"] };
  }));
}

function isOuter({ block: { configuration } }, { label }) {
  return configuration === null || configuration.subshells.some((subshell) => subshell.label === label);
}

function evidence(own, beside, context) {
  const { answer } = own;
  const sets = setsOf(own, beside);
  const part = (name, title, make) => fold(context, `orbitals:${name}`, [title], make);
  const integrals = sets.reduce((sum, { block }) => sum + block.integrals.length, 0);
  return [
    element("p", { class: "orbitals-say" }, richNode(answer.say, context.settings)),
    ...(answer.cautions ?? []).map((text) => element("p", { class: "caution" }, element("strong", { text: "Caution: " }), text)),
    ...radialParts(sets, curvesOf(sets, own, beside), context),
    element("div", { class: "parts" },
      part("shape", "Shape of the angular part", () => shapeNode([...new Set(sets.flatMap(({ block }) => block.orbitals.map(({ l }) => l)))].sort((a, b) => b - a), context.sections, context)),
      integrals > 0 ? part("integrals", `Slater integrals outside the core (${integrals})`, () => integralsTable(sets, context)) : null,
      part("convergence", "Energy, convergence and nucleus", () => [convergenceTable(sets, context), sets.some(({ block }) => block.history.length > 0) ? historyTable(sets, context) : null]),
      sets.some(({ block }) => block.polarisation) ? part("polarisation", "What core polarisation changed", () => polarisationTable(sets, context)) : null,
      sets.some(({ block }) => block.dirac) ? part("dirac", "Levels by Dirac’s equation", () => diracTable(sets, context)) : null,
      part("working", "Working of the orbitals", () => workingNode(answer, context.settings)),
      part("limits", "Limits of the orbitals", () => element("div", { class: "limits" }, element("ul", {}, ...answer.limits.map((text) => element("li", { text }))))),
    ),
  ];
}

const WHICH = { outer: "outside the filled core", core: "of the filled core", all: "all" };

function radialParts(sets, curves, context) {
  const others = sets.slice(1);
  const last = others.at(-1);
  const along = select(context, "orbitals:along", "Distance along", Object.entries(ALONG), redraw);
  const height = select(context, "orbitals:height", "Height", Object.entries(HEIGHTS), redraw);
  const which = select(context, "orbitals:which", "Subshells", Object.entries(WHICH), redraw);
  const noCore = curves.every(({ outer }) => outer);
  const few = others.length < MARKERS.length;
  const versus = others.length === 0 ? null : select(context, "orbitals:versus", "Beside the first", [
    ...(few && others.length > 1 ? [["all", "all others"]] : []), ...others.map((set) => [set.plain, set.plain]), ["none", "none"],
  ].sort(([one], [other]) => (other === last.plain) - (one === last.plain)), redraw);
  // Signs go by the place in the picture, not in the sheet.
  const shownSets = () => [sets[0], ...others.filter((set) => versus.value() === "all" || versus.value() === set.plain)];
  const shownCurves = () => {
    const places = new Map(shownSets().map((set, place) => [set.index, place]));
    const chosen = context.choice.get();
    return curves.filter((curve) => places.has(curve.set) && (noCore || which.value() === "all" || (which.value() === "outer") === curve.outer || curve.id === chosen))
      .map((curve) => ({ ...curve, set: places.get(curve.set) }));
  };
  const key = element("p", { class: "note set-list" });
  const changes = () => {
    const now = shownCurves();
    const shown = now.length > 0 ? now : curves.filter(({ set }) => set === 0);
    return { curves: shown, layout: radialLayout({ curves: shown, along: along.value(), height: height.value(), chosen: context.choice.get }) };
  };
  const name = () => ["Radial distributions of ", ...shownSets().flatMap((set, i) => [...(i > 0 ? [" and "] : []), ...set.name])];
  const list = () => {
    key.replaceChildren(...shownSets().flatMap((set, i) => [i > 0 ? "; " : "", richNode(set.name, context.settings), `: ${MARKERS[i].words}${MARKERS[i].sign ? ` ${MARKERS[i].sign}` : ""}`]));
    key.hidden = others.length === 0;
  };
  let now = changes();
  const pointsBox = element("div", {});
  const shown = picture({
    context, name: name(), layout: now.layout, walk: radialWalk,
    rest: ["Filled tick: most probable radius; hollow tick: mean radius. Left and right go along a curve, up and down to the next; ", pointerWords("a tap", "Enter"), " chooses it."],
    table: () => {
      pointsBox.replaceChildren(curvesTable(now.curves, context));
      return pointsBox;
    },
  });
  function redraw() {
    now = changes();
    list();
    shown.redraw({ layout: now.layout, name: name() });
    if (pointsBox.childElementCount > 0) pointsBox.replaceChildren(curvesTable(now.curves, context));
  }
  context.choice.subscribe(() => {
    now = changes();
    shown.redraw({ layout: now.layout });
  });
  list();
  return [
    element("div", { class: "choices" }, noCore ? null : which.node, versus?.node ?? null, along.node, height.node),
    key,
    tableAndPicture(energiesTable(sets, context), shown.node),
  ];
}
