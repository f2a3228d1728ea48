// Starts workers from a Blob: a worker from an address does not inherit the page's policy.

import { CannotStart } from "./cannot-start.js";
import { scriptAddress } from "./trusted.js";

export class WorkerStarter {
  #address;
  #first;

  /** `source` is the worker's script. The first worker starts at once, while the core compiles. */
  constructor(source) {
    if (typeof Worker !== "function") throw new CannotStart("no-worker");
    this.#address = scriptAddress(URL.createObjectURL(new Blob([source], { type: "text/javascript" })));
    this.#first = this.#fresh();
    // If it fails before anybody listens, it fails once more.
    this.#first.onerror = (event) => {
      event.preventDefault();
      this.#first = null;
    };
  }

  /** Has the first worker call what the first sheet will call, while the page is put together. */
  prepare(module) {
    this.#first?.postMessage({ module, warm: true });
  }

  /** A worker that nobody else has. */
  start() {
    const worker = this.#first ?? this.#fresh();
    this.#first = null;
    return worker;
  }

  #fresh() {
    try {
      return new Worker(this.#address);
    } catch (error) {
      throw new CannotStart("no-worker", String(error));
    }
  }
}
