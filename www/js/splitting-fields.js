// The fields of How does it split?: field and view, line, nucleus and isotopes, a level alone.

import { element } from "./dom.js";
import { fieldSlider } from "./field-slider.js";
import { flagField } from "./fields.js";
import { constantRows, isotopeRows } from "./isotope-rows.js";
import { linePicker } from "./line-picker.js";

/** A level's label without its J and number: its term; without the term: its configuration. */
const J_OF_LABEL = /^(.* \d+(?:[A-Z]|\[\d+\]))[\d/]+(?: #\d+)?$/;

/** The fields of the question. */
export function splittingFields(fields, questions, put, shared) {
  const { store, view, sweep } = shared;
  const levels = () => questions.reading?.levels ?? [];
  const named = () => [...levels(), ...termsOf(levels())];
  const row = (...inside) => element("div", { class: "field-row" }, ...inside);
  const field = (path, label, hint, more = {}) => fields.make(path, { label, hint, ...more });
  const fold = (key, title, ...inside) => {
    const node = element("details", { class: "fold part" }, element("summary", { text: title }), element("div", { class: "fold-body question-fields" }, ...inside));
    node.open = view.get(`fields:${key}`) ?? false;
    node.addEventListener("toggle", () => view.set(`fields:${key}`, node.open));
    return node;
  };
  const constants = (path, of = "") => constantRows({ fields, store, suggestions: levels }, path, of);
  const natural = () => questions.reading?.isotopes ?? [];
  const isotopes = isotopeRows({ fields, store, put, constants, natural });
  questions.subscribe((what) => {
    if (what === "reading") isotopes.refresh();
  });
  const end = (path, label) => field(path, label, "a level 3p 2P1/2, a term 3p 2P or 3p", { suggestions: named });
  return element("div", { class: "question-fields" },
    row(field("/field/flux_density", "Field", "such as 0.5 T or 5 kG"), fieldSlider(sweep),
      field("/field/view", "View", "along or across the field, or the angle to it: 60 deg", { suggestions: () => ["along", "across"] })),
    row(end("/line/upper", "Line starts on"), end("/line/lower", "Line ends on"),
      field("/line/wavelength", "Wavelength", "in vacuum, for pm; empty: from the levels")),
    linePicker(questions, put, shared),
    element("div", { class: "parts" },
      fold("nucleus", "Nucleus and isotopes",
        row(field("/nucleus/spin", "Nuclear spin I", "empty: of the named isotope"), field("/nucleus/g_I", "Nuclear g", "in nuclear magnetons")),
        row(element("div", { class: "flags" }, flagField({ store, setField: put }, "/nucleus/estimate", "Estimate A and B where none is entered", "Estimates of A and B", false))),
        constants("/nucleus"), isotopes.node),
      fold("alone", "A level alone, without a configuration",
        row(field("/level/J", "J", "such as 1/2"), field("/level/g", "g", "such as 2.0023"), field("/level/I", "I", "such as 3/2; empty: no nucleus")),
        row(field("/level/A", "A", "such as 885.8 MHz"), field("/level/B", "B", "such as 0 MHz"), field("/level/g_I", "g of the nucleus", "in nuclear magnetons"))),
      fold("field", "Map, polariser, quadratic shift",
        row(field("/field/up_to", "Map up to", "empty: twice the field"),
          field("/field/tolerance", "Tolerance", "for the linear pattern: 1 % or 0.01 cm-1"),
          field("/field/polariser", "Polariser", "a circular one, or the angle of what a linear one passes to the field as you see it: 0 deg passes π across the field, 90 deg σ", { suggestions: () => ["none", "left circular", "right circular"] })),
        row(element("div", { class: "flags" }, flagField({ store, setField: put }, "/field/diamagnetic", "Diamagnetic shift, quadratic in the field", "Diamagnetic shift", false))))));
}

/** Terms and configurations of labelled levels, each once. */
export function termsOf(labels) {
  const terms = labels.map((label) => J_OF_LABEL.exec(label)?.[1]).filter(Boolean);
  const configurations = terms.map((term) => term.slice(0, term.lastIndexOf(" ")));
  return [...new Set([...terms, ...configurations])].filter((name) => name !== "");
}
