// The last rung: the sheet's name, its record, and a record opened again.

import { element } from "./dom.js";
import { toAddress } from "./address.js";
import { Rung } from "./rungs.js";

/** The rung "Record". `act` offers saveSheet, saveRecord and open. */
export class RecordRung {
  #store;
  #verdict = element("div", { class: "verdict", role: "status" });
  #addressNote = element("p", { class: "note" });
  #copied = element("span", { class: "note", role: "status" });
  #copy;

  constructor({ numeral, view, store, fields, act }) {
    this.#store = store;
    this.rung = new Rung({ name: "record", question: "Record", numeral, view });
    const button = (text, does) => element("button", { type: "button", class: "action", text, on: { click: does } });
    this.#copy = button("Copy the address", () => this.#copyAddress());
    this.rung.hang.append(
      element("div", { class: "field-row" },
        fields.make("/title", { label: "Title", hint: "for the printed page and the file's name" }),
        fields.make("/note", { label: "Note", hint: "whatever belongs with this sheet" })),
      element("p", { text: "A record is the sheet with its answers, the program's version, the year of the constants and the cautions. Opening one computes it again and names each number that moved." }),
      element("div", { class: "actions" },
        button("Save the record", act.saveRecord),
        button("Open and recheck a record", act.open),
        button("Save the sheet alone", act.saveSheet),
        this.#copy),
      this.#copied, this.#addressNote, this.#verdict);
    this.show();
  }

  /** The sheet has changed: a verdict is about the record that was opened, not about this sheet. */
  show() {
    const address = toAddress(this.#store.sheet);
    this.#copy.hidden = address === null;
    this.#addressNote.textContent = address === null
      ? "The sheet is too long for an address: save the file to pass it on."
      : "The address in the browser's bar holds this sheet too.";
  }

  changed() {
    if (this.rung.node.dataset.state === "answered") this.rung.state({ kind: "stale", words: "from before your change" });
    this.show();
  }

  /** What rechecking found. */
  verdict(name, record) {
    const moved = record.moved ?? [];
    const reproduces = record.reproduces === true;
    const sentence = reproduces
      ? `"${name}" reproduces: every number came out as recorded.`
      : `"${name}" no longer reproduces: ${moved.length} ${moved.length === 1 ? "number" : "numbers"} moved.`;
    const table = moved.length === 0 ? null : element("div", { class: "scroll", tabindex: "0", role: "region", "aria-label": "Numbers that moved" },
      element("table", {}, element("caption", { text: "Numbers that moved" }),
        element("thead", {}, element("tr", {}, ...["Number", "Recorded", "Now"].map((text) => element("th", { scope: "col", text })))),
        element("tbody", {}, ...moved.slice(0, 500).map((row) => element("tr", {},
          element("th", { scope: "row", text: row.name }), element("td", { text: shown(row.was) }), element("td", { text: shown(row.now) }))))));
    this.#verdict.replaceChildren(element("p", { class: "say", tabindex: "0", text: sentence }), ...(table ? [table] : []));
    this.rung.state({ kind: "answered", words: reproduces ? "reproduces" : `${moved.length} moved` });
    this.rung.unfold(true);
    // It is what the person waits for, and the rung may be far away.
    this.#verdict.firstElementChild.focus();
  }

  async #copyAddress() {
    const address = new URL(toAddress(this.#store.sheet), location.href).href;
    try {
      await navigator.clipboard.writeText(address);
      this.#copied.textContent = "Copied.";
    } catch {
      this.#copied.textContent = "The browser refuses to copy; take the address from its bar.";
    }
  }
}

function shown(value) {
  return typeof value === "string" ? value : JSON.stringify(value) ?? "–";
}
