// Which lines are on show, and by what their strength is measured: one set of choices for the
// diagram, the spectrum and the list.

import { element } from "../dom.js";
import { richPlain } from "../rich.js";
import { check, select } from "./fold.js";
import { placeUnits } from "./line-units.js";

/** Levels in the list of lower levels; more help nobody. */
const LISTED = 400;
/** Of more lines than these the forbidden ones wait until they are asked for. */
const MANY = 2000;
const MEASURES = [["intensity", "emitted intensity"], ["absorption", "absorption"], ["A", "A"], ["gf", "gf"]];
const PARTS = [["0", "nothing"], ["0.1", "10 % of the strongest"], ["0.01", "1 %"], ["0.001", "0.1 %"], ["1e-4", "10⁻⁴"], ["1e-6", "10⁻⁶"]];

/** `changed()` is called after every choice. */
export class LineFilters {
  #answer;
  #levels;
  #rows = null;

  constructor(answer, levels, context, changed) {
    this.#answer = answer;
    this.#levels = levels;
    this.units = placeUnits(answer);
    const act = () => {
      this.#rows = null;
      changed();
    };
    const { lines, window } = answer;
    const multipoles = ["E1", "M1", "E2"].filter((name) => lines.some((line) => line.multipole === name));
    const measures = MEASURES.filter(([key]) => lines.some((line) => typeof line[key] === "number"));
    this.measureBox = select(context, "lines:measure", "Strength by", measures, act);
    this.least = select(context, "lines:least", "Leave out below", PARTS, act);
    this.multipole = select(context, "lines:multipole", "Multipole", [["", "all"], ...multipoles.map((name) => [name, name])], act, lines.length > MANY ? multipoles[0] : null);
    this.lower = select(context, "lines:lower", "Ends on", this.#lowerOptions(), act);
    this.unit = select(context, "lines:unit", "Places in", Object.keys(this.units).map((key) => [key, key === "cm-1" ? "cm⁻¹" : key]), act);
    this.more = check(context, "lines:more", "More columns", act);
    this.inWindow = window ? check(context, "lines:window", `Only the window, ${window.lines} ${window.lines === 1 ? "line" : "lines"}`, act, true) : null;
    this.node = element("div", { class: "choices filters" },
      ...[this.inWindow, this.measureBox, this.least, this.multipole, this.lower, this.unit, this.more].filter(Boolean).map(({ node }) => node));
  }

  /** The key by which strength is measured. */
  get measure() {
    return this.measureBox.value();
  }

  /** The lines that pass every choice, in the order of the answer. */
  get rows() {
    this.#rows ??= this.#passing();
    return this.#rows;
  }

  #lowerOptions() {
    const configurations = [...new Set([...this.#levels.values()].map((level) => level.configuration))];
    const levels = [...this.#levels.values()].sort((a, b) => a.energy - b.energy).slice(0, LISTED);
    return [["", "any"],
      ...configurations.map((name) => [`of ${name}`, `any of ${name}`]),
      ...levels.map(({ label, rich }) => [label, richPlain(rich)])];
  }

  #passing() {
    const { lines, window } = this.#answer;
    const [multipole, lower, { measure }] = [this.multipole.value(), this.lower.value(), this];
    const inWindow = this.inWindow?.value() === true;
    const part = Number(this.least.value());
    const own = lines.filter((line) => typeof line.wavenumber === "number"
      && (multipole === "" || line.multipole === multipole)
      && (lower === "" || line.lower === lower || lower === `of ${this.#levels.get(line.lower)?.configuration}`)
      && (!inWindow || (line.vacuum_nm >= (window.from_nm ?? 0) && line.vacuum_nm <= (window.to_nm ?? Infinity))));
    if (part === 0) return own;
    const strongest = own.reduce((most, line) => Math.max(most, line[measure] ?? 0), 0);
    return own.filter((line) => line[measure] >= part * strongest);
  }
}
