// The page's side of the worker: one calculation at a time, the latest of its kind wins, and
// whatever happens to a worker, a fresh one takes its place.

/** A worker whose memory grew beyond this is replaced, because it never shrinks. */
const KEEP_BYTES = 300e6;
/** A superseded run older than this is ended instead of awaited: a fresh worker takes 20–70 ms. */
const AWAIT_MS = 40;

export class Engine {
  #startWorker;
  #module;
  #worker = null;
  #ready = false;
  #last = 0;
  #running = null;
  #waiting = new Map();
  #panic = null;

  /** `startWorker` makes a worker; `module` is the compiled core. */
  constructor(startWorker, module) {
    this.#startWorker = startWorker;
    this.#module = module;
    this.#fresh();
  }

  /**
   * One call of the core. A newer request with the same key supersedes an older one. Resolves to
   * {text}, {waits: estimate}, {superseded: true}, {stopped: true} or {panic: words}. Once superseded
   * it is awaited for `patience` milliseconds from its start, for what its worker keeps is worth that.
   */
  request(key, door, parameters, { asked = false, patience = AWAIT_MS, onEstimate = null, onProgress = null } = {}) {
    return new Promise((resolve) => {
      this.#waiting.get(key)?.resolve({ superseded: true });
      this.#waiting.delete(key);
      const request = { key, door, parameters, asked, patience, onEstimate, onProgress, resolve, id: 0, since: 0 };
      if (key === "read") this.#waiting = new Map([[key, request], ...this.#waiting]);
      else this.#waiting.set(key, request);
      if (this.#running?.key === key) this.#abandon();
      this.#next();
    });
  }

  /** Gives up every request whose key begins so. */
  supersede(beginning) {
    for (const [key, request] of this.#waiting) {
      if (!key.startsWith(beginning)) continue;
      this.#waiting.delete(key);
      request.resolve({ superseded: true });
    }
    if (this.#running?.key.startsWith(beginning)) this.#abandon();
  }

  /** Ends every calculation under way. */
  stop() {
    const ended = [this.#running, ...this.#waiting.values()].filter((request) => request !== null);
    this.#waiting.clear();
    this.#running = null;
    this.#fresh();
    for (const request of ended) request.resolve({ stopped: true });
  }

  #abandon() {
    const request = this.#running;
    request.resolve({ superseded: true });
    const end = () => {
      if (this.#running !== request) return;
      this.#running = null;
      this.#fresh();
    };
    const left = request.patience - (performance.now() - request.since);
    if (left > 0) setTimeout(end, left);
    else end();
  }

  #next() {
    if (!this.#ready || this.#running !== null) return;
    const entry = this.#waiting.entries().next();
    if (entry.done) return;
    const [key, request] = entry.value;
    this.#waiting.delete(key);
    this.#last += 1;
    request.id = this.#last;
    request.since = performance.now();
    this.#running = request;
    this.#panic = null;
    this.#worker.postMessage({ id: request.id, door: request.door, arguments: request.parameters, asked: request.asked });
  }

  #fresh() {
    this.#worker?.terminate();
    this.#ready = false;
    const worker = this.#startWorker();
    this.#worker = worker;
    worker.onmessage = ({ data }) => {
      if (worker === this.#worker) this.#hear(data);
    };
    worker.onerror = (event) => {
      event.preventDefault();
      if (worker === this.#worker) this.#broken(event.message || "The worker ended.");
    };
    worker.postMessage({ module: this.#module });
  }

  #hear(data) {
    if (data.ready) {
      this.#ready = true;
      this.#next();
    } else if (typeof data.panic === "string") {
      this.#panic = data.panic;
    } else if (data.progress) {
      // Only one calculation runs at a time, and a worker that was given up is not heard.
      this.#running?.onProgress?.(data.progress);
    } else if (data.id !== this.#running?.id) {
      // The answer to a request that has been given up.
    } else if (data.estimate) {
      this.#running.onEstimate?.(data.estimate);
    } else if (typeof data.failed === "string") {
      this.#broken(data.failed);
    } else {
      const request = this.#running;
      this.#running = null;
      if (data.bytes > KEEP_BYTES) this.#fresh();
      request.resolve(data.waits ? { waits: data.waits } : { text: data.text });
      this.#next();
    }
  }

  #broken(words) {
    const request = this.#running;
    const panic = this.#panic ?? words;
    this.#running = null;
    if (this.#ready) {
      this.#fresh();
      request?.resolve({ panic });
      return;
    }
    // A worker that cannot even start is not started again and again.
    for (const waiting of this.#waiting.values()) waiting.resolve({ panic });
    this.#waiting.clear();
  }
}
