// Opens files into the sheet and saves the sheet and its record, through the core.

import { element } from "./dom.js";
import { fileFaults, fileName, saveFile, textOf } from "./files.js";
import { panicNode } from "./run-nodes.js";

// The fault of JSON that is no sheet, or null; what lacks only the first key can be opened with it.
function noSheet(sheet) {
  const group = isGroup(sheet);
  if (group && Object.hasOwn(sheet, "rungline")) return null;
  return [{
    message: `This file is JSON, but not a sheet${group ? ": it has no key \"rungline\"" : ""}.`, path: "", start: 0, end: 0,
    bound: "A sheet is one JSON object, in braces, with at least \"rungline\": 1.",
    ways: group ? [{ label: "Put in \"rungline\": 1 and open it", replacement: JSON.stringify({ rungline: 1, ...sheet }) }] : [],
  }];
}

/** Rows of a table that are told of one by one. */
const TOLD = 8;

export class Filing {
  #engine;
  #heavy;
  #store;
  #notes;
  #replace;
  #verdict;
  #toFirstFault;

  constructor({ engine, heavy, store, notes, replace, verdict, toFirstFault }) {
    this.#engine = engine;
    this.#heavy = heavy;
    this.#store = store;
    this.#notes = notes;
    this.#replace = replace;
    this.#verdict = verdict;
    this.#toFirstFault = toFirstFault;
  }

  /** Opens a sheet or a record; whatever is wrong with the file, the sheet on the page stays. */
  async open(file) {
    const { text, fault } = await textOf(file);
    if (fault) {
      this.refuse(fault);
      return;
    }
    if (/\.(csv|tsv)$/i.test(file.name)) await this.#openLevels(text, file.name);
    else await this.#openText(text, file.name);
  }

  // A table of measured levels joins the sheet; what it says of a level replaces what stood there.
  async #openLevels(text, name) {
    const { sheet } = this.#store;
    const result = await this.#engine.request("open", "measured_csv", [text, sheet]);
    if (result.text === undefined) return;
    const { measured, taken, left, left_rows: leftRows = [], faults = [] } = JSON.parse(result.text);
    const told = [...faults.map((fault) => [fault.message, fault.bound].filter(Boolean).join(" ")), ...leftRows.map(({ line, why }) => `Line ${line}: ${why}`)];
    if (taken > 0) this.#store.put([["/measured", { ...sheet.measured, ...measured }]], `Take ${taken} levels from "${name}"`);
    this.#notes.put("file", {
      kind: taken > 0 ? "note" : "fault", text: levelWords(name, taken, left),
      more: told.length > 0 ? element("ul", {}, ...told.slice(0, TOLD).map((text) => element("li", { text }))) : null,
    });
  }

  async #openText(text, name) {
    // A record is computed again while it is opened.
    const engine = /"answers"\s*:/.test(text) ? this.#heavy() : this.#engine;
    const result = await engine.request("open", "open", [text]);
    if (result.text === undefined) {
      if (result.panic) {
        this.#notes.put("file", { kind: "fault", more: panicNode(result.panic, () => this.#openText(text, name), () => this.saveSheet()) });
      }
      return;
    }
    const message = JSON.parse(result.text);
    const faults = message.faults ?? noSheet(message.sheet);
    if (faults !== null) {
      this.#notes.put("file", { kind: "fault", more: fileFaults(name, faults, text, (better) => this.#openText(better, name)) });
      return;
    }
    this.#notes.remove("file");
    this.#replace(message.sheet, `Open "${name}"`);
    if (message.record) this.#verdict(name, message.record);
  }

  refuse(fault) {
    this.#notes.put("file", { kind: "fault", text: `${fault.message} ${fault.bound}` });
  }

  async saveSheet() {
    const { sheet } = this.#store;
    const result = await this.#engine.request("save", "save", [sheet]);
    // The sheet itself needs no core to be saved.
    saveFile(fileName(sheet, ".rungline.json"), result.text ?? JSON.stringify(sheet, null, 2), this.#notes);
  }

  async saveRecord() {
    const { sheet } = this.#store;
    const result = await this.#heavy().request("record", "record", [sheet]);
    if (result.text === undefined) {
      this.#notes.put("saved", { kind: "fault", text: "The record could not be made: the calculation ended. Your sheet is safe." });
      return;
    }
    const { record, faults } = JSON.parse(result.text);
    if (faults) {
      this.#notes.put("saved", {
        kind: "fault", text: "A record needs a sheet without faults.",
        buttons: [["To the first fault", () => this.#toFirstFault()]],
      });
    } else saveFile(fileName(sheet, ".record.json"), record, this.#notes);
  }
}

function levelWords(name, taken, left) {
  const rest = left > 0 ? ` ${left} ${left === 1 ? "row was" : "rows were"} left out.` : "";
  return taken > 0 ? `${taken} measured ${taken === 1 ? "level" : "levels"} taken from "${name}".${rest} Undo takes them out again.` : `"${name}" holds no level of this sheet; the sheet is as it was.${rest}`;
}

function isGroup(value) {
  return value !== null && typeof value === "object" && !Array.isArray(value);
}
