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
/** Members of one stick that are named. */
const MOST = 24;
/** Sticks closer than their width cannot be told apart. */
const APART = 3;
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

/**
 * Sticks of places that the picture cannot tell apart: `places` sorted by x; `apart`: the least distance of two sticks.
 * A stick has its places one upon the other, each polarisation together, and their strengths added.
 */
export function sticksOf(places, apart) {
  const sticks = [];
  for (const up of [true, false]) {
    let last = null;
    for (const place of places.filter(({ polarisation }) => (polarisation === "pi") === up)) {
      if (last !== null && place.x - last.from < apart) {
        last.places.push(place);
        last.to = place.x;
        last.strength += place.strength;
      } else sticks.push(last = { up, from: place.x, to: place.x, strength: place.strength, places: [place] });
    }
  }
  for (const stick of sticks) {
    stick.x = stick.strength > 0 ? stick.places.reduce((sum, { x, strength }) => sum + x * strength, 0) / stick.strength : stick.from;
    stick.parts = Object.keys(SIGNS).map((polarisation) => stick.places.filter((place) => place.polarisation === polarisation)).filter((own) => own.length > 0)
      .map((own) => ({ polarisation: own[0].polarisation, places: own, strength: own.reduce((sum, { strength }) => sum + strength, 0) }));
  }
  return sticks.sort((a, b) => a.x - b.x || Number(b.up) - Number(a.up));
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
 * of the shared choice, its own first; `levelOf` label of a level → rich text; `origin`: rich text of where offsets count from;
 * `rough` values are read from a map, and marked so.
 */
export function patternLayout({ components, unit, view, viewWords, kindOf, idsOf = () => [], levelOf = (label) => [label], origin = [], rough = false }) {
  const places = placesOf(components, unit, view);
  const seen = places.filter((place) => place.strength > 0);
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
    const sticks = sticksOf(seen, (APART * (high - low)) / (width - RIGHT - LEFT));
    const strongest = Math.max(...sticks.map(({ strength }) => strength), 0) || 1;
    const shown = sticks.filter(({ x }) => x >= low && x <= high);
    const long = (strength) => (strength / strongest) * tall;
    const end = (stick) => axis + (stick.up ? -1 : 1) * long(stick.strength);
    return {
      height,
      marks: shown.map((stick) => {
        const x = scale(stick.x);
        const members = stick.places.flatMap((place) => place.members);
        const strong = members.reduce((best, member) => (member[view] > best[view] ? member : best));
        const [id = null] = idsOf(strong);
        return {
          x: x - 5, y: Math.min(axis, end(stick)), w: 10, h: Math.max(Math.abs(end(stick) - axis), 2) + (stick.up ? 0 : TRIANGLE),
          part: (stick.x - first) / whole, id, ids: members.flatMap(idsOf).filter((other) => other !== id), get reading() { return readingOf(stick, unit, { view, viewWords, kindOf, levelOf, rough }); },
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
        for (const stick of shown) {
          let strength = 0;
          for (const part of stick.parts) {
            const begin = axis + (stick.up ? -1 : 1) * long(strength);
            strength += part.strength;
            part.end = axis + (stick.up ? -1 : 1) * long(strength);
            bar(pen, part.polarisation, scale(stick.x), begin, part.end, energy);
          }
        }
        labels(pen, shown, scale);
        const beginning = width < 420 ? [] : [{ text: " from " }, ...(origin.length > 0 ? origin : [{ text: "the line without field" }])];
        bottomAxis(pen, { scale, from: low, to: high, left: LEFT, right: width - RIGHT, y: bottom, title: [{ text: "Offset" }, ...beginning, { text: " (" }, ...unitOf(OFFSET_UNITS[unit].unit).runs, { text: ")" }] });
      },
    };
  };
}

function bar(pen, polarisation, x, begin, end, energy) {
  const { colour } = SIGNS[polarisation];
  pen.line(x, begin, x, end, { stroke: colour, width: 3 });
  if (polarisation === "pi") return;
  const rises = SIGNS[polarisation].step > 0;
  const towards = (rises ? 1 : -1) * energy;
  const tip = [x + towards * TRIANGLE, end + TRIANGLE / 2];
  const base = [[x - towards * TRIANGLE * 0.6, end - TRIANGLE / 2], [x - towards * TRIANGLE * 0.6, end + 1.5 * TRIANGLE]];
  pen.polygon([tip, ...base], rises ? { fill: colour, stroke: colour } : { fill: "sheet", stroke: colour, width: 1.5 });
}

// Each polarisation is named once, at its strongest bar; names at one height step aside from each other.
function labels(pen, shown, scale) {
  const at = [];
  for (const polarisation of Object.keys(SIGNS)) {
    const own = shown.flatMap((stick) => stick.parts.filter((part) => part.polarisation === polarisation).map((part) => ({ stick, part })));
    if (own.length === 0) continue;
    const { stick, part } = own.reduce((best, each) => (each.part.strength > best.part.strength * (1 + 1e-9) ? each : best));
    at.push({ sign: SIGNS[polarisation], x: scale(stick.x), y: stick.up ? part.end - 7 : part.end + TRIANGLE * 1.5 + 16, isLast: part === stick.parts.at(-1) });
  }
  for (const one of at) {
    // Inside a stick the next part goes on below: its name stands beside it.
    if (!one.isLast) one.x += 3 * TRIANGLE;
    const other = at.find((each) => each !== one && each.isLast && one.isLast && Math.abs(each.x - one.x) < 26 && Math.abs(each.y - one.y) < 14);
    const aside = other ? 13 * (Math.sign(one.x - other.x) || Math.sign(one.sign.step - other.sign.step)) : 0;
    pen.text(one.x + aside, one.isLast ? one.y : one.y - 14, one.sign.runs, { anchor: "middle", fill: one.sign.colour, weight: 600 });
  }
}

// Every component of a stick by its levels and M, by polarisation; where it lies and how strong it is.
function readingOf(stick, unit, { view, viewWords, kindOf, levelOf, rough }) {
  const { unit: unitName } = OFFSET_UNITS[unit];
  const number = (value, name, key) => ({ number: rough ? { text: `~${trueMinus(Number(value.toPrecision(5)))}`, unit: name } : { text: String(value), unit: name, kind: kindOf(key) } });
  let left = MOST;
  const parts = stick.parts.flatMap(({ polarisation, places }, i) => {
    const members = places.flatMap((place) => place.members).sort((a, b) => b[view] - a[view]);
    const { runs, plain, speech } = SIGNS[polarisation];
    const rest = Math.max(members.length - Math.max(left, 0), 0);
    const named = members.slice(0, members.length - rest);
    left -= members.length;
    return [i > 0 ? "; " : "", { sign: { runs, plain, speech } }, ...(named.length > 0 ? [", ", ...jumps(named, levelOf)] : []), ...(rest > 0 ? [` and ${rest} more, in the table`] : [])];
  });
  const wide = stick.to - stick.from > SAME * Math.max(Math.abs(stick.to), Math.abs(stick.from));
  return [
    ...parts, ": offset ", ...(wide ? [number(stick.from, null, unit), " to "] : []), number(wide ? stick.to : stick.x, unitName, unit),
    `; strength ${viewWords} `, number(stick.strength, null, view), ...(stick.places.length > 1 ? [" together"] : []),
  ];
}

// Levels are told where they change from one member to the next.
function jumps(members, levelOf) {
  let last = null;
  return members.flatMap((member, i) => {
    const levels = `${member.isotope ?? ""} ${member.level_lower} ${member.level_upper}`;
    const end = (side) => `${member[`F_${side}`] === null || member[`F_${side}`] === undefined ? "" : `F ${member[`F_${side}`]} `}M ${trueMinus(member[`M_${side}`])}`;
    const same = levels === last;
    last = levels;
    const level = (side) => (same ? [] : [...levelOf(member[`level_${side}`]), " "]);
    return [i > 0 ? ", " : "", ...(same || !member.isotope ? [] : [`${member.isotope} `]), ...level("lower"), end("lower"), " to ", ...level("upper"), end("upper")];
  });
}
