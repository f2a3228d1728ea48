// Keeps the sheet: in the browser's storage, in the address, and apart from other sheets.
//
// The page shows either the person's own sheet or a separate one: from an address, or from a tab
// that another tab has overtaken. A separate sheet never overwrites the own one by itself.

import { fromAddress, sameSheet, toAddress } from "./address.js";

/** After a change the sheet is kept this soon. */
const KEEP_MS = 400;

export class Keeper {
  #store;
  #storage;
  #notes;
  #first;
  #timer = 0;
  #mark = null;
  #separate = false;

  /** `first` is the sheet of a first visit. */
  constructor({ store, storage, notes, first }) {
    this.#store = store;
    this.#storage = storage;
    this.#notes = notes;
    this.#first = first;
    /** Whether the sheet on the page came with an address and had not been here before. */
    this.isNew = false;
  }

  /** Takes up the sheet that the address or the storage holds, and keeps it from then on. */
  begin() {
    this.#take(fromAddress(location.hash));
    if (performance.getEntriesByType("navigation")[0]?.type === "reload") this.isNew = false;
    this.#store.subscribe((change) => {
      if (change.kind !== "load") this.#later();
    });
    window.addEventListener("pagehide", () => this.flush());
    document.addEventListener("visibilitychange", () => {
      if (document.visibilityState === "hidden") this.flush();
    });
    window.addEventListener("hashchange", () => {
      const address = fromAddress(location.hash);
      if (address.sheet && sameSheet(address.sheet, this.#store.sheet)) return;
      if (address.nothing) return;
      this.flush({ address: false });
      this.#take(address);
    });
    this.#storage.onOtherTab((state) => {
      if (this.#separate || state === null || state.mark === this.#mark) return;
      if (sameSheet(state.sheet, this.#store.sheet)) {
        this.#mark = state.mark;
        return;
      }
      this.#overtaken();
    });
  }

  /** Keeps what has changed, now. */
  flush({ address = true } = {}) {
    if (this.#timer === 0) return;
    clearTimeout(this.#timer);
    this.#timer = 0;
    const state = this.#store.snapshot();
    if (!this.#separate) {
      const stored = this.#storage.own();
      if (stored !== null && stored.mark !== this.#mark && !sameSheet(stored.sheet, state.sheet)) this.#overtaken();
      else {
        const mark = freshMark();
        if (this.#storage.keepOwn({ ...state, mark })) this.#mark = mark;
      }
    }
    const fragment = toAddress(state.sheet);
    if (this.#separate) this.#storage.keepVisit({ ...state, long: fragment === null });
    if (address) this.#writeAddress(fragment);
  }

  /** Empties the storage; the sheet on the page stays. */
  clear() {
    clearTimeout(this.#timer);
    this.#timer = 0;
    this.#mark = null;
    return this.#storage.available && this.#storage.clear();
  }

  #later() {
    if (this.#timer === 0) this.#timer = setTimeout(() => this.flush(), KEEP_MS);
  }

  #take(address) {
    const own = this.#storage.own();
    const visit = this.#storage.visit();
    if (address.fault) {
      this.#notes.put("address", { kind: "fault", text: `${address.fault.message} ${address.fault.bound}` });
    } else this.#notes.remove("address");
    this.isNew = Boolean(address.sheet) && ![own, visit].some((state) => state !== null && sameSheet(state.sheet, address.sheet));
    if (address.sheet) {
      if (own === null || sameSheet(own.sheet, address.sheet)) this.#showOwn(own ?? { sheet: address.sheet });
      else if (visit !== null && sameSheet(visit.sheet, address.sheet)) this.#showSeparate(visit);
      else this.#showSeparate({ sheet: address.sheet });
    } else if (visit?.long && !address.fault) this.#showSeparate(visit);
    else this.#showOwn(own ?? { sheet: this.#first });
  }

  #showOwn(state) {
    this.#separate = false;
    this.#mark = state.mark ?? null;
    this.#notes.remove("separate");
    this.#storage.endVisit();
    this.#store.load(state);
  }

  #showSeparate(state, text = "This sheet came with the address. Your own sheet is untouched.") {
    this.#separate = true;
    this.#notes.put("separate", {
      text, lasting: true,
      buttons: [["Keep this sheet", () => this.#keep()], ["Back to mine", () => this.#back()]],
    });
    if (state !== null) this.#store.load(state);
  }

  #overtaken() {
    this.#separate = true;
    this.#later();
    this.#showSeparate(null, "Another tab has changed your stored sheet. The sheet on this page is kept apart from it.");
  }

  // The own sheet becomes this one, as a step that undo takes back.
  #keep() {
    const sheet = this.#store.sheet;
    this.#showOwn(this.#storage.own() ?? { sheet: this.#first });
    this.#store.replace(sheet, "Keep this sheet");
    document.getElementById("atom").focus();
  }

  #back() {
    this.#showOwn(this.#storage.own() ?? { sheet: this.#first });
    this.#writeAddress(toAddress(this.#store.sheet));
    document.getElementById("atom").focus();
  }

  #writeAddress(fragment) {
    if (fragment === null) {
      this.#notes.put("long", { text: "This sheet is too long for an address: save the file to pass it on." });
    } else this.#notes.remove("long");
    try {
      history.replaceState(null, "", fragment ?? `${location.pathname}${location.search}`);
    } catch {
      // A browser that counts changes of the address refuses some; the storage has the sheet.
    }
  }
}

function freshMark() {
  return `${Date.now().toString(36)}-${Math.random().toString(36).slice(2)}`;
}
