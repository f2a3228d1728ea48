// The fields that belong to one question, shown in its rung.

import { element, freshId } from "./dom.js";

/** The node with the fields of a question, or null where the head has them all. */
export function questionFields(name, fields, questions, put) {
  return name === "splitting" ? splittingFields(fields, questions, put) : null;
}

function splittingFields(fields, questions, put) {
  const levels = () => questions.reading?.levels ?? [];
  const level = (path, label) => fields.make(path, {
    label, hint: "such as 3p 2P1/2", suggestions: levels,
  });
  return element("div", { class: "question-fields" },
    element("div", { class: "field-row" },
      fields.make("/field/flux_density", { label: "Field", hint: "such as 0.5 T or 5 kG" }),
      fields.make("/field/view", { label: "View", hint: "along, across or an angle: 60 deg", suggestions: () => ["along", "across"] })),
    element("div", { class: "field-row" },
      level("/line/upper", "Upper level"),
      level("/line/lower", "Lower level"),
      fields.make("/line/wavelength", { label: "Wavelength", hint: "in vacuum, for shifts in pm" })),
    linePicker(questions, put));
}

// A line picked from the answer to "Which lines?" fills both levels at once.
function linePicker(questions, put) {
  const id = freshId("pick-line");
  const box = element("select", { id });
  const node = element("div", { class: "field line-picker", hidden: true },
    element("label", { for: id, text: "Take a line from the list" }), box);
  let shown = null;
  const fill = () => {
    const lines = questions.entries.get("lines")?.answer?.lines ?? [];
    if (lines === shown) return;
    shown = lines;
    node.hidden = lines.length === 0;
    box.replaceChildren(element("option", { value: "", text: "Choose …" }), ...lines.slice(0, 500).map((line, index) => element("option", {
      value: String(index), text: `${line.lower} – ${line.upper} (${line.multipole})`,
    })));
  };
  box.addEventListener("change", () => {
    const line = shown?.[Number(box.value)];
    if (box.value === "" || line === undefined) return;
    put("/line", { upper: line.upper, lower: line.lower }, `Take the line ${line.lower} – ${line.upper}`);
    box.value = "";
  });
  questions.subscribe((what) => {
    if (what === "lines") fill();
  });
  return node;
}
