// The field map with its rule, and how its computing stands.

import { element } from "../dom.js";
import { faultNode } from "../fields.js";
import { fieldMapLayout } from "../plot/field-map.js";
import { SIGNS } from "../plot/pattern.js";
import { picture } from "../plot/picture.js";
import { ReadingRule } from "../plot/reading-rule.js";
import { trueMinus } from "../digits.js";
import { runNodes, runWords } from "../run-nodes.js";
import { mapPanels } from "./field-panels.js";
import { pointerWords } from "./fold.js";
import { stateRich } from "./splitting-names.js";
import { stateAt } from "./sweep-values.js";
import { placeIn } from "../plot/hermite.js";

const NOTHING = () => ({ height: 0, marks: [], draw() {} });

export class FieldMapView {
  #sweep;
  #context;
  #figure;
  #rule;
  #shown = null;
  #unit = null;
  #choice = "";
  #multipole = null;
  #linearTo = null;
  #found = { crossings: [], component_crossings: [] };
  #empty = element("div", { class: "map-status" });
  #drawn = null;

  constructor({ sweep, context, toTable }) {
    this.#sweep = sweep;
    this.#context = context;
    this.#rule = new ReadingRule({
      value: (x) => this.#shown.rule.tesla(x),
      move: (tesla) => sweep.move(tesla, true),
      release: () => sweep.release(),
    });
    this.#figure = picture({
      context, name: "", layout: NOTHING, overlay: this.#rule.node, tableNear: toTable,
      rest: [], steer: (key, far) => this.#steer(key, far),
    });
    this.node = element("div", { class: "map-part" }, this.#empty, this.#figure.node);
    context.choice.subscribe(() => this.redraw());
  }

  /** `what`: {unit, choice, multipole, linearTo, found (crossings), name, settings}. */
  set(what) {
    this.#unit = what.unit;
    this.#choice = what.choice;
    this.#multipole = what.multipole;
    this.#linearTo = what.linearTo;
    this.#found = what.found;
    this.#context = { ...this.#context, settings: what.settings };
    this.redraw({ name: what.name });
  }

  /** Another map, choice or unit. */
  redraw(changes = {}) {
    this.showRun();
    const { map } = this.#sweep;
    this.#figure.node.hidden = map === null;
    if (map === null || this.#unit === null) return;
    const chosen = this.#context.choice.get();
    this.#drawn = map;
    this.#figure.redraw({
      ...changes,
      layout: fieldMapLayout({
        fields: map.tesla, panels: mapPanels(map, this.#choice, this.#unit, this.#multipole, this.#found), at: () => this.#sweep.place,
        reading: (series, panel, place) => this.#reading(series, panel, place),
        chosen: (series) => chosen !== null && (series.id === chosen || series.ids.includes(chosen)),
        axis: [{ text: "Field (T)" }], linearTo: this.#linearTo, ruleText: () => this.#ruleText(),
        placed: (shown) => this.#placed(shown),
      }),
    });
    this.#say();
  }

  /** The rule has moved: nothing else is drawn anew. */
  moved() {
    if (this.#shown === null || this.#sweep.map !== this.#drawn || this.#drawn === null) return;
    this.#placeRule();
    this.#figure.moveMarks(this.#shown.marksAt(this.#sweep.place));
    this.#say();
  }

  #placed(shown) {
    this.#shown = shown;
    this.#placeRule();
  }

  #placeRule() {
    const { x, top, bottom, width } = this.#shown.rule;
    const at = x(this.#sweep.place);
    this.#rule.place(at, top, bottom, this.#ruleText(), at !== null && at > width - 130);
  }

  #ruleText() {
    return `${this.#sweep.at === null ? "" : "~\u00a0"}${this.#sweep.textOf(this.#sweep.place).replace(" ", "\u00a0")}`;
  }

  #say() {
    const hint = pointerWords("Drag the rule; tap a curve or a sign.", "Drag the rule, or move it with ← and →; ↑ and ↓ walk over states and signs, + enlarges the field about the cursor.");
    this.#figure.say(this.#sweep.at === null ? hint : `${this.#ruleText()}: ${hint}`);
  }

  #steer(key, far) {
    if (key !== "ArrowLeft" && key !== "ArrowRight") return false;
    this.#sweep.step((key === "ArrowRight" ? 1 : -1) * (far === 1 ? 5 : 50));
    return true;
  }

  // Read from the map, so never with a kind.
  #reading(series, panel, place) {
    const rough = (value, unit) => ({ number: { text: `~${trueMinus(value)}`, unit } });
    const five = (value) => Number(value.toPrecision(5));
    if (series.state) {
      const { energy, slope } = stateAt(series.state, place);
      // As fine as what the field does to the states of this panel.
      const step = Math.max(...panel.series.flatMap(({ values }) => [values[0], values.at(-1)]).map((value) => Math.abs(value - panel.reference)));
      const decimals = Math.min(Math.max(4 - Math.floor(Math.log10(step || 1)), 0), 12);
      return [...stateRich(series.state), ` at ${this.#ruleText()}: `, rough(Number(energy.toFixed(decimals)), "cm-1"), ", slope ", rough(five(slope), "cm-1 T-1")];
    }
    const { row } = series;
    const value = (stateAt({ energies: series.values, slopes: series.slopes }, place).energy) * panel.factor;
    return [...stateRich(series.lower), " – ", ...stateRich(series.upper), ", ", { sign: SIGNS[row.polarisation] }, `, at ${this.#ruleText()}: `, rough(five(value), this.#unit.name)];
  }

  /** How the run of the map stands, in its place. */
  showRun() {
    const { slot, map, faults } = this.#sweep;
    const running = slot.run?.shown === true;
    const key = map !== null ? "" : running ? "run" : JSON.stringify([slot.waits, slot.panic, slot.stopped, faults, this.#sweep.end > 0]);
    if (this.#empty.dataset.shown === key) {
      if (running) this.#empty.querySelector("p").textContent = `The map: ${runWords(slot.run)}`;
      return;
    }
    this.#empty.dataset.shown = key;
    const { stop, start, save, putField } = this.#context.act;
    const nodes = map !== null ? [] : faults.length > 0 ? faults.map((fault) => faultNode(fault, ""))
      : !(this.#sweep.end > 0) ? [
        element("p", { text: "A map needs a field to run up to." }),
        element("button", { type: "button", class: "action", text: "Put in 0.5 T", on: { click: putField } }),
      ] : runNodes({ ...slot, answer: null }, false, { stop, start, again: start, save });
    this.#empty.replaceChildren(...nodes);
    this.node.hidden = map === null && nodes.length === 0;
  }
}
