// Lines under the head for what concerns the whole page. They stay until they no longer hold.

import { element } from "./dom.js";

export class Notes {
  #region;
  #lines = new Map();

  constructor(region) {
    this.#region = region;
  }

  /**
   * One line under a key. `kind` is "note" or "fault"; `buttons` are [text, act]; `more` is a node
   * under the text. Every line but a lasting one can be put away.
   */
  put(key, { text, kind = "note", buttons = [], more = null, lasting = false }) {
    const all = lasting ? buttons : [...buttons, ["Put away", () => this.remove(key)]];
    const line = element("div", { class: `line ${kind}`, "data-note": key },
      text ? element("p", { text }) : null, more,
      all.length > 0 ? element("div", { class: "ways" }, ...all.map(([label, does]) => element("button", { type: "button", class: "way", text: label, on: { click: () => does() } }))) : null);
    const old = this.#lines.get(key);
    if (old) old.replaceWith(line);
    else this.#region.append(line);
    this.#lines.set(key, line);
  }

  remove(key) {
    const line = this.#lines.get(key);
    if (line === undefined) return;
    const focused = line.contains(document.activeElement);
    line.remove();
    this.#lines.delete(key);
    if (focused) document.getElementById("atom").focus();
  }
}
