// How does it split? The weak-field pattern of one line, its components and its states.

import { element } from "../dom.js";
import { fanLayout } from "../plot/fan.js";
import { OFFSET_UNITS, SIGNS, VIEWS, patternLayout } from "../plot/pattern.js";
import { picture } from "../plot/picture.js";
import { richNode, richPlain, richRuns, richSpeech } from "../rich.js";
import { dataTable } from "../table.js";
import { tableAndPicture } from "./beside.js";
import { fold, pointerWords, select } from "./fold.js";
import { kindOf, workingNode } from "./working.js";

/** Evidence and working of an answer to "splitting". */
export function render(answer, context) {
  return { evidence: evidence(answer, context), working: workingNode(answer, context.settings) };
}

function evidence(answer, context) {
  const { components, line, field } = answer;
  const kind = (key) => kindOf(answer, `components.${key}`);
  const lineName = [...line.upper_rich, " to ", ...line.lower_rich];
  const units = Object.entries(OFFSET_UNITS).filter(([key]) => components.some((component) => component[key] !== null && component[key] !== undefined));
  const unit = select(context, "splitting:unit", "Offsets in", units.map(([key, { label }]) => [key, label]), () => redraw());
  const views = Object.entries(VIEWS).filter(([key]) => components.some((component) => component[key] !== null && component[key] !== undefined));
  const view = select(context, "splitting:view", "Strength seen", views.map(([key, text]) => [key, key === "seen" ? `as in the sheet (${viewWords(field)})` : text]), () => redraw());
  const words = () => (view.value() === "seen" ? viewWords(field) : VIEWS[view.value()]);
  const layout = () => patternLayout({ components, unit: unit.value(), view: view.value(), viewWords: words(), kindOf: kind });
  const name = () => ["Pattern of ", ...lineName, ` in ${field.text}, ${words()}`];
  const near = element("div", {});
  const shown = picture({
    context, name: name(), layout: layout(),
    rest: pointerWords("Tap a component, or walk with the arrow keys.", "Walk over the components with the arrow keys or point at them."),
    tableNear: () => near.querySelector(".table-region").focus(),
  });
  fillTable();
  function fillTable() {
    near.replaceChildren(componentsTable(answer, context, unit.value(), view.value()),
      element("p", { class: "note copies-note", text: "Copies have the offsets in every unit." }));
  }
  function redraw() {
    fillTable();
    shown.redraw({ layout: layout(), name: name() });
  }
  return element("div", { class: "evidence-parts" },
    element("div", { class: "choices" }, unit.node, view.node),
    tableAndPicture(near, shown.node),
    answer.states?.length ? element("div", { class: "parts" },
      fold(context, "splitting:states", ["Both levels in the field"], () => [fan(answer, context, lineName), statesTable(answer, context)])) : null);
}

function viewWords(field) {
  if (field.angle_degrees === null || field.angle_degrees === undefined) return field.view ?? "across";
  if (field.angle_degrees === 90) return "across the field";
  if (field.angle_degrees === 0) return "along the field";
  return `at ${field.angle_degrees}° to the field`;
}

// What was chosen for the picture stands first; offsets in the other units are there for copies.
function componentsTable(answer, context, unit, view) {
  const { components, line, field } = answer;
  const column = (key, name, unitName = null) => ({
    name, unit: unitName, type: "number", kind: kindOf(answer, `components.${key}`), value: (row) => row[key],
    reason: "needs the wavelength of the line",
  });
  const firstOf = (keys, key) => [key, ...keys.filter((other) => other !== key)];
  const names = { strength: "over all directions", across: "across", along: "along", seen: "as seen" };
  return dataTable({
    caption: ["Components of ", ...line.upper_rich, " to ", ...line.lower_rich, ` in ${field.text}: ${answer.pattern}`],
    rows: components, context, file: `pattern ${line.upper} to ${line.lower} ${field.text}`,
    columns: [
      { name: "polarisation", type: "text", value: (row) => SIGNS[row.polarisation].plain, rich: (row) => [{ sign: SIGNS[row.polarisation] }] },
      { name: "M upper", type: "half", value: (row) => row.M_upper },
      { name: "M lower", type: "half", value: (row) => row.M_lower },
      column(unit, "offset", OFFSET_UNITS[unit].unit),
      column(view, `strength, ${names[view]}`),
      ...firstOf(Object.keys(OFFSET_UNITS), unit).slice(1).map((key) => ({ ...column(key, "offset", OFFSET_UNITS[key].unit), copied: true })),
      ...firstOf(Object.keys(names), view).slice(1).map((key) => column(key, `strength, ${names[key]}`)),
    ],
  });
}

function statesTable(answer, context) {
  return dataTable({
    caption: `States in ${answer.field.text}`, rows: answer.states ?? [], context, file: `states in ${answer.field.text}`,
    columns: [
      { name: "level", type: "text", value: (row) => row.level, rich: (row) => (row.level === answer.line.upper ? answer.line.upper_rich : answer.line.lower_rich) },
      { name: "M", type: "half", value: (row) => row.M },
      { name: "energy from the level", unit: "cm-1", type: "number", kind: kindOf(answer, "states.energy"), value: (row) => row.energy },
    ],
  });
}

function fan(answer, context, lineName) {
  const { line, states, components, field } = answer;
  const side = (label, rich) => ({ runs: richRuns(rich), plain: richPlain(rich), speech: richSpeech(rich), states: states.filter((state) => state.level === label) });
  const [upper, lower] = [side(line.upper, line.upper_rich), side(line.lower, line.lower_rich)];
  if (upper.states.length === 0 || lower.states.length === 0) return element("p", { class: "note" }, richNode(["These levels have no states of their own in the answer."]));
  return picture({
    context, zoomable: false, name: ["States of ", ...lineName, ` in ${field.text}`],
    rest: "Each level fans out from its place without field; links are the components.",
    layout: fanLayout({ upper, lower, components, fieldText: field.text, kind: kindOf(answer, "states.energy") }),
    table: () => statesTable(answer, context),
  }).node;
}
