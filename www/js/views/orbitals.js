// The evidence "Orbitals" under Which states?: fields of its own, a run of its own, and what came out.

import { scopedChoice } from "../choice.js";
import { element, setText } from "../dom.js";
import { FaultTiming, Fields, faultNode, flagField, wayButton } from "../fields.js";
import { focusPlace } from "../layers.js";
import { valueAt } from "../pointer.js";
import { richSpeech } from "../rich.js";
import { runNodes, runWords } from "../run-nodes.js";
import { SheetStore } from "../sheet.js";
import { POLARISATION, evidence } from "./orbital-evidence.js";

const OPEN = "states:orbitals";
const BESIDE = "orbitals:beside";

/** The fold; `act` offers stop, save, takeWay(fault, way) and speak(text). */
export class OrbitalsPart {
  #orbitals;
  #context;
  #act;
  #choice;
  #labelOf;
  #besideSheet = new SheetStore();
  #besideFields;
  #shown = [];
  #spoken = null;
  #status = element("div", { class: "orbitals-status" });
  #beside = element("div", { class: "orbitals-status" });
  #result = element("div", { class: "evidence-parts" });

  constructor({ orbitals, context, fields, act }) {
    this.#orbitals = orbitals;
    this.#context = context;
    this.#act = act;
    this.#choice = scopedChoice(context.choice);
    this.#labelOf = (path) => fields.labelOf(path);
    const { view } = context;
    // The atom beside has fields like the sheet's own, over a small sheet that the view remembers.
    this.#besideSheet.load({ sheet: view.get(BESIDE) });
    this.#besideFields = new Fields(this.#besideSheet, context.settings, new FaultTiming(() => this.show()));
    this.#besideSheet.subscribe(() => {
      view.set(BESIDE, this.#besideSheet.sheet);
      this.#besideFields.refill();
      orbitals.compare(this.#besideSheet.sheet);
    });
    this.node = element("details", { class: "fold part orbitals" }, element("summary", { text: "Orbitals: radial functions, energies, integrals" }),
      element("div", { class: "fold-body" }, this.#fields(fields), this.#status, this.#beside, this.#result));
    this.node.open = view.get(OPEN) ?? false;
    this.node.addEventListener("toggle", () => {
      view.set(OPEN, this.node.open);
      orbitals.show(this.node.open);
    });
    orbitals.subscribe(() => this.show());
    orbitals.compare(this.#besideSheet.sheet);
    orbitals.show(this.node.open);
  }

  open() {
    this.node.open = true;
  }

  #fields(fields) {
    return element("div", { class: "question-fields" },
      flagField(this.#context, "/structure/relativity", "Relativity in the radial equation", "Relativity"),
      element("div", { class: "field-row" },
        fields.make(`${POLARISATION}/alpha`, { label: "Core polarisability", hint: "such as 0.95 a0^3; empty for none", group: POLARISATION }),
        fields.make(`${POLARISATION}/radius`, { label: "Cut-off radius", hint: "such as 1.2 a0", group: POLARISATION })),
      element("div", { class: "field-row" },
        this.#besideFields.make("/species", { label: "Beside it: atom or ion", hint: "to compare; empty for this atom" }),
        this.#besideFields.make("/configurations/0", { label: "Beside it: configuration", hint: "empty for its ground one" })));
  }

  /** Brings the fold in line with what is computed, under way or missing. */
  show() {
    const { own, beside } = this.#orbitals;
    if (!this.node.open) return;
    this.#showStatus(this.#status, own, "");
    this.#showStatus(this.#beside, beside, "Beside it: ");
    this.#besideFields.read(beside.reading);
    this.#result.classList.toggle("old", own.old);
    const shown = [own.result, beside.result, this.#context.settings.values];
    if (shown.every((part, i) => part === this.#shown[i])) return;
    this.#shown = shown;
    this.#draw();
  }

  #draw() {
    const { own, beside } = this.#orbitals;
    // The first answer after opening the fold is there to be read.
    if (this.#spoken !== null && own.result !== null && own.result !== this.#spoken) this.#act.speak(richSpeech(own.result.answer.say));
    this.#spoken = own.result ?? this.#spoken;
    const place = focusPlace(this.#result);
    this.#choice.release();
    const context = { ...this.#context, settings: this.#context.settings.values, choice: this.#choice };
    this.#result.replaceChildren(...(own.result === null ? [] : evidence(own.result, beside.result, { ...context, sections: (l) => this.#orbitals.sections(l) })));
    place?.();
  }

  #showStatus(node, slot, before) {
    const { run } = slot;
    const key = run?.shown ? "run" : JSON.stringify([slot.needs, slot.waits, slot.panic, slot.stopped, slot.faults, slot.old]);
    if (node.dataset.shown !== key) {
      const inside = node.contains(document.activeElement);
      node.dataset.shown = key;
      node.replaceChildren(...this.#statusNodes(slot, before));
      if (inside) (node.querySelector("button") ?? this.node.querySelector("summary")).focus();
    }
    if (run?.shown) setText(node.querySelector("p"), before + runWords(run));
  }

  #statusNodes(slot, before) {
    const start = () => this.#orbitals.start(slot);
    const nodes = runNodes(slot, slot.result !== null, { ...this.#act, start, again: start });
    if (nodes.length > 0) return [element("div", { class: "run" }, ...nodes)];
    if (slot.needs !== null) return [element("p", { text: `${before}Needs ${slot.needs}.` })];
    if (slot.old) return [element("p", { class: "old-note", text: `${before}The last answer, from before your change:` })];
    return slot.faults.map((fault) => this.#faultNode(slot, fault));
  }

  #faultNode(slot, fault) {
    const value = valueAt(slot.sheet, fault.path);
    const own = slot.name === "own";
    const label = own ? this.#labelOf(fault.path) : null;
    return element("div", { class: "at-fault" },
      label === null ? null : element("p", { class: "note", text: `${label}:` }),
      faultNode(fault, typeof value === "string" ? value : ""),
      element("div", { class: "ways" }, ...fault.ways.map((way) => wayButton(way, () => (own ? this.#act : this.#besideFields).takeWay(fault, way)))));
  }
}
