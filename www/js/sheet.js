// The store: one sheet, and every step that led to it.

import { keysOf, pointerOf, valueAt, withKeyRenamed, withValue } from "./pointer.js";

/** Steps that are kept; the oldest goes first. */
export const MAX_STEPS = 500;
/** Keystrokes in one field that are closer together than this are one step. */
const TYPING_REST_MS = 800;

/** The sheet of somebody who has typed nothing. */
export const EMPTY_SHEET = Object.freeze({ rungline: 1 });

/** A sheet with undo and redo over every change. Steps keep the top-level entries that changed. */
export class SheetStore {
  #sheet = EMPTY_SHEET;
  #steps = [];
  #position = 0;
  #listeners = new Set();
  #typing = null;
  #now;

  constructor(now = () => performance.now()) {
    this.#now = now;
  }

  get sheet() {
    return this.#sheet;
  }

  /** The text at a pointer as a field shows it. */
  text(pointer) {
    const value = valueAt(this.#sheet, pointer);
    if (value === undefined) return "";
    return typeof value === "string" ? value : JSON.stringify(value);
  }

  /** What the next undo takes back, or null. */
  get undoLabel() {
    return this.#position > 0 ? this.#steps[this.#position - 1].label : null;
  }

  /** What the next redo does again, or null. */
  get redoLabel() {
    return this.#position < this.#steps.length ? this.#steps[this.#position].label : null;
  }

  /** A listener is told {kind: "typing"|"step"|"undo"|"redo"|"load", path, label}. */
  subscribe(listener) {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  /** A keystroke: the field's whole new text. */
  type(pointer, text, label) {
    const next = withValue(this.#sheet, pointer, text === "" ? emptied(this.#sheet, pointer) : text);
    const now = this.#now();
    const continues = this.#typing !== null && this.#typing.pointer === pointer
      && now - this.#typing.at < TYPING_REST_MS && this.#position === this.#steps.length;
    this.#step(next, label, continues);
    this.#typing = { pointer, at: now };
    this.#tell({ kind: "typing", path: pointer, label });
  }

  /** Typing in this field is over; the next keystroke is a step of its own. */
  rest() {
    this.#typing = null;
  }

  /** Puts values at pointers as one step; undefined takes an entry out. */
  put(changes, label) {
    let next = this.#sheet;
    for (const [pointer, value] of changes) next = withValue(next, pointer, value);
    this.replace(next, label);
  }

  /** Renames a key as one step. */
  rename(pointer, name, label) {
    this.replace(withKeyRenamed(this.#sheet, pointer, name), label);
  }

  /** Another whole sheet, as one step; `isOther`: not the same sheet with changes. */
  replace(sheet, label, isOther = false) {
    this.#typing = null;
    this.#step(sheet, label, false);
    this.#tell({ kind: "step", path: "", label, isOther });
  }

  undo() {
    return this.#move(-1);
  }

  redo() {
    return this.#move(1);
  }

  /** Everything that a reload must bring back. */
  snapshot() {
    return { sheet: this.#sheet, steps: this.#steps, position: this.#position };
  }

  /** Takes a snapshot up again; anything unusable in it becomes an empty history. */
  load(snapshot) {
    const isGroup = (value) => value !== null && typeof value === "object" && !Array.isArray(value);
    this.#sheet = isGroup(snapshot.sheet) ? snapshot.sheet : EMPTY_SHEET;
    const steps = Array.isArray(snapshot.steps) ? snapshot.steps : [];
    const usable = steps.every((step) => isGroup(step) && isGroup(step.was) && isGroup(step.now) && typeof step.label === "string");
    this.#steps = usable ? steps.slice(-MAX_STEPS) : [];
    const position = Number.isInteger(snapshot.position) ? snapshot.position : this.#steps.length;
    this.#position = Math.min(Math.max(position - (steps.length - this.#steps.length), 0), this.#steps.length);
    this.#typing = null;
    this.#tell({ kind: "load", path: "", label: "" });
  }

  #step(next, label, continues) {
    const { was, now } = difference(this.#sheet, next);
    if (Object.keys(was).length === 0 && Object.keys(now).length === 0) return;
    if (continues && this.#position > 0) {
      // The step under way now leads from where it began to the newest text.
      const step = this.#steps[this.#position - 1];
      const start = applied(this.#sheet, step.now, step.was);
      this.#steps[this.#position - 1] = { label, ...difference(start, next) };
    } else {
      this.#steps.length = this.#position;
      this.#steps.push({ label, was, now });
      if (this.#steps.length > MAX_STEPS) this.#steps.shift();
      this.#position = this.#steps.length;
    }
    this.#sheet = next;
  }

  #move(direction) {
    const index = direction < 0 ? this.#position - 1 : this.#position;
    const step = this.#steps[index];
    if (step === undefined) return null;
    this.#sheet = direction < 0 ? applied(this.#sheet, step.now, step.was) : applied(this.#sheet, step.was, step.now);
    this.#position += direction;
    this.#typing = null;
    this.#tell({ kind: direction < 0 ? "undo" : "redo", path: "", label: step.label });
    return step.label;
  }

  #tell(change) {
    for (const listener of this.#listeners) listener(change);
  }
}

// What an emptied field leaves: nothing, but in a list the later entries stay where they are.
function emptied(sheet, pointer) {
  const keys = keysOf(pointer);
  const list = valueAt(sheet, pointerOf(keys.slice(0, -1)));
  return Array.isArray(list) && Number(keys.at(-1)) < list.length - 1 ? "" : undefined;
}

// The top-level entries that differ: as they were and as they are.
function difference(before, after) {
  const was = {};
  const now = {};
  for (const key of new Set([...Object.keys(before), ...Object.keys(after)])) {
    const old = Object.hasOwn(before, key) ? before[key] : undefined;
    const fresh = Object.hasOwn(after, key) ? after[key] : undefined;
    if (old === fresh || JSON.stringify(old) === JSON.stringify(fresh)) continue;
    if (old !== undefined) was[key] = old;
    if (fresh !== undefined) now[key] = fresh;
  }
  return { was, now };
}

function applied(sheet, taken, given) {
  const entries = Object.entries(sheet).filter(([key]) => !Object.hasOwn(taken, key) && !Object.hasOwn(given, key));
  return Object.fromEntries([...entries, ...Object.entries(given)]);
}
