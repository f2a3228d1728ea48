// Sweeping the field: a map of states and components against B, computed once for all that is not
// the field itself, and the rule that a reader moves over it.
//
// While the rule moves nothing is asked: the map is read between its fields. Where it rests, the
// sheet gets the field, and the exact answer is asked for at once.

import { PATIENCE_MS, SHOW_RUN_MS, matters } from "./questions.js";
import { valueAt } from "./pointer.js";

const FLUX_DENSITY = "/field/flux_density";
const UP_TO = "/field/up_to";
/** A rule that is held still so long has come to rest. */
const REST_MS = 100;
/** Keys come one after another: the sheet gets the last of them. */
const KEYS_REST_MS = 160;
const KEPT = 4;
/** Steps of the slider, and of the rule by keys. */
export const STEPS = 1000;
/** Units in which a field is written, in tesla. */
const UNITS = { T: 1, mT: 1e-3, kG: 0.1, G: 1e-4 };

export class FieldSweep {
  #engine;
  #store;
  #questions;
  #listeners = new Set();
  #kept = new Map();
  #key = null;
  #sheet = null;
  #written = null;
  #timer = 0;
  #held = false;

  /** `heavy()` gives the worker that computes. */
  constructor(heavy, store, questions) {
    this.#engine = heavy;
    this.#store = store;
    this.#questions = questions;
    /** The map, or null. */
    this.map = null;
    /** Where the rule is while no exact answer is there for it, in tesla; or null. */
    this.at = null;
    /** The field of the last exact answer, and the end of its map, in tesla. */
    this.exact = null;
    this.end = 0;
    /** How the run of the map stands, as for a question. */
    this.slot = { run: null, waits: null, stopped: false, panic: null, answer: null };
    this.faults = [];
    store.subscribe(() => this.#changed());
  }

  /** A listener is told "move" (the rule), "map" (another map, or none) or "run". */
  subscribe(listener) {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  get running() {
    return this.slot.run?.shown === true;
  }

  /** Where the rule stands, in tesla. */
  get place() {
    return this.at ?? this.exact ?? 0;
  }

  /** An exact answer has come: its map is wanted, unless it is there. */
  answered(answer, sheet) {
    const field = answer.field ?? null;
    this.exact = field?.tesla ?? null;
    this.end = Math.max(field?.up_to ?? 0, field?.tesla ?? 0);
    if (this.at !== null && !this.#held && this.exact !== null && same(this.at, this.exact)) this.at = null;
    // Factors g alone need no map: they make straight lines.
    if (!(this.end > 0) || answer.method !== "full") {
      this.#leave(null);
      return;
    }
    const wanted = mapSheet(sheet, this.end);
    const key = JSON.stringify(wanted);
    if (key === this.#key && (this.map !== null || this.slot.run !== null || this.slot.waits !== null || this.slot.stopped || this.faults.length > 0)) {
      this.#tell("move");
      return;
    }
    this.#leave(key);
    this.#sheet = wanted;
    const kept = this.#kept.get(key);
    if (kept) this.map = kept;
    else this.#run(false);
    this.#tell("map");
  }

  /** There is no answer. */
  clear() {
    Object.assign(this, { at: null, exact: null, end: 0 });
    this.#leave(null);
  }

  /** Computes the map although it takes long, or again after a stop. */
  start() {
    this.#run(true);
  }

  /** Ends the run of the map. */
  stop() {
    if (this.slot.run !== null) this.#engine().stop();
  }

  /** The rule is moved: `held` while a finger or a button is down. */
  move(tesla, held = false) {
    this.at = Math.min(Math.max(tesla, 0), this.end);
    this.#held = held;
    this.#written = this.#store.text(FLUX_DENSITY);
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => this.#write(), held ? REST_MS : KEYS_REST_MS);
    this.#tell("move");
  }

  /** By so many steps. */
  step(count) {
    const here = Math.round((this.place / this.end) * STEPS);
    this.move(((here + count) / STEPS) * this.end);
  }

  /** The rule has been let go. */
  release() {
    this.#held = false;
    clearTimeout(this.#timer);
    if (this.at !== null) this.#write();
  }

  /** The text of a field as this sheet writes it. */
  textOf(tesla) {
    const [, unit] = /([a-zA-Z]+)\s*$/.exec(this.#store.text(FLUX_DENSITY)) ?? [];
    const name = Object.hasOwn(UNITS, unit ?? "") ? unit : "T";
    const value = tesla / UNITS[name];
    const step = this.end / UNITS[name] / STEPS;
    const decimals = Math.min(Math.max(0, Math.ceil(-Math.log10(step) - 1e-9)), 12);
    return `${Number(value.toFixed(decimals))} ${name}`;
  }

  // The sheet gets the field; with the first one the end of the map too, so that it stays.
  #write() {
    if (this.at === null) return;
    const text = this.textOf(this.at);
    if (this.#store.text(FLUX_DENSITY) === text) {
      if (!this.#held && this.exact !== null && same(this.exact, this.at)) {
        this.at = null;
        this.#tell("move");
      }
      return;
    }
    this.#written = text;
    const [number, unit] = text.split(" ");
    this.at = Number(number) * UNITS[unit];
    this.#questions.hasten("splitting");
    if (valueAt(this.#store.sheet, UP_TO) === undefined) this.#store.put([[FLUX_DENSITY, text], [UP_TO, this.textOf(this.end)]], `Field ${text}`);
    else this.#store.type(FLUX_DENSITY, text, `Field ${text}`);
    if (!this.#held) this.#store.rest();
  }

  // Somebody typed another field, or undid: the rule is there.
  #changed() {
    if (this.at === null || this.#store.text(FLUX_DENSITY) === this.#written) return;
    if (this.#held) return;
    clearTimeout(this.#timer);
    this.at = null;
    this.#tell("move");
  }

  #leave(key) {
    if (this.slot.run !== null) this.#engine().supersede("map:");
    this.#end();
    this.#key = key;
    this.map = null;
    this.faults = [];
    Object.assign(this.slot, { waits: null, stopped: false, panic: null });
    if (key === null) this.#tell("map");
  }

  async #run(asked) {
    this.#end();
    const run = { shown: false, estimate: null, progress: null, timer: 0 };
    Object.assign(this.slot, { run, waits: null, stopped: false, panic: null });
    run.timer = setTimeout(() => {
      run.shown = true;
      this.#tell("run");
    }, SHOW_RUN_MS);
    const note = (what) => (value) => {
      run[what] = value;
      if (run.shown) this.#tell("run");
    };
    const found = await this.#engine().request("map:splitting", "splitting_map", [this.#sheet], { asked, patience: PATIENCE_MS, onEstimate: note("estimate"), onProgress: note("progress") });
    if (this.slot.run !== run) return;
    this.#end();
    if (found.text === undefined) Object.assign(this.slot, { waits: found.waits ?? null, stopped: found.stopped ?? false, panic: found.panic ?? null });
    else {
      const { map, faults = [] } = JSON.parse(found.text);
      this.map = map ?? null;
      this.faults = faults;
      if (map) this.#kept.set(this.#key, map);
      if (this.#kept.size > KEPT) this.#kept.delete(this.#kept.keys().next().value);
    }
    this.#tell("map");
  }

  #end() {
    clearTimeout(this.slot.run?.timer);
    this.slot.run = null;
  }

  #tell(what) {
    for (const listener of this.#listeners) listener(what);
  }
}

// What the map hangs on: the same for every field up to its end.
function mapSheet(sheet, end) {
  const own = Object.fromEntries(matters("splitting").filter((key) => sheet[key] !== undefined).map((key) => [key, sheet[key]]));
  const field = { ...own.field, flux_density: `${end} T`, up_to: `${end} T` };
  return { rungline: 1, ...own, field };
}

function same(a, b) {
  return Math.abs(a - b) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b));
}
