// The head: the atom read back, and the fields that say which atom it is.

import { element, setText, wordButton } from "./dom.js";
import { richNode, richPlain } from "./rich.js";
import { markPresent, renderChart } from "./views/elements.js";

/** The atom's line and its editor. `chart(charge)` resolves to the chart's data. */
export class Head {
  #store;
  #fields;
  #settings;
  #chart;
  #view;
  #button = document.getElementById("atom");
  #faults = document.getElementById("fault-count");
  #editor = document.getElementById("editor");
  #configurations = element("div", { class: "configurations" });
  #add = element("button", { type: "button", class: "action", text: "Add a configuration" });
  #ion = element("div", { class: "ion" });
  #chartBox = element("div", { class: "chart-box" });
  #chartFold = element("details", { class: "fold" }, element("summary", { text: "Chart of the elements" }), this.#chartBox);
  #shownCharge = null;
  #extra = 0;
  #reading = null;
  #pressed = false;

  constructor({ store, fields, settings, chart, view, toFirstFault }) {
    this.#store = store;
    this.#fields = fields;
    this.#settings = settings;
    this.#chart = chart;
    this.#view = view;
    this.#button.addEventListener("click", () => this.unfold(this.#editor.hidden));
    this.#faults.addEventListener("click", toFirstFault);
    this.#add.addEventListener("click", () => this.#addConfiguration());
    this.#configurations.addEventListener("focusout", () => this.#leave());
    document.addEventListener("pointerdown", () => { this.#pressed = true; }, true);
    for (const end of ["pointerup", "pointercancel"]) {
      document.addEventListener(end, () => {
        this.#pressed = false;
        this.#leave();
      }, true);
    }
    this.#chartFold.addEventListener("toggle", () => this.#showChart());
    this.#editor.append(
      element("h2", { class: "heard-only", text: "Atom and configurations" }),
      element("div", { class: "field-row" },
        element("div", { class: "species-box" },
          fields.make("/species", {
            label: "Atom or ion",
            hint: "such as Fe, iron, Fe 2+, 57Fe II; * is any atom with these shells",
          }),
          this.#ion),
        element("div", { class: "configurations-box" }, this.#configurations, this.#add)),
      this.#chartFold,
    );
    // On a phone the fields would push the answer off the first screen.
    this.unfold(view.get("editor") ?? window.innerWidth >= 600, false);
    this.arrange();
  }

  /** Folds the editor in or out; `move` when somebody asked for it. */
  unfold(open, move = true) {
    this.#editor.hidden = !open;
    this.#button.setAttribute("aria-expanded", String(open));
    if (move) this.#view.set("editor", open);
    if (open && move) {
      window.scrollTo({ top: 0 });
      this.#fields.focus("/species");
    }
  }

  /** Brings the number of configuration fields in line with the sheet. */
  arrange() {
    const list = this.#store.sheet.configurations;
    const filled = Array.isArray(list) ? list.length : 0;
    const wanted = Math.max(filled, this.#extra, 1);
    for (let index = this.#configurations.children.length; index < wanted; index += 1) {
      const path = `/configurations/${index}`;
      const row = element("div", { class: "configuration-row" },
        this.#fields.make(path, {
          label: index === 0 ? "Configuration" : `Configuration ${index + 1}`,
          hint: index === 0 ? "such as 3d6 4s2 or [Ar] 3d6 4s2; n=5 is the bare shell; empty is the ground one" : "such as 3d6 4s 4p",
          onEmpty: (reading) => this.#empty(reading, index),
        }));
      if (index > 0) {
        row.append(element("button", {
          type: "button", class: "action", text: "Remove", "aria-label": `Remove configuration ${index + 1}`,
          on: { click: () => this.#removeConfiguration(index) },
        }));
      }
      this.#configurations.append(row);
    }
    // Whoever empties a field is about to type something else there: it stays while it has the focus.
    while (this.#configurations.children.length > wanted && !this.#configurations.lastElementChild.contains(document.activeElement)) {
      this.#fields.remove(`/configurations/${this.#configurations.children.length - 1}`);
      this.#configurations.lastElementChild.remove();
    }
  }

  /** A way out or a lacking question may need a field that is not there yet. */
  makeRoom(path) {
    const match = /^\/configurations\/(\d+)$/.exec(path);
    if (match === null) return;
    this.#extra = Math.max(this.#extra, Number(match[1]) + 1);
    this.arrange();
  }

  /** The changes that put a value there: configurations before it that were left empty are written out. */
  changes(path, value) {
    const match = /^\/configurations\/(\d+)$/.exec(path);
    const list = Array.isArray(this.#store.sheet.configurations) ? this.#store.sheet.configurations : [];
    if (match === null || value === undefined || Number(match[1]) <= list.length) return [[path, value]];
    const defaults = this.#reading?.defaults?.configurations ?? [];
    const before = defaults.slice(list.length, Number(match[1])).map((text, index) => [`/configurations/${list.length + index}`, text]);
    return [...before, [path, value]];
  }

  /** Another sheet: fields that were only added for typing go. */
  reset() {
    this.#extra = 0;
    this.arrange();
  }

  read(reading, faults) {
    this.#reading = reading;
    const shown = reading.head;
    const key = JSON.stringify(shown);
    if (this.#button.dataset.shown !== key) {
      this.#button.dataset.shown = key;
      const text = shown ? richNode(shown, this.#settings.values) : document.createTextNode(this.#raw());
      this.#button.querySelector(".read-back").replaceChildren(text);
      document.title = `${shown ? richPlain(shown) : "Atom not read yet"} – Rungline`;
    }
    this.#faults.hidden = faults.length === 0;
    setText(this.#faults, `${faults.length} ${faults.length === 1 ? "fault" : "faults"}`);
    this.#showIon();
    this.#showChart();
  }

  #raw() {
    const text = this.#store.text("/species").slice(0, 40);
    return text === "" ? "Name an atom" : `${text}: not read yet`;
  }

  #empty(reading, index) {
    const text = index === 0 ? reading.defaults?.configurations?.[0] : null;
    return text ? `Empty stands for ${text}` : null;
  }

  // Empty fields at the end go when they are left; under a pressed pointer nothing may move.
  #leave() {
    setTimeout(() => {
      if (this.#pressed) return;
      this.#extra = 0;
      this.arrange();
    }, 0);
  }

  #addConfiguration() {
    const last = this.#configurations.children.length - 1;
    if (last > 0 && this.#store.text(`/configurations/${last}`) === "") {
      this.#fields.focus(`/configurations/${last}`);
      return;
    }
    const index = last + 1;
    this.#extra = index + 1;
    const first = this.#reading?.defaults?.configurations?.[0];
    if (index === 1 && this.#store.text("/configurations/0") === "" && first) {
      this.#store.put([["/configurations/0", first]], `Write out ${first}`);
    }
    this.arrange();
    this.#fields.focus(`/configurations/${index}`);
  }

  #removeConfiguration(index) {
    this.#extra = 0;
    this.#fields.focus(`/configurations/${Math.max(index - 1, 0)}`);
    this.#store.put([[`/configurations/${index}`, undefined]], `Remove configuration ${index + 1}`);
    this.arrange();
  }

  #species() {
    const rich = this.#reading?.echo.find((echo) => echo.path === "/species")?.rich ?? [];
    return rich.find((item) => item.species)?.species ?? null;
  }

  #showIon() {
    const species = this.#species();
    const last = /(?:^|\s)1 electron$/.test(this.#reading?.head_plain ?? "");
    const key = species && species.symbol !== "*" ? `${species.symbol} ${species.charge} ${species.mass_number} ${last}` : "";
    if (this.#ion.dataset.shown === key) return;
    this.#ion.dataset.shown = key;
    if (key === "") {
      this.#ion.replaceChildren();
      return;
    }
    const inside = this.#ion.contains(document.activeElement);
    const step = (change, label) => element("button", {
      type: "button", class: "action", text: label,
      on: { click: () => this.#putSpecies(species.symbol, species.charge + change, species.mass_number) },
    });
    this.#ion.replaceChildren(
      ...(last ? [] : [step(1, "One electron less")]),
      ...(species.charge > 0 ? [step(-1, "One electron more")] : []));
    if (inside) (this.#ion.firstElementChild ?? this.#button).focus();
  }

  // The configurations of one atom rarely fit another: a picked atom starts from its ground one.
  #putSpecies(symbol, charge, massNumber = null) {
    const ion = charge === 0 ? "" : charge > 0 ? ` ${charge}+` : ` ${-charge}-`;
    const text = `${massNumber ?? ""}${symbol}${ion}`;
    this.#extra = 0;
    this.#store.put([["/species", text], ["/configurations", undefined], ["/line", undefined]], `Put in ${text}`);
  }

  async #showChart() {
    if (!this.#chartFold.open) return;
    const charge = Math.max(this.#species()?.charge ?? 0, 0);
    if (this.#shownCharge === charge) {
      markPresent(this.#chartBox, this.#species()?.symbol);
      return;
    }
    this.#shownCharge = charge;
    const data = await this.#chart(charge);
    if (data === null || this.#shownCharge !== charge) return;
    this.#chartBox.replaceChildren(renderChart(data, {
      pick: (symbol) => this.#putSpecies(symbol, charge),
      settings: this.#settings.values,
      present: () => this.#species()?.symbol,
    }));
  }
}

/** The words at the right of the head: Open, Save, Undo, Redo, Settings. */
export function headWords({ open, save, undo, redo, settings }) {
  const words = {
    open: wordButton("Open", open, { "aria-expanded": "false", "aria-controls": "open-panel" }),
    save: wordButton("Save", save),
    undo: wordButton("Undo", undo),
    redo: wordButton("Redo", redo),
    settings: wordButton("Settings", settings, { "aria-expanded": "false", "aria-controls": "settings-panel" }),
  };
  document.getElementById("words").append(...Object.values(words));
  return words;
}
