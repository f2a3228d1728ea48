// The tables of How does it split?: components, states, crossings, resonances, constants.

import { SIGNS, OFFSET_UNITS } from "../plot/pattern.js";
import { trueMinus } from "../digits.js";
import { dataTable } from "../table.js";
import { crossingId, crossingWords, kindWords } from "./field-panels.js";
import { PROJECTIONS, componentConcerned, componentId, levelRich, stateId, stateRich } from "./splitting-names.js";
import { kindOf } from "./working.js";

const VIEW_NAMES = { strength: "over all directions", across: "across", along: "along", seen: "as seen" };
const RESONANCES = { parallel: "parallel to the field", perpendicular: "perpendicular" };

// How each table was sorted outlives its answers.
const sortings = { components: {}, states: {}, crossings: {}, component_crossings: {}, resonances: {} };

function has(rows, key) {
  return rows.some((row) => row[key] !== null && row[key] !== undefined);
}

function several(rows, key) {
  return new Set(rows.map((row) => row[key])).size > 1;
}

/** A kind for the column, or by row where rows tell theirs. */
function kindFor(answer, group, key) {
  const kind = kindOf(answer, `${group}.${key}`);
  return kind ?? ((answer[group] ?? []).some((row) => row.kind && ["exact", "computed", "fitted", "entered", "measured"].includes(row.kind)) ? (row) => row.kind : null);
}

/** What was chosen for the picture stands first; offsets in the other units are there for copies. */
export function componentsTable(answer, context, unit, view) {
  const { components } = answer;
  const column = (key, name, unitName = null, more = {}) => ({
    name, unit: unitName, type: "number", kind: kindOf(answer, `components.${key}`), value: (row) => row[key], reason: "needs the wavelength of the line", ...more,
  });
  const firstOf = (keys, key) => [key, ...keys.filter((other) => other !== key)];
  const levels = richOfLevels(answer);
  const narrow = has(components, "F_upper") || has(components, "F_lower") || several(components, "level_upper") || several(components, "level_lower");
  const end = (side) => [
    several(components, `level_${side}`) && { name: `${side} level`, type: "text", value: (row) => row[`level_${side}`], rich: (row) => levels.get(row[`level_${side}`]) ?? [row[`level_${side}`]] },
    has(components, `F_${side}`) && { name: `F ${side}`, type: "half", value: (row) => row[`F_${side}`] },
    { name: `M ${side}`, type: "half", value: (row) => row[`M_${side}`] },
  ];
  return dataTable({
    caption: ["Components", ...lineName(answer), ` ${fieldWords(answer)}; seen ${seenWords(answer.field ?? null)}: ${answer.pattern}`], rows: components, context, sorting: sortings.components,
    file: `pattern ${answer.line ? `${answer.line.upper} to ${answer.line.lower} ` : ""}${answer.field?.text ?? ""}`,
    columns: [
      { name: "polarisation", type: "text", value: (row) => SIGNS[row.polarisation].plain, rich: (row) => [{ sign: SIGNS[row.polarisation] }] },
      has(components, "isotope") && { name: "isotope", type: "text", value: (row) => row.isotope },
      ...end("upper"), ...end("lower"),
      column(unit, "offset", OFFSET_UNITS[unit].unit),
      column(view, `strength, ${VIEW_NAMES[view]}`),
      has(components, "linear") && column("linear", "offset, linear pattern", "cm-1", { reason: "the linear pattern has no such component" }),
      ...firstOf(Object.keys(OFFSET_UNITS), unit).slice(1).map((key) => ({ ...column(key, "offset", OFFSET_UNITS[key].unit), copied: true })),
      ...firstOf(Object.keys(VIEW_NAMES), view).slice(1).map((key) => column(key, `strength, ${VIEW_NAMES[key]}`, null, { copied: narrow })),
    ].filter(Boolean),
    identify: componentId, concerns: componentConcerned,
  });
}

/** Levels of the answer by label, as rich text. */
export function richOfLevels({ line = null, states = [], nucleus = null }) {
  const found = new Map();
  for (const { label, rich } of nucleus?.levels ?? []) found.set(label, rich);
  for (const state of states) if (!found.has(state.level)) found.set(state.level, levelRich(state));
  if (line?.of === "level") {
    found.set(line.upper, line.upper_rich);
    found.set(line.lower, line.lower_rich);
  }
  return found;
}

/** " of ³P to ³S", or nothing where there is no line. */
export function lineName({ line = null }) {
  return line === null ? [] : [" of ", ...line.upper_rich, " to ", ...line.lower_rich];
}

/** "in 0.5 T" or "without field". */
export function fieldWords({ field = null }) {
  return field === null || field.tesla === 0 ? "without field" : `in ${field.text}`;
}

/** How the sheet looks at it, in words. */
export function seenWords(field) {
  if (field === null) return "over all directions";
  const { angle_degrees: angle, polariser = null } = field;
  const where = angle === 90 ? "across the field" : angle === 0 ? "along the field" : `at ${Number(angle.toFixed(6))}° to the field`;
  return polariser ? `${where}, ${polariser}` : where;
}

export function statesTable(answer, context) {
  const { states } = answer;
  const levels = richOfLevels(answer);
  const number = (key, name, unit) => has(states, key) && { name, unit, type: "number", kind: kindFor(answer, "states", key), value: (row) => row[key] };
  return dataTable({
    caption: `States ${fieldWords(answer)}`, rows: states, context, file: `states ${answer.field?.text ?? ""}`, sorting: sortings.states,
    columns: [
      // Rows of several isotopes are told apart by their heads.
      { name: "level", type: "text", value: (row) => (row.isotope ? `${row.isotope} ${row.level}` : row.level), rich: (row) => [...(row.isotope ? [`${row.isotope} `] : []), ...levels.get(row.level) ?? [row.level]] },
      has(states, "F") && { name: "F", type: "half", value: (row) => row.F },
      ...Object.entries(PROJECTIONS).map(([key, sign]) => has(states, key) && { name: key, head: [{ sign }], type: "half", value: (row) => row[key] }),
      { name: "M", type: "half", value: (row) => row.M },
      number("energy", "energy", "cm-1"), number("shift", "from the level", "cm-1"), number("slope", "slope", "cm-1 T-1"),
    ].filter(Boolean),
    identify: stateId, concerns: (row, chosen) => chosen === `level:${row.level}` || (chosen.startsWith("line:") && lineHas(chosen, row.level)),
  });
}

function lineHas(chosen, level) {
  return chosen.slice("line:".length).split("/").length > 0 && (chosen.startsWith(`line:${level}/`) || chosen.includes(`/${level}/`));
}

/** Names of states, and of components by their two states, as they are read: name → rich text. */
export function stateNames(answer) {
  const states = new Map(answer.states.map((state) => [state.name, state]));
  const one = (name) => (states.has(name) ? stateRich(states.get(name)) : [trueMinus(name)]);
  return (names) => names.split(" - ").flatMap((name, i) => (i === 0 ? one(name) : [" – ", ...one(name)]));
}

function namesIn(answer) {
  const rich = stateNames(answer);
  return (key) => ({ name: key, type: "text", value: (row) => row[key], rich: (row) => rich(row[key]) });
}

export function crossingsTable(rows, answer, context, name) {
  const end = namesIn(answer);
  const number = (key, heading, unit, digits) => has(rows, key) && { name: heading, unit, digits, type: "number", kind: kindFor(answer, "crossings", key) ?? "computed", value: (row) => row[key] };
  return dataTable({
    caption: name, rows, context, file: name, sorting: sortings.crossings,
    columns: [
      { name: "what", type: "text", value: (row) => crossingWords(row) },
      end("first"), end("second"),
      number("tesla", "field", "T"), number("energy", "energy", "cm-1"), number("gap", "gap", "cm-1"), number("mhz", "frequency", "MHz", digitsOfConstants(answer, context)),
      number("slope_first", "slope of the first", "cm-1 T-1"), number("slope_second", "slope of the second", "cm-1 T-1"),
    ].filter(Boolean),
    identify: crossingId,
  });
}

// Frequencies have as many decimals as the entered constant A that has fewest, where that is more than usual.
function digitsOfConstants({ nucleus, isotopes = [] }, context) {
  const constants = (nucleus?.levels ?? isotopes.flatMap(({ levels }) => levels)).filter(({ kind, A_MHz: a }) => kind === "entered" && typeof a === "number" && a !== 0);
  if (constants.length === 0) return undefined;
  const decimals = Math.min(...constants.map(({ A_MHz: a }) => String(a).split(".")[1]?.length ?? 0));
  return Math.min(4, (context.settings.digits ?? 17) - decimals);
}

export function componentCrossingsTable(rows, answer, context) {
  const end = namesIn(answer);
  return dataTable({
    caption: "Where components meet, and where they are farthest apart", rows, context, file: "crossings of components", sorting: sortings.component_crossings,
    columns: [
      { name: "what", type: "text", value: (row) => kindWords(row.kind) },
      end("first"), end("second"),
      { name: "field", unit: "T", type: "number", kind: "computed", value: (row) => row.tesla },
      has(rows, "apart") && { name: "apart", unit: "cm-1", type: "number", kind: "computed", value: (row) => row.apart },
    ].filter(Boolean),
    identify: crossingId,
  });
}

export function resonancesTable(answer, context) {
  const rows = answer.resonances;
  const end = namesIn(answer);
  const number = (key, name, unit) => ({ name, unit, type: "number", kind: kindOf(answer, `resonances.${key}`) ?? "computed", value: (row) => row[key] });
  return dataTable({
    caption: `Resonance frequencies ${fieldWords(answer)}`, rows, context, file: `resonances ${answer.field?.text ?? ""}`, sorting: sortings.resonances,
    columns: [
      end("from"), end("to"),
      number("mhz", "frequency", "MHz"), number("slope", "slope", "MHz/mT"), number("strength", "strength", null),
      { name: "oscillating field", type: "text", value: (row) => RESONANCES[row.kind] ?? row.kind },
    ],
  });
}

/** The constants of every nucleus: the one of the sheet, or each isotope's. */
export function constantsTable(answer, context) {
  const { nucleus } = answer;
  const rows = nucleus ? nucleus.levels : answer.isotopes.flatMap(({ isotope, levels }) => levels.map((level) => ({ ...level, isotope })));
  const constant = (key) => ({ name: key, unit: "MHz", type: "number", kind: (row) => (row.kind === "zero" ? null : row.estimated?.includes(key) ? "computed" : row.kind), value: (row) => row[`${key}_MHz`], reason: "not entered" });
  return dataTable({
    caption: ["Hyperfine constants", ...(nucleus?.isotope ? [` of ${nucleus.isotope}`] : []), nucleus?.spin ? `, I ${nucleus.spin}` : ""], rows, context, file: "hyperfine constants",
    columns: [
      has(rows, "isotope") && { name: "isotope", type: "text", value: (row) => row.isotope },
      { name: "level", type: "text", value: (row) => row.label, rich: (row) => row.rich ?? [row.label] },
      constant("A"), constant("B"),
      rows.some(({ scaled, estimated }) => scaled || estimated) && { name: "from", type: "text", value: (row) => (row.estimated ? `estimated: ${row.estimated}` : row.scaled ? "another isotope’s" : "the sheet") },
    ].filter(Boolean),
    identify: (row) => `level:${row.label}`,
  });
}

export function isotopesTable(answer, context) {
  return dataTable({
    caption: "Isotopes", rows: answer.isotopes, context, file: "isotopes",
    columns: [
      { name: "isotope", type: "text", value: (row) => row.isotope },
      { name: "share of the light", unit: "%", type: "number", kind: (row) => row.kind, value: (row) => row.share },
      { name: "I", type: "half", value: (row) => row.spin, reason: "the table has no spin for it" },
      { name: "shift", unit: "MHz", type: "number", kind: (row) => (row.shift_MHz === 0 ? null : "entered"), value: (row) => row.shift_MHz },
    ],
  });
}
