// What the field map shows: the states of one level or of all, one panel for each stretch of energy,
// or the offsets of the components.

import { trueMinus } from "../digits.js";
import { STROKES } from "../plot/field-map.js";
import { placeIn, cubicAt } from "../plot/hermite.js";
import { SIGNS } from "../plot/pattern.js";
import { richRuns } from "../rich.js";
import { unitOf } from "../spoken.js";
import { componentId, idsOfComponent, idsOfState, levelRich, stateRich } from "./splitting-names.js";

/** A gap so many times wider than what lies beside it parts two panels. */
const GAP = 12;
const MOST_PANELS = 4;

/** What can be shown: [[key, words]]. */
export function mapChoices(map) {
  const levels = new Map(map.states.map((state) => [state.level, state]));
  return [
    ["", levels.size > 1 ? "all levels" : "the level"],
    ...(levels.size > 1 ? [...levels.keys()].map((level) => [`level:${level}`, level]) : []),
    ...(map.components.length > 0 ? [["components", "offsets of the components"]] : []),
  ];
}

/**
 * The panels of one choice. `unit`: {name, energyFactor, offsetFactor} of energies and of offsets;
 * `found`: the answer's crossings and component_crossings, up to the end of the map.
 */
export function mapPanels(map, choice, unit, multipole, found) {
  if (choice === "components") return [componentPanel(map, unit, multipole, found.component_crossings)];
  const own = map.states.map((state, at) => ({ state, at })).filter(({ state }) => choice === "" || choice === `level:${state.level}`);
  const groups = choice === "" && own.some(({ state }) => state.side) ? bySide(own) : byStretch(own);
  return groups.slice(0, MOST_PANELS).map((group) => statePanel(group, map, unit, found.crossings));
}

function bySide(own) {
  return ["upper", "lower"].map((side) => own.filter(({ state }) => state.side === side)).filter((group) => group.length > 0);
}

// From the top: a panel ends where a wide gap follows.
function byStretch(own) {
  const spans = own.map(({ state, at }) => ({ state, at, low: Math.min(...state.energies), high: Math.max(...state.energies) })).sort((a, b) => b.high - a.high);
  const groups = [];
  for (const span of spans) {
    const last = groups.at(-1);
    if (last && last.low - span.high <= GAP * Math.max(last.high - last.low, span.high - span.low)) {
      last.members.push(span);
      last.low = Math.min(last.low, span.low);
    } else groups.push({ members: [span], high: span.high, low: span.low });
  }
  if (groups.length <= MOST_PANELS) return groups.map(({ members }) => members);
  return [spans];
}

function statePanel(group, map, { name, energyFactor: factor }, crossings) {
  const { reference, rich: zero } = zeroOf(group.map(({ state }) => state));
  const levels = [...new Set(group.map(({ state }) => state.level))];
  const keys = [...new Set(group.map(({ state }) => groupKey(state)))];
  const inside = new Map(group.map(({ state }) => [state.name, state]));
  const spread = Math.max(...group.map(({ state }) => Math.max(...state.energies.map((energy) => Math.abs(energy - reference)))));
  const isZero = Math.abs(reference) < 1e-9 * spread;
  return {
    title: [
      ...(levels.length === 1 ? [...richRuns(zero), { text: isZero ? ", E (" : ", E from the level (" }]
        : isZero ? [{ text: "E (" }] : [{ text: "E from " }, ...richRuns(zero), { text: " (" }]), ...unitOf(name).runs, { text: ")" },
    ],
    factor, reference,
    series: group.map(({ state, at }) => {
      const stroke = strokeOf(keys.indexOf(groupKey(state)));
      return {
        at, state, id: idsOfState(state)[0], ids: idsOfState(state).slice(1), label: [{ text: trueMinus(state.M) }],
        groupKey: groupKey(state), group: groupRuns(state, levels.length), values: state.energies, slopes: state.slopes, ...stroke,
      };
    }),
    signs: crossings.filter((crossing) => inside.has(crossing.first) && inside.has(crossing.second ?? crossing.first)).map((crossing) => ({
      kind: crossing.kind, tesla: crossing.tesla, id: crossingId(crossing), ids: [], value: signHeight(crossing, inside, map.tesla), reading: crossingReading(crossing, inside),
    })),
  };
}

// Where the two states meet; a pair that does not is marked at its first.
function signHeight(crossing, inside, fields) {
  if (typeof crossing.energy === "number" && crossing.kind !== "clock") return crossing.energy;
  const state = inside.get(crossing.first);
  return cubicAt(state.energies, state.slopes, placeIn(fields, crossing.tesla));
}

export function crossingId({ kind, first, second, tesla }) {
  return `crossing:${kind}/${first}/${second ?? ""}/${Number(tesla.toPrecision(6))}`;
}

const KINDS = { crossing: "Crossing", avoided: "Avoided crossing", clock: "Clock point, no slope", farthest: "Farthest apart" };

/** Words for the kinds of crossings. */
export function kindWords(kind) {
  return KINDS[kind] ?? kind;
}

/** The same of one crossing, with the photons that it takes where it takes two. */
export function crossingWords({ kind, photons }) {
  return photons === 2 ? `${kindWords(kind)}, two photons` : kindWords(kind);
}

function crossingReading(crossing, inside) {
  const end = (name) => stateRich(inside.get(name));
  return [
    `${crossingWords(crossing)}: `, ...end(crossing.first), ...(crossing.second ? [" and ", ...end(crossing.second)] : []), " at ",
    { number: { text: String(crossing.tesla), unit: "T", kind: "computed" } },
    ...(crossing.kind === "avoided" && typeof crossing.gap === "number" ? ["; gap ", { number: { text: String(crossing.gap), unit: "cm-1", kind: "computed" } }] : []),
    ...(typeof crossing.mhz === "number" ? ["; ", { number: { text: String(crossing.mhz), unit: "MHz", kind: "computed" } }] : []),
  ];
}

function componentPanel(map, { name, offsetFactor: factor }, multipole, crossings) {
  const series = map.components.map((component, at) => {
    const [upper, lower] = [map.states[component.upper], map.states[component.lower]];
    const sign = SIGNS[component.polarisation];
    const row = rowOf(component, upper, lower);
    const ids = idsOfComponent(row, multipole);
    return {
      at, component, upper, lower, row, id: componentId(row), ids: ids.slice(1), label: null, group: null, groupKey: component.polarisation,
      values: component.offsets, slopes: component.slopes, colour: sign.colour, dash: sign.dash, shown: component.strengths.some((strength) => strength > 0),
    };
  }).filter(({ shown }) => shown);
  const byName = new Map(series.map((each) => [`${each.upper.name} - ${each.lower.name}`, each]));
  const of = (pair) => (byName.has(pair) ? [...stateRich(byName.get(pair).lower), " – ", ...stateRich(byName.get(pair).upper)] : [trueMinus(pair)]);
  return {
    title: [{ text: "Offset (" }, ...unitOf(name).runs, { text: ")" }], factor, reference: 0, series,
    signs: crossings.flatMap((crossing) => {
      const first = byName.get(crossing.first);
      if (first === undefined) return [];
      return [{
        kind: crossing.kind, tesla: crossing.tesla, id: crossingId(crossing), ids: [], value: cubicAt(first.values, first.slopes, placeIn(map.tesla, crossing.tesla)),
        reading: [`${kindWords(crossing.kind)}: `, ...of(crossing.first), " and ", ...of(crossing.second), " at ", { number: { text: String(crossing.tesla), unit: "T", kind: "computed" } }],
      }];
    }),
  };
}

function rowOf(component, upper, lower) {
  return { polarisation: component.polarisation, upper: upper.name, lower: lower.name, level_upper: upper.level, level_lower: lower.level };
}

// The lowest level without field: the mean over its states, where its nucleus takes nothing away.
function zeroOf(states) {
  const levels = new Map();
  for (const state of states) levels.set(state.level, [...(levels.get(state.level) ?? []), state]);
  const means = [...levels.values()].map((own) => ({ rich: levelRich(own[0]), reference: own.reduce((sum, { energies }) => sum + energies[0], 0) / own.length }));
  return means.reduce((least, each) => (each.reference < least.reference ? each : least));
}

function groupKey(state) {
  return `${state.isotope ?? ""}/${state.level}/${state.F ?? ""}`;
}

function groupRuns(state, levels) {
  const f = state.F === null || state.F === undefined ? [] : [{ text: `F ${state.F}` }];
  const level = levels > 1 ? richRuns(levelRich(state)) : [];
  return [...(state.isotope ? [{ text: `${state.isotope} ` }] : []), ...level, ...(level.length > 0 && f.length > 0 ? [{ text: " " }] : []), ...f];
}

// Sixteen levels differ in dash or colour; farther ones begin again.
function strokeOf(index) {
  const turn = Math.floor(index / STROKES.length);
  return { colour: STROKES[(index + turn) % STROKES.length].colour, dash: STROKES[index % STROKES.length].dash };
}
