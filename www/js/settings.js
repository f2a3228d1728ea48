// What a person sets once: digits, light or dark, the decimal mark of copied tables, the storage.

import { element, freshId } from "./dom.js";
import { keyList } from "./keys.js";

export const DEFAULTS = Object.freeze({ digits: 6, theme: "system", decimalMark: "." });
const DIGITS = [3, 4, 5, 6, 8, 10, 17];
const THEMES = { system: "as the system says", light: "light", dark: "dark" };
const MARKS = { ".": "point, 1.5", ",": "comma, 1,5" };

/** The settings: `values`, and a listener for changes. */
export class Settings {
  #storage;
  #listeners = new Set();

  constructor(storage) {
    this.#storage = storage;
    const kept = storage.settings() ?? {};
    this.values = {
      digits: DIGITS.includes(kept.digits) ? kept.digits : DEFAULTS.digits,
      theme: Object.hasOwn(THEMES, kept.theme) ? kept.theme : DEFAULTS.theme,
      decimalMark: Object.hasOwn(MARKS, kept.decimalMark) ? kept.decimalMark : DEFAULTS.decimalMark,
    };
    this.#paint();
  }

  subscribe(listener) {
    this.#listeners.add(listener);
  }

  set(key, value) {
    this.values = { ...this.values, [key]: value };
    this.#storage.keepSettings(this.values);
    this.#paint();
    for (const listener of this.#listeners) listener(key);
  }

  #paint() {
    const root = document.documentElement;
    if (this.values.theme === "system") delete root.dataset.theme;
    else root.dataset.theme = this.values.theme;
  }
}

/** The panel of the settings. `clear` empties the storage; `notices` are the licences of the data. */
export function settingsPanel(settings, clear, notices) {
  const select = (key, label, options, read) => {
    const id = freshId("setting");
    const box = element("select", { id, on: { change: () => settings.set(key, read(box.value)) } },
      ...options.map(([value, text]) => element("option", { value, text, selected: String(settings.values[key]) === value })));
    return element("div", { class: "field" }, element("label", { for: id, text: label }), box);
  };
  const cleared = element("p", { class: "note", role: "status" });
  return element("div", { class: "settings" },
    element("div", { class: "field-row" },
      select("digits", "Shown digits", DIGITS.map((n) => [String(n), n === 17 ? "all" : String(n)]), Number),
      select("theme", "Light or dark", Object.entries(THEMES), String),
      select("decimalMark", "Decimal mark in tables copied for a spreadsheet", Object.entries(MARKS), String)),
    element("p", { class: "note", text: "Copied and saved numbers always have all digits." }),
    element("h3", { text: "Keys" }),
    keyList(),
    element("h3", { text: "Storage" }),
    element("p", { text: "Nothing leaves this device. The sheet, its history and these settings are kept in this browser's own storage." }),
    element("button", {
      type: "button", class: "action", text: "Empty the storage",
      on: { click: () => {
        cleared.textContent = clear()
          ? "The storage is empty. The sheet on the page is untouched; it is kept again once you change it."
          : "The browser refuses access to its storage.";
      } },
    }),
    cleared,
    element("h3", { text: "Licences" }),
    element("p", { text: "Rungline is free under the MIT licence. It contains data from other packages:" }),
    element("details", { class: "fold" },
      element("summary", { text: "Sources and licences of the data" }),
      element("pre", { class: "notices key", tabindex: "0", text: notices })));
}
