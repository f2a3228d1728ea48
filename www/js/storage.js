// The browser's storage. Every access may be refused or full; nothing here throws.

import { SETTINGS_KEY as SETTINGS } from "./theme.js";

const OWN = "rungline.sheet";
const VISIT = "rungline.visit";
const VIEW = "rungline.view";

/** Keeps the sheet, the settings and what is folded out. `available` is false once refused. */
export class Storage {
  #local;
  #session;
  #onTrouble;
  #trouble = null;

  constructor(onTrouble) {
    this.#onTrouble = onTrouble;
    this.#local = reach("localStorage");
    this.#session = reach("sessionStorage");
    if (this.#local === null) this.#report("refused");
  }

  get available() {
    return this.#local !== null;
  }

  /** The person's own sheet with its history and revision, or null. */
  own() {
    return read(this.#local, OWN);
  }

  /** Keeps the own sheet; gives up old steps before giving up the sheet. */
  keepOwn(state) {
    return this.#keepState(this.#local, OWN, state);
  }

  /** The separate sheet that this tab shows, or null. */
  visit() {
    return read(this.#session, VISIT);
  }

  keepVisit(state) {
    return this.#keepState(this.#session, VISIT, state);
  }

  endVisit() {
    try {
      this.#session?.removeItem(VISIT);
    } catch {
      // A storage that refuses this holds nothing either.
    }
  }

  settings() {
    return read(this.#local, SETTINGS);
  }

  keepSettings(settings) {
    this.#write(this.#local, SETTINGS, settings);
  }

  view() {
    return read(this.#local, VIEW) ?? {};
  }

  keepView(view) {
    this.#write(this.#local, VIEW, view);
  }

  /** Takes everything out that this program put there. */
  clear() {
    try {
      for (const key of [OWN, SETTINGS, VIEW]) this.#local?.removeItem(key);
      this.#session?.removeItem(VISIT);
      return true;
    } catch {
      return false;
    }
  }

  /** Tells when another tab has kept a sheet; the listener gets its state or null. */
  onOtherTab(listener) {
    window.addEventListener("storage", (event) => {
      if (event.key === OWN || event.key === null) listener(this.own());
    });
  }

  #keepState(area, key, state) {
    if (area === null) return false;
    if (this.#write(area, key, state, false)) return true;
    const dropped = Math.min(Math.max(state.steps.length - 50, 0), state.position);
    const shorter = { ...state, steps: state.steps.slice(dropped), position: state.position - dropped };
    if (dropped > 0 && this.#write(area, key, shorter, false)) return true;
    return this.#write(area, key, { ...state, steps: [], position: 0 });
  }

  #write(area, key, value, report = true) {
    if (area === null) return false;
    try {
      area.setItem(key, JSON.stringify(value));
      this.#report(null);
      return true;
    } catch {
      if (report) this.#report("full");
      return false;
    }
  }

  #report(trouble) {
    if (this.#trouble === trouble) return;
    this.#trouble = trouble;
    this.#onTrouble(trouble);
  }
}

// Reaching for the storage, and writing to it, may each throw.
function reach(name) {
  try {
    const area = window[name];
    area.setItem("rungline.probe", "1");
    area.removeItem("rungline.probe");
    return area;
  } catch (error) {
    // A full storage is one that can still be read and emptied.
    return error?.name === "QuotaExceededError" ? window[name] : null;
  }
}

function read(area, key) {
  try {
    const text = area?.getItem(key);
    return text ? JSON.parse(text) : null;
  } catch {
    return null;
  }
}
