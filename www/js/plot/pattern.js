// The pattern of a line in a field: π plain bars above the axis; σ⁺ below with a filled triangle
// that points to higher energy, σ⁻ below with a hollow one that points to lower.

import { trueMinus } from "../digits.js";
import { BOTTOM_AXIS, bottomAxis, linearScale, tickText } from "./axis.js";
import { pictureHeight } from "./field-map.js";
import { unitOf } from "../spoken.js";

/** The units in which offsets are shown: key in the answer, unit, and which way energy grows. */
export const OFFSET_UNITS = {
  lorentz: { unit: "mu_B B", label: "units of μB·B", energy: 1 },
  offset: { unit: "cm-1", label: "cm⁻¹", energy: 1 },
  ghz: { unit: "GHz", label: "GHz", energy: 1 },
  pm: { unit: "pm", label: "pm", energy: -1 },
};
/** How the field is looked at: key in the answer and words. */
export const VIEWS = { seen: "as in the sheet", across: "across the field", along: "along the field", strength: "over all directions" };
/** Signs of the polarisations, and by how much M rises; a quadrupole line has steps of two. */
export const SIGNS = {
  pi: { runs: [{ text: "π" }], plain: "π", latex: "$\\pi$", speech: "pi", colour: "s1", step: 0, dash: null },
  "sigma+": { runs: [{ text: "σ" }, { up: "+" }], plain: "σ⁺", latex: "$\\sigma^+$", speech: "sigma plus", colour: "s2", step: 1, dash: "8 4" },
  "sigma-": { runs: [{ text: "σ" }, { up: "\u2212" }], plain: "σ⁻", latex: "$\\sigma^-$", speech: "sigma minus", colour: "s3", step: -1, dash: "2 4" },
  "delta-M+2": { runs: [{ text: "ΔM +2" }], plain: "ΔM +2", latex: "$\\Delta M = +2$", speech: "delta M plus 2", colour: "s4", step: 2, dash: "12 3 2 3" },
  "delta-M-2": { runs: [{ text: "ΔM \u22122" }], plain: "ΔM −2", latex: "$\\Delta M = -2$", speech: "delta M minus 2", colour: "s4", step: -2, dash: "4 2" },
};

const LEFT = 52;
const RIGHT = 20;
const TOP = 44;
const TRIANGLE = 7;
const BELOW = 36;
/** Members of one place that are named. */
const FEW = 4;
// Offsets closer than this part of the pattern's width are one component to the eye and in fact.
const SAME = 1e-9;

/** Components that fall on one place and polarisation, together. */
export function placesOf(components, unit, view) {
  const extent = Math.max(...components.map((component) => Math.abs(component[unit] ?? 0)), 0);
  const places = [];
  for (const component of components) {
    const x = component[unit];
    if (x === null || x === undefined) continue;
    const place = places.find((other) => other.polarisation === component.polarisation && Math.abs(other.x - x) <= SAME * extent);
    if (place) {
      place.strength += component[view];
      place.members.push(component);
    } else places.push({ polarisation: component.polarisation, x, strength: component[view], members: [component] });
  }
  return places.sort((a, b) => a.x - b.x || a.polarisation.localeCompare(b.polarisation));
}

// Ends that are round: while the field changes the axis stands still as long as it can.
function roundExtent(places) {
  let low = Infinity;
  let high = -Infinity;
  for (const { x } of places) {
    low = Math.min(low, x);
    high = Math.max(high, x);
  }
  if (!(low <= high)) return [-1, 1];
  const span = high - low || Math.abs(high) || 1;
  const rough = span / 8;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((factor) => factor * power).find((size) => size >= rough * 0.999999) ?? 10 * power;
  return [Math.floor((low - 0.05 * span) / step) * step, Math.ceil((high + 0.05 * span) / step) * step];
}

/**
 * The layout of a pattern for `picture`. `viewWords` says the view; `kindOf` key → kind; `idsOf` component → ids
 * of the shared choice, its own first; `rough` values are read from a map, and marked so.
 */
export function patternLayout({ components, unit, view, viewWords, kindOf, idsOf = () => [], rough = false }) {
  const places = placesOf(components, unit, view);
  const seen = places.filter((place) => place.strength > 0);
  const strongest = Math.max(...seen.map((place) => place.strength), 0) || 1;
  const [first, last] = roundExtent(places);
  const whole = last - first;
  const { energy } = OFFSET_UNITS[unit];
  return (width, [from, to]) => {
    const height = pictureHeight(width);
    const bottom = height - BOTTOM_AXIS;
    // Triangles and names of the downward bars keep clear of the offset axis.
    const axis = TOP + (bottom - TOP - BELOW) / 2;
    const tall = axis - TOP - 10;
    const low = first + from * whole;
    const high = first + to * whole;
    const scale = linearScale(low, high, LEFT, width - RIGHT);
    const shown = seen.filter((place) => place.x >= low && place.x <= high);
    const ends = (place) => axis + (place.polarisation === "pi" ? -1 : 1) * (place.strength / strongest) * tall;
    return {
      height,
      marks: seen.map((place) => {
        const x = scale(place.x);
        const end = ends(place);
        const wing = place.polarisation === "pi" ? 3 : TRIANGLE;
        const [id = null, ...others] = place.members.flatMap(idsOf);
        return {
          x: x - wing, w: 2 * wing, y: Math.min(axis, end) - (place.polarisation === "pi" ? 0 : -2), h: Math.abs(end - axis) + (place.polarisation === "pi" ? 0 : TRIANGLE),
          part: (place.x - first) / whole, id, ids: others, get reading() { return readingOf(place, unit, { view, viewWords, kindOf, rough }); },
        };
      }),
      draw(pen) {
        pen.text(LEFT, 16, "Relative strength", { fill: "quiet" });
        if (rough) pen.text(width - RIGHT, 16, "~ between computed fields", { anchor: "end", fill: "quiet" });
        for (const [y, sign] of [[TOP + 10, 1], [axis + tall, -1]]) {
          pen.line(LEFT - 5, y, LEFT, y, { stroke: "edge" });
          pen.text(LEFT - 8, y + 4, tickText(strongest, strongest < 0.1 ? 3 : 2), { anchor: "end", fill: "quiet" });
          pen.line(LEFT, y, LEFT, y + sign * tall, { stroke: "edge" });
        }
        pen.text(LEFT - 8, axis + 4, "0", { anchor: "end", fill: "quiet" });
        pen.line(LEFT - 5, axis, width - RIGHT, axis, { stroke: "edge" });
        for (const place of shown) bar(pen, place, scale(place.x), axis, ends(place), energy);
        labels(pen, shown, scale, ends);
        const title = [{ text: "Offset from the line without field (" }, ...unitOf(OFFSET_UNITS[unit].unit).runs, { text: ")" }];
        bottomAxis(pen, { scale, from: low, to: high, left: LEFT, right: width - RIGHT, y: bottom, title: width < 420 ? [{ text: "Offset (" }, ...title.slice(1)] : title });
      },
    };
  };
}

function bar(pen, place, x, axis, end, energy) {
  const { colour } = SIGNS[place.polarisation];
  pen.line(x, axis, x, end, { stroke: colour, width: 3 });
  if (place.polarisation === "pi") return;
  const rises = SIGNS[place.polarisation].step > 0;
  const towards = (rises ? 1 : -1) * energy;
  const tip = [x + towards * TRIANGLE, end + TRIANGLE / 2];
  const base = [[x - towards * TRIANGLE * 0.6, end - TRIANGLE / 2], [x - towards * TRIANGLE * 0.6, end + 1.5 * TRIANGLE]];
  pen.polygon([tip, ...base], rises ? { fill: colour, stroke: colour } : { fill: "sheet", stroke: colour, width: 1.5 });
}

// Each polarisation is named once, at its strongest bar; σ⁺ and σ⁻ step aside from each other.
function labels(pen, shown, scale, ends) {
  const at = {};
  for (const polarisation of Object.keys(SIGNS)) {
    const own = shown.filter((place) => place.polarisation === polarisation);
    if (own.length > 0) at[polarisation] = own.reduce((best, place) => (place.strength > best.strength * (1 + 1e-9) ? place : best));
  }
  const [plus, minus] = [at["sigma+"], at["sigma-"]];
  const near = plus && minus && Math.abs(scale(plus.x) - scale(minus.x)) < 26;
  const side = near ? Math.sign(scale(plus.x) - scale(minus.x)) || 1 : 0;
  for (const [polarisation, place] of Object.entries(at)) {
    const sign = SIGNS[polarisation];
    const aside = Math.abs(sign.step) === 1 ? 13 * side * sign.step : 0;
    const y = polarisation === "pi" ? ends(place) - 7 : ends(place) + TRIANGLE * 1.5 + 16;
    pen.text(scale(place.x) + aside, y, sign.runs, { anchor: "middle", fill: sign.colour, weight: 600 });
  }
}

function readingOf(place, unit, { view, viewWords, kindOf, rough }) {
  const { unit: unitName } = OFFSET_UNITS[unit];
  const number = (value, name, key) => ({ number: rough ? { text: `~${trueMinus(Number(value.toPrecision(5)))}`, unit: name } : { text: String(value), unit: name, kind: kindOf(key) } });
  const few = place.members.slice(0, FEW);
  const jumps = few.map((member) => (member.F_upper === null || member.F_upper === undefined ? "" : `F ${member.F_lower} to ${member.F_upper}, `) + `M ${trueMinus(member.M_lower)} to ${trueMinus(member.M_upper)}`).join("; ");
  return [
    { sign: { runs: SIGNS[place.polarisation].runs, plain: SIGNS[place.polarisation].plain, speech: SIGNS[place.polarisation].speech } },
    `, ${jumps}${place.members.length > FEW ? ` and ${place.members.length - FEW} more` : ""}: offset `,
    number(place.x, unitName, unit),
    `; strength ${viewWords} `,
    number(place.strength, null, view),
  ];
}
