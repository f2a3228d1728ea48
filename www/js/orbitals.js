// The radial functions that are on show: the sheet's own, and those of an atom set beside them.
//
// They hang on atom, configurations and structure of the sheet alone, so what was computed is kept
// here by these; another field, line or title never asks for them again. They have a worker of their
// own, so that reading and counting never wait for them.

import { SHOW_RUN_MS } from "./questions.js";

/** A changed atom is computed once the sheet has rested this long. */
const REST_MS = 250;
/** Answers that are kept; the oldest goes first. */
const KEPT = 24;

export class Orbitals {
  #engine;
  #store;
  #questions;
  #kept = new Map();
  #sections = new Map();
  #listeners = new Set();
  #open = false;

  /** `heavy()` gives the worker that computes. */
  constructor(heavy, store, questions) {
    this.#engine = heavy;
    this.#store = store;
    this.#questions = questions;
    /** The sheet's own atom. */
    this.own = emptySlot("own");
    /** Another one beside it, with how its text was read. */
    this.beside = { ...emptySlot("beside"), typed: {}, reading: NOTHING };
    questions.subscribe((what) => {
      if (what === "reading") this.refresh();
    });
  }

  subscribe(listener) {
    this.#listeners.add(listener);
  }

  get running() {
    return [this.own, this.beside].some(({ run }) => run?.shown);
  }

  /** Whether anybody looks; a run that has begun goes on all the same. */
  show(open) {
    this.#open = open;
    this.refresh();
  }

  /** Another atom to set beside: a sheet with its species or its configuration, or with neither. */
  compare(typed) {
    this.beside.typed = typed;
    this.refresh();
  }

  /** Brings both in line with the sheet as it was read last. */
  refresh() {
    const reading = this.#questions.reading;
    if (!this.#open || reading === null) return;
    const sheet = partOf(this.#store.sheet);
    const { status, needs } = reading.questions.find(({ name }) => name === "orbitals");
    if (status === "ready") this.#want(this.own, sheet);
    else if (status === "lacks") this.#leave(this.own, { needs });
    // A fault anywhere else in the sheet leaves them as they are.
    else if (JSON.stringify(sheet) !== this.own.key) this.#leave(this.own, { result: this.own.result, needs: this.own.result ? null : "a sheet without faults" });
    this.#readBeside(sheet);
    this.#tell();
  }

  /** Computes although it takes long, or again after a stop. */
  start(slot) {
    this.#run(slot, true);
  }

  /** Ends the runs; what was computed stays. */
  stop() {
    if (this.own.run !== null || this.beside.run !== null) this.#engine().stop();
  }

  /** The sections of every real spherical harmonic of this ℓ, or null when that was stopped. */
  async sections(l) {
    if (!this.#sections.has(l)) {
      const { text } = await this.#call(`sections:${l}`, "sections", [l]);
      if (text === undefined) return null;
      this.#sections.set(l, JSON.parse(text));
    }
    return this.#sections.get(l);
  }

  // The text is read by the core as a sheet of its own.
  async #readBeside({ species: own, structure }) {
    const slot = this.beside;
    const { typed } = slot;
    const { species = own, configurations } = typed;
    if (species === own && !configurations) {
      slot.reading = NOTHING;
      this.#leave(slot, {});
      return;
    }
    const sheet = partOf({ species, configurations, structure: structure?.relativity === false ? { relativity: false } : undefined });
    if (JSON.stringify(sheet) === slot.key) return;
    const { text } = await this.#call("beside:read", "read", [sheet]);
    if (text === undefined || slot.typed !== typed) return;
    slot.reading = JSON.parse(text);
    const { status, needs } = slot.reading.questions.find(({ name }) => name === "orbitals");
    if (status === "ready") this.#want(slot, sheet);
    else this.#leave(slot, { needs });
    this.#tell();
  }

  #call(key, door, parameters, options) {
    return this.#engine().request(key, door, parameters, options);
  }

  #want(slot, sheet) {
    const key = JSON.stringify(sheet);
    if (slot.key === key) return;
    const first = slot.result === null;
    this.#leave(slot, { result: slot.result });
    Object.assign(slot, { key, sheet });
    const kept = this.#kept.get(key);
    if (kept) Object.assign(slot, kept, { old: false });
    else slot.rest = setTimeout(() => this.#run(slot, false), first ? 0 : REST_MS);
  }

  // Nothing is wanted any more; what stays on show is from before the change.
  #leave(slot, { needs = null, result = null }) {
    clearTimeout(slot.rest);
    if (slot.run !== null) this.#engine().supersede(`${slot.name}:`);
    this.#end(slot);
    Object.assign(slot, { key: null, needs, result, old: result !== null, faults: [], waits: null, stopped: false, panic: null });
  }

  async #run(slot, asked) {
    this.#end(slot);
    const run = { shown: false, estimate: null, progress: null, timer: 0 };
    Object.assign(slot, { run, waits: null, stopped: false, panic: null });
    const { key, sheet } = slot;
    run.timer = setTimeout(() => {
      run.shown = true;
      this.#tell();
    }, SHOW_RUN_MS);
    const note = (what) => (value) => {
      run[what] = value;
      if (run.shown) this.#tell();
    };
    const options = { asked, onEstimate: note("estimate"), onProgress: note("progress") };
    let found = await this.#call(`${slot.name}:answer`, "answer", [sheet, "orbitals"], options);
    const { answer, faults } = found.text === undefined ? {} : JSON.parse(found.text);
    if (answer && slot.run === run) found = await this.#call(`${slot.name}:curves`, "curves", [sheet], options);
    if (slot.run !== run || found.superseded) return;
    this.#end(slot);
    if (found.text === undefined) Object.assign(slot, { waits: found.waits ?? null, stopped: found.stopped ?? false, panic: found.panic ?? null });
    else {
      const kept = faults ? { result: null, faults } : { result: { answer, curves: JSON.parse(found.text).curves }, faults: [] };
      this.#kept.set(key, kept);
      if (this.#kept.size > KEPT) this.#kept.delete(this.#kept.keys().next().value);
      Object.assign(slot, kept, { old: false });
    }
    this.#tell();
  }

  #end(slot) {
    clearTimeout(slot.run?.timer);
    slot.run = null;
  }

  #tell() {
    for (const listener of this.#listeners) listener();
  }
}

const NOTHING = { faults: [], echo: [] };

function emptySlot(name) {
  return { name, key: null, sheet: null, result: null, old: false, needs: null, faults: [], run: null, rest: 0, waits: null, stopped: false, panic: null };
}

// What radial functions hang on.
function partOf({ species, configurations, structure }) {
  return Object.fromEntries(Object.entries({ rungline: 1, species, configurations, structure }).filter(([, value]) => value !== undefined));
}
