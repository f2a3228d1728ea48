// What stands at each question: its reading, its last answer, and whether that answer is fresh.

/** A folded question is asked once the sheet has rested this long, so that typing is not held up. */
const FOLDED_REST_MS = 150;
/** A run shorter than this is not shown as one. */
export const SHOW_RUN_MS = 300;

/** The questions that the page has words for, in the order in which the work meets them. */
export const WORDS = {
  states: "Which states?",
  lines: "Which lines?",
  splitting: "How does it split?",
};

export class Questions {
  #engine;
  #store;
  #listeners = new Set();
  #turn = 0;

  constructor(engine, store) {
    this.#engine = engine;
    this.#store = store;
    /** The newest reading of the sheet, or null. */
    this.reading = null;
    /** The panic's words when reading itself broke, or null. */
    this.broken = null;
    this.about = null;
    this.entries = new Map();
    /** Whether a question is unfolded; the page says so. */
    this.isUnfolded = () => true;
  }

  /** Asks the core which questions it answers. */
  async begin() {
    const result = await this.#engine.request("about", "about", []);
    if (result.text === undefined) throw new Error(result.panic ?? "The core did not start.");
    this.about = JSON.parse(result.text);
    for (const name of this.about.questions.filter((question) => Object.hasOwn(WORDS, question))) {
      this.entries.set(name, {
        name, status: null, needs: null, way: null, answer: null, fresh: false,
        run: null, waits: null, panic: null, stopped: false, unread: true,
      });
    }
  }

  /** A listener is told the name of the question that changed, or "reading". */
  subscribe(listener) {
    this.#listeners.add(listener);
  }

  get running() {
    return [...this.entries.values()].some((entry) => entry.run !== null && entry.run.shown);
  }

  /** The sheet has changed: reads it and asks every question that is ready. */
  async refresh() {
    this.#turn += 1;
    const turn = this.#turn;
    this.#engine.supersede("answer:");
    for (const entry of this.entries.values()) {
      this.#endRun(entry);
      entry.unread = true;
      this.#tell(entry.name);
    }
    const result = await this.#engine.request("read", "read", [this.#store.sheet]);
    if (turn !== this.#turn || result.superseded || result.stopped) return;
    if (result.panic !== undefined) {
      this.broken = result.panic;
      for (const entry of this.entries.values()) Object.assign(entry, { unread: false, fresh: false });
      this.#tell("reading");
      return;
    }
    this.broken = null;
    this.reading = JSON.parse(result.text);
    for (const question of this.reading.questions) {
      const entry = this.entries.get(question.name);
      if (entry === undefined) continue;
      Object.assign(entry, {
        status: question.status, needs: question.needs, way: question.way,
        fresh: false, waits: null, panic: null, stopped: false, unread: false,
      });
      if (question.status === "lacks") entry.answer = null;
    }
    // The worker answers while the page shows how the sheet was read.
    const ready = [...this.entries.values()].filter((entry) => entry.status === "ready");
    for (const entry of ready.filter(({ name }) => this.isUnfolded(name))) this.ask(entry.name);
    for (const entry of ready.filter(({ name }) => !this.isUnfolded(name))) {
      entry.unread = true;
      setTimeout(() => {
        if (turn === this.#turn && entry.run === null && entry.unread) this.ask(entry.name);
      }, FOLDED_REST_MS);
    }
    this.#tell("reading");
  }

  /** Asks one question; `asked` means that the person has said so, however long it takes. */
  async ask(name, asked = false) {
    const entry = this.entries.get(name);
    const turn = this.#turn;
    const run = { since: performance.now(), estimate: null, progress: null, shown: false, timer: 0 };
    this.#endRun(entry);
    Object.assign(entry, { run, waits: null, panic: null, stopped: false, unread: false });
    run.timer = setTimeout(() => {
      run.shown = true;
      this.#tell(name);
    }, SHOW_RUN_MS);
    const result = await this.#engine.request(`answer:${name}`, "answer", [this.#store.sheet, name], {
      asked,
      onEstimate: (estimate) => {
        run.estimate = estimate;
        if (run.shown) this.#tell(name);
      },
      onProgress: (progress) => {
        run.progress = progress;
        if (run.shown) this.#tell(name);
      },
    });
    if (turn !== this.#turn || entry.run !== run) return;
    this.#endRun(entry);
    if (result.superseded) return;
    if (result.waits) entry.waits = result.waits;
    else if (result.stopped) entry.stopped = true;
    else if (result.panic !== undefined) entry.panic = result.panic;
    else {
      const message = JSON.parse(result.text);
      if (message.answer) Object.assign(entry, { answer: message.answer, fresh: true });
      else {
        // Faults that only answering could find are shown like those of the reading.
        entry.status = "fault";
        const known = new Set(this.reading.faults.map((fault) => JSON.stringify(fault)));
        const found = message.faults.filter((fault) => !known.has(JSON.stringify(fault)));
        this.reading = { ...this.reading, faults: [...this.reading.faults, ...found] };
        this.#tell("reading");
      }
    }
    this.#tell(name);
  }

  /** Ends every run; the last answers stay. */
  stop() {
    const running = [...this.entries.values()].filter((entry) => entry.run !== null);
    if (running.length > 0) this.#engine.stop();
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

/**
 * The state of a rung: {kind, words}. `shownFaults` is how many faults are on show; a fault that
 * is still held back because somebody is typing only makes the answer old.
 */
export function rungState(entry, shownFaults) {
  if (entry.run?.shown) {
    const seconds = entry.run.estimate?.seconds;
    return { kind: "running", words: seconds ? `running, about ${duration(seconds)}` : "running" };
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
