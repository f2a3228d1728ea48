// What stands at each question: its reading, its last answer, and whether that answer is fresh.

import { parseLarge } from "./large-answer.js";

/** A folded question is asked once the sheet has rested this long, so that typing is not held up. */
const FOLDED_REST_MS = 150;
/** What is computed is asked for once the sheet has rested this long; folded, a little later. */
const COMPUTED_REST_MS = 250;
const COMPUTED_FOLDED_REST_MS = 600;
/** What levels and lines hang on: another field never asks for them again. */
const OF_LINES = ["species", "configurations", "structure", "measured", "window", "medium", "source", "refractive_index", "air"];
/** What the worker has computed of an atom is kept there: a superseded question about its splitting is awaited so long. */
export const PATIENCE_MS = 400;
/** A run shorter than this is not shown as one. */
export const SHOW_RUN_MS = 300;

/** The questions that the page has words for, in the order in which the work meets them. */
export const WORDS = {
  states: "Which states?",
  lines: "Which lines?",
  splitting: "How does it split?",
};

/** Questions whose answer is computed, in a worker of its own: what is asked there with them, and the keys on which they hang. */
const COMPUTED = {
  lines: { asks: ["levels", "lines"], matters: OF_LINES },
  splitting: { asks: ["splitting"], patience: PATIENCE_MS, matters: [...OF_LINES, "field", "line", "nucleus", "isotopes", "level"] },
};

export class Questions {
  #engine;
  #heavy;
  #store;
  #listeners = new Set();
  #turn = 0;

  /** `engine` reads and counts; `heavy()` gives the one that computes, so that typing never waits. */
  constructor(engine, heavy, store) {
    this.#engine = engine;
    this.#heavy = heavy;
    this.#store = store;
    /** The newest reading of the sheet, or null. */
    this.reading = null;
    /** The panic's words when reading itself broke, or null. */
    this.broken = null;
    this.about = null;
    this.entries = new Map();
    /** Whether a question is unfolded; the page says so. */
    this.isUnfolded = () => true;
    /** Whether the sheet that is read now is another one, not the same changed. */
    this.isOther = false;
  }

  /** Asks the core which questions it answers. */
  async begin() {
    const result = await this.#engine.request("about", "about", []);
    if (result.text === undefined) throw new Error(result.panic ?? "The core did not start.");
    this.about = JSON.parse(result.text);
    for (const name of this.about.questions.filter((question) => Object.hasOwn(WORDS, question))) {
      this.entries.set(name, {
        name, status: null, needs: null, way: null, faults: [], answer: null, fresh: false,
        run: null, waits: null, panic: null, stopped: false, unread: true,
        computed: COMPUTED[name]?.asks ?? null, key: null, answered: null, found: [], rest: 0, hasty: false,
      });
    }
  }

  /** A listener is told the name of the question that changed, or "reading". */
  subscribe(listener) {
    this.#listeners.add(listener);
  }

  /** How many of these faults a question hangs on. */
  count(name, faults) {
    const entry = this.entries.get(name);
    return faults.filter((fault) => entry.faults.includes(fault.path) || entry.found.includes(fault)).length;
  }

  get running() {
    return [...this.entries.values()].some((entry) => entry.run !== null && entry.run.shown);
  }

  /** The sheet has changed: reads it and asks every question that is ready. */
  async refresh() {
    this.#turn += 1;
    const turn = this.#turn;
    this.#engine.supersede("answer:");
    const { sheet } = this.#store;
    for (const entry of this.entries.values()) {
      if (entry.computed && entry.key === computedKey(entry.name, sheet)) continue;
      if (entry.computed) this.#leave(entry);
      this.#endRun(entry);
      entry.unread = true;
      this.#tell(entry.name);
    }
    const result = await this.#engine.request("read", "read", [sheet]);
    if (turn !== this.#turn || result.superseded || result.stopped) return;
    if (result.panic !== undefined) {
      this.broken = result.panic;
      for (const entry of this.entries.values()) Object.assign(entry, { unread: false, fresh: false, key: null });
      this.#tell("reading");
      return;
    }
    this.broken = null;
    this.reading = JSON.parse(result.text);
    for (const question of this.reading.questions) {
      const entry = this.entries.get(question.name);
      if (entry === undefined) continue;
      Object.assign(entry, { status: question.status, needs: question.needs, way: question.way, faults: question.faults, unread: false });
      if (entry.computed) this.#settle(entry, computedKey(entry.name, sheet));
      else Object.assign(entry, { fresh: false, waits: null, panic: null, stopped: false });
      // What was there before a field was emptied stays to be looked at; of another sheet nothing does.
      if (question.status === "lacks" && (this.isOther || !entry.computed)) entry.answer = null;
    }
    // The worker answers while the page shows how the sheet was read.
    const ready = [...this.entries.values()].filter((entry) => entry.status === "ready" && !entry.computed);
    for (const entry of ready.filter(({ name }) => this.isUnfolded(name))) this.ask(entry.name);
    for (const entry of ready.filter(({ name }) => !this.isUnfolded(name))) {
      entry.unread = true;
      setTimeout(() => {
        if (turn === this.#turn && entry.run === null && entry.unread) this.ask(entry.name);
      }, FOLDED_REST_MS);
    }
    this.#tell("reading");
  }

  // What was computed for this very part of the sheet, or is under way, stands as it is.
  #settle(entry, key) {
    if (entry.status !== "lacks" && entry.key === key) {
      // A fault in another field, which typing often passes through, ends no run.
      entry.unread = entry.rest !== 0;
      if (entry.found.length > 0) this.#fault(entry, entry.found);
    } else if (entry.status !== "ready") {
      this.#leave(entry);
      entry.fresh = false;
    } else {
      const first = entry.answer === null;
      Object.assign(entry, { key, found: [], waits: null, panic: null, stopped: false, fresh: entry.answer !== null && entry.answered === key });
      if (entry.fresh) return;
      entry.unread = true;
      const rest = this.isUnfolded(entry.name) ? (first || entry.hasty ? 0 : COMPUTED_REST_MS) : COMPUTED_FOLDED_REST_MS;
      entry.hasty = false;
      if (rest === 0) this.ask(entry.name);
      else entry.rest = setTimeout(() => this.ask(entry.name), rest);
    }
  }

  /** The next change of the sheet does not have to rest before this question is asked. */
  hasten(name) {
    const entry = this.entries.get(name);
    if (entry) entry.hasty = true;
  }

  // Nothing of it is wanted any more; the answer on show is from before the change.
  #leave(entry) {
    this.#unrest(entry);
    if (entry.run !== null) this.#heavy().supersede(`answer:${entry.name}:`);
    this.#endRun(entry);
    entry.key = null;
  }

  #unrest(entry) {
    clearTimeout(entry.rest);
    entry.rest = 0;
  }

  /** Asks one question; `asked` means that the person has said so, however long it takes. */
  async ask(name, asked = false) {
    const entry = this.entries.get(name);
    const run = { since: performance.now(), estimate: null, progress: null, shown: false, timer: 0 };
    this.#unrest(entry);
    this.#endRun(entry);
    Object.assign(entry, { run, waits: null, panic: null, stopped: false, unread: false });
    run.timer = setTimeout(() => {
      run.shown = true;
      this.#tell(name);
    }, SHOW_RUN_MS);
    const note = (what) => (value) => {
      run[what] = value;
      if (run.shown) this.#tell(name);
    };
    const { sheet } = this.#store;
    const key = entry.key;
    const engine = entry.computed ? this.#heavy() : this.#engine;
    const answers = {};
    let result;
    let faults = null;
    for (const question of this.#askedFor(entry)) {
      result = await engine.request(`answer:${name}:${question}`, "answer", [sheet, question], { asked, patience: COMPUTED[name]?.patience, onEstimate: note("estimate"), onProgress: note("progress") });
      if (entry.run !== run) return;
      if (result.text === undefined) break;
      const message = await parseLarge(result.text);
      if (entry.run !== run) return;
      answers[question] = message.answer;
      faults = message.answer ? null : message.faults;
      if (faults !== null) break;
    }
    this.#endRun(entry);
    if (result.superseded) return;
    if (result.waits) entry.waits = result.waits;
    else if (result.stopped) entry.stopped = true;
    else if (result.panic !== undefined) entry.panic = result.panic;
    else if (faults === null) {
      const { [name]: answer, ...beside } = answers;
      Object.assign(entry, { answer: entry.computed ? { ...answer, beside } : answer, fresh: true, answered: key });
    } else {
      entry.found = faults;
      this.#fault(entry, faults);
      this.#tell("reading");
    }
    this.#tell(name);
  }

  // Levels are asked for where the atom has them: shells of any atom may have no energies.
  #askedFor(entry) {
    if (!entry.computed) return [entry.name];
    const ready = (name) => name === entry.name || this.reading.questions.some((question) => question.name === name && question.status === "ready");
    return entry.computed.filter(ready);
  }

  // Faults that only answering could find are shown like those of the reading.
  #fault(entry, faults) {
    entry.status = "fault";
    entry.fresh = false;
    const known = new Set(this.reading.faults.map((fault) => JSON.stringify(fault)));
    const found = faults.filter((fault) => !known.has(JSON.stringify(fault)));
    this.reading = { ...this.reading, faults: [...this.reading.faults, ...found] };
  }

  /** Ends every run; the last answers stay. */
  stop() {
    const running = [...this.entries.values()].filter((entry) => entry.run !== null);
    if (running.some(({ computed }) => !computed)) this.#engine.stop();
    if (running.some(({ computed }) => computed)) this.#heavy().stop();
  }

  #endRun(entry) {
    if (entry.run === null) return;
    clearTimeout(entry.run.timer);
    entry.run = null;
  }

  #tell(what) {
    for (const listener of this.#listeners) listener(what);
  }
}

/** The keys of the sheet on which a computed question hangs. */
export function matters(name) {
  return COMPUTED[name].matters;
}

function computedKey(name, sheet) {
  return JSON.stringify(matters(name).map((key) => sheet[key] ?? null));
}

/**
 * The state of a rung: {kind, words}. `shownFaults` is how many faults are on show; a fault that
 * is still held back because somebody is typing only makes the answer old.
 */
export function rungState(entry, shownFaults) {
  if (entry.run?.shown) {
    const seconds = entry.run.estimate?.seconds;
    return { kind: "running", words: seconds ? `running, about ${duration(seconds)}` : "running", part: entry.run.progress?.done ?? 0 };
  }
  if (entry.panic !== null) return { kind: "fault", words: "stopped unexpectedly" };
  if (entry.waits !== null) return { kind: "ready", words: `${estimateWords(entry.waits)}, waits for Start` };
  if (entry.stopped) return { kind: entry.answer ? "stale" : "ready", words: entry.answer ? "stopped, from before your change" : "stopped" };
  if (entry.status === "fault" && shownFaults > 0) {
    return { kind: "fault", words: `${shownFaults} ${shownFaults === 1 ? "fault" : "faults"}` };
  }
  if (entry.status === "lacks") return { kind: "lacks", words: `needs ${entry.needs}` };
  if (entry.answer !== null && (entry.fresh || isSettling(entry))) return { kind: "answered", words: "answered" };
  if (entry.answer !== null) return { kind: "stale", words: "from before your change" };
  return { kind: "ready", words: "open to ask" };
}

/** Whether the rung is about to change: the newest sheet has not been read or answered yet. */
export function isSettling(entry) {
  return entry.unread || entry.run !== null;
}

/** "12 s" or "3 min". */
export function duration(seconds) {
  if (seconds >= 90) return `${Math.round(seconds / 60)}\u00a0min`;
  return `${seconds < 10 ? Math.max(Math.round(seconds * 10) / 10, 0.1) : Math.round(seconds)}\u00a0s`;
}

/** "about 12 s and 400 MB". */
export function estimateWords(estimate) {
  return `about ${duration(estimate.seconds)} and ${Math.max(Math.round(estimate.megabytes), 1)}\u00a0MB`;
}
