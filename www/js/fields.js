// A typed field: label, input, and under it how it was read or where it is at fault.

import { element, freshId } from "./dom.js";
import { valueAt } from "./pointer.js";
import { richNode } from "./rich.js";

/** A fault is shown after typing has rested this long, or on leaving the field. */
const FAULT_REST_MS = 400;
/** Characters of a long text that are shown before and after a fault. */
const AROUND_FAULT = 40;

/** Holds the faults of the field that is being typed in until typing has rested. */
export class FaultTiming {
  #held = null;
  #timer = 0;
  #release;

  constructor(release) {
    this.#release = release;
  }

  typing(path) {
    clearTimeout(this.#timer);
    this.#held = path;
    this.#timer = setTimeout(() => this.rest(), FAULT_REST_MS);
  }

  rest() {
    clearTimeout(this.#timer);
    if (this.#held === null) return;
    this.#held = null;
    this.#release();
  }

  /** The faults that are on show. */
  shown(faults) {
    return faults.filter((fault) => fault.path !== this.#held);
  }
}

/** All fields of the page: each shows one text of the sheet. */
export class Fields {
  #store;
  #settings;
  #timing;
  #fields = new Map();
  #reading = null;

  constructor(store, settings, timing) {
    this.#store = store;
    this.#settings = settings;
    this.#timing = timing;
  }

  /**
   * A new field for the text at `path`. `hint` says what may stand there; `suggestions` gives the
   * texts that the browser offers. A fault of the whole `group` is shown while the field is empty.
   * With `number` the sheet gets a number where the text is one. Fields of
   * one `pair` stand in the sheet together, once one of them is typed.
   */
  make(path, { label, hint, suggestions = null, onEmpty = null, group = null, number = false, pair = null }) {
    const id = freshId("field");
    const input = element("input", {
      id, type: "text", class: "key", autocomplete: "off", autocapitalize: "off", autocorrect: "off",
      spellcheck: "false", enterkeyhint: "done", "data-path": path,
      "aria-describedby": `${id}-hint ${id}-echo`,
    });
    const echo = element("div", { class: "echo", id: `${id}-echo` });
    const ways = element("div", { class: "ways" });
    const list = suggestions ? element("datalist", { id: `${id}-list` }) : null;
    if (list) input.setAttribute("list", list.id);
    const node = element("div", { class: "field" },
      element("label", { for: id, text: label }),
      element("span", { class: "hint", id: `${id}-hint`, text: hint }),
      input, list, echo, ways);
    const field = { path, label, input, echo, ways, list, suggestions, node, onEmpty, group, number, pair };
    input.value = this.#store.text(path);
    input.addEventListener("input", () => {
      this.#timing.typing(path);
      if (pair) this.#typePair(pair, label);
      else this.#store.type(path, number ? numberOr(input.value) : input.value, `Typing in ${label}`);
    });
    input.addEventListener("blur", () => {
      this.#store.rest();
      this.#timing.rest();
    });
    input.addEventListener("keydown", (event) => {
      if (event.key === "Enter") {
        this.#store.rest();
        this.#timing.rest();
      }
    });
    this.#fields.set(path, field);
    this.#show(field);
    return node;
  }

  #typePair(pair, label) {
    const texts = [...this.#fields.values()].filter((field) => field.pair === pair).map(({ input }) => input.value);
    this.#store.type(pair, texts.some((text) => text.trim() !== "") ? texts : "", `Typing in ${label}`);
  }

  /** Takes a field off the page. */
  remove(path) {
    this.#fields.get(path)?.node.remove();
    this.#fields.delete(path);
  }

  has(path) {
    return this.#fields.has(path) || [...this.#fields.values()].some(({ group }) => group === path);
  }

  /** Focuses the field at a path, or the first one inside the group at that path. */
  focus(path) {
    const field = this.#fields.get(path) ?? [...this.#fields.values()].find((other) => other.path.startsWith(`${path}/`));
    for (let fold = field?.input.closest("details"); fold; fold = fold.parentElement.closest("details")) fold.open = true;
    field?.input.focus();
    return field !== undefined;
  }

  /** The label of the field at a path, or null. */
  labelOf(path) {
    return this.#fields.get(path)?.label ?? null;
  }

  /** The sheet has changed; by `typing`, or by other means. */
  refill(typing = false) {
    for (const field of this.#fields.values()) {
      // A pair that is empty but for spaces.
      if (typing && field.pair && valueAt(this.#store.sheet, field.pair) === undefined) continue;
      const text = this.#store.text(field.path);
      // "0." is on its way to 0.85.
      if (field.number && String(numberOr(field.input.value)) === text) continue;
      if (field.input.value !== text) field.input.value = text;
    }
  }

  /** Shows how a new reading took each field. */
  read(reading) {
    this.#reading = reading;
    for (const field of this.#fields.values()) this.#show(field);
  }

  #show(field) {
    if (field.list) {
      const texts = field.suggestions();
      if (field.list.dataset.texts !== texts.join("\n")) {
        field.list.dataset.texts = texts.join("\n");
        field.list.replaceChildren(...texts.map((text) => element("option", { value: text })));
      }
    }
    if (this.#reading === null) return;
    const faults = this.#timing.shown(this.#reading.faults).filter(({ path }) => path === field.path || (path === field.group && field.input.value === ""));
    const key = JSON.stringify([faults, field.input.value, this.#echoOf(field), field.onEmpty?.(this.#reading)]);
    if (field.shown === key) return;
    field.shown = key;
    if (faults.length > 0) {
      field.input.setAttribute("aria-invalid", "true");
      field.echo.replaceChildren(...faults.map((fault) => faultNode(fault, field.input.value)));
      field.echo.classList.add("at-fault");
      keepFocus(field, faults.flatMap((fault) => fault.ways.map((way) => wayButton(way, () => this.takeWay(fault, way)))));
      return;
    }
    field.input.removeAttribute("aria-invalid");
    field.echo.classList.remove("at-fault");
    keepFocus(field, []);
    const rich = this.#echoOf(field);
    const empty = field.input.value === "" ? field.onEmpty?.(this.#reading) : null;
    if (rich) field.echo.replaceChildren(richNode(rich, this.#settings.values));
    else if (empty) field.echo.replaceChildren(empty);
    else field.echo.replaceChildren();
  }

  #echoOf(field) {
    return this.#reading.echo.find((echo) => echo.path === field.path)?.rich ?? null;
  }

  /** Takes a way out of a fault, as one step that can be undone. */
  takeWay(fault, way) {
    this.#timing.rest();
    if (fault.code === "unknown-key") this.#store.rename(fault.path, way.replacement, way.label);
    else this.#store.put([[fault.path, replacementValue(this.#store.sheet, fault.path, way.replacement)]], way.label);
    this.focus(fault.path);
  }
}

/** A yes-or-no entry; what it `usual`ly is need not stand in the sheet. */
export function flagField({ store, setField }, path, label, short, usual = true) {
  const box = element("input", { type: "checkbox", "data-path": path });
  const fill = () => {
    const value = valueAt(store.sheet, path);
    box.checked = typeof value === "boolean" ? value : usual;
  };
  box.addEventListener("change", () => setField(path, box.checked === usual ? undefined : box.checked, `${short} ${box.checked ? "on" : "off"}`));
  store.subscribe(fill);
  fill();
  return element("label", { class: "check" }, box, element("span", { text: label }));
}

/** An entry that is one of a few words or yes and no: [[word, how it is said]]; "" leaves the sheet silent. */
export function wordField({ store, setField }, path, label, words) {
  const id = freshId("word");
  const box = element("select", { id, "data-path": path }, ...words.map(([value, text]) => element("option", { value, text })));
  const fill = () => {
    const value = valueAt(store.sheet, path) ?? "";
    box.selectedIndex = Math.max(0, words.findIndex(([word]) => word === value));
  };
  box.addEventListener("change", () => {
    const [word, text] = words[box.selectedIndex];
    setField(path, word === "" ? undefined : word, `${label} ${text}`);
  });
  store.subscribe(fill);
  fill();
  return element("div", { class: "field" }, element("label", { for: id, text: label }), element("span", { class: "hint" }), box);
}

/** What a fault says: the text with its place marked, the sentence, the bound. */
export function faultNode(fault, text) {
  const node = element("div", { class: "fault" });
  if (text !== "" && fault.end >= fault.start) {
    const before = text.slice(0, fault.start);
    const after = text.slice(fault.end);
    const at = text.slice(fault.start, fault.end);
    const long = at.length > 2 * AROUND_FAULT;
    node.append(element("bdi", { class: "raw key" },
      before.length > AROUND_FAULT ? `…${whole(before.slice(-AROUND_FAULT))}` : before,
      element("mark", { class: at === "" ? "place empty" : "place" },
        long ? `${whole(at.slice(0, AROUND_FAULT))}…${whole(at.slice(-AROUND_FAULT))}` : at),
      after.length > AROUND_FAULT ? `${whole(after.slice(0, AROUND_FAULT))}…` : after));
  }
  node.append(element("p", { class: "sentence", text: fault.message }));
  if (fault.bound) node.append(element("p", { class: "bound", text: fault.bound }));
  return node;
}

/** A button that takes a way out. */
export function wayButton(way, take) {
  return element("button", { type: "button", class: "way", text: way.label, on: { click: take } });
}

/** The fault in words. */
export function faultWords(fault) {
  return [fault.message, fault.bound].filter(Boolean).join(" ");
}

// A cut through a pair of units leaves half a character: it is dropped.
function whole(text) {
  return text.replace(/^[\uDC00-\uDFFF]/, "").replace(/[\uD800-\uDBFF]$/, "");
}

// The number of a text that is one, else the text: the core says what is wrong with it.
function numberOr(text) {
  return text.trim() !== "" && Number.isFinite(Number(text)) ? Number(text) : text;
}

// A number that stood where a number must stand is replaced by a number.
function replacementValue(sheet, path, text) {
  if (text === "") return undefined;
  return typeof valueAt(sheet, path) === "number" ? numberOr(text) : text;
}

// The ways out may change under somebody's finger: focus goes back to the input.
function keepFocus(field, buttons) {
  const inside = field.ways.contains(document.activeElement);
  field.ways.replaceChildren(...buttons);
  if (inside) field.input.focus();
}
