// The field map: energies or offsets against the field. A followed state keeps its dash through every
// crossing; crossings are ×, avoided ones )(, clock points a flat bar.

import { BOTTOM_AXIS, bottomAxis, leftAxis, linearScale } from "./axis.js";
import { cubicAt, placeIn } from "./hermite.js";
import { LABEL } from "./pen.js";

const LEFT = 68;
const RIGHT = 56;
/** Room for what the rule is at, above the first panel's title. */
const TOP = 50;
const HEAD = 22;
const GAP = 30;
const MARGIN = 0.06;
/** Points of a curve in a part of the map that is enlarged. */
const POINTS = 96;
/** Labels closer than this would touch; names of levels have raised and lowered parts. */
const APART = 14;
const NAMES_APART = 19;
/** Height that each further panel adds. */
const MORE = 60;
const SIGN = 5;
/** How far from a curve or a sign a finger may be. */
const REACH = 24;

/** Dashes and colours of the levels that states come from, in their order. */
export const STROKES = [
  { colour: "s1", dash: null }, { colour: "s2", dash: "8 4" }, { colour: "s3", dash: "2 4" }, { colour: "s4", dash: "12 3 2 3" },
];

/** Height of a picture: 16:7 on a tablet, nearer to a square where it is narrow. */
export function pictureHeight(width) {
  return Math.round(width >= 600 ? Math.min(Math.max((width * 7) / 16, 300), 420) : Math.min(Math.max(width * 0.8, 300), 420));
}

/**
 * The layout for `picture`.
 *
 * `fields`: tesla of the map; `panels`: [{title (runs), factor, reference, series: [{id, ids, label (runs), group (runs), values, slopes, colour, dash}],
 * signs: [{kind, tesla, value, id, reading}]}]; values are drawn as (value − reference) · factor.
 * `at()`: tesla of the rule; `reading(series, panel)`: rich text of a series at the rule; `chosen(series)`; `axis`, `unitTitle`: runs;
 * `linearTo`: where the linear pattern ends, or null; `placed(shown)`: called once it is drawn.
 */
export function fieldMapLayout({ fields, panels, at, reading, chosen, axis, linearTo = null, ruleText, placed }) {
  const end = fields.at(-1);
  return (width, [a, b], file = false) => {
    const [low, high] = [a * end, b * end];
    const right = width - RIGHT;
    const scale = linearScale(low, high, LEFT, right);
    const tall = pictureHeight(width) + 20 + (panels.length - 1) * MORE;
    const bottom = tall - BOTTOM_AXIS;
    const part = (bottom - TOP - GAP * (panels.length - 1)) / panels.length;
    const samples = sampled(fields, low, high);
    const drawn = panels.map((panel, i) => {
      const top = TOP + i * (part + GAP);
      const place = (value) => (value - panel.reference) * panel.factor;
      const curves = panel.series.map((series) => ({ series, points: samples.map((each) => place(cubicAt(series.values, series.slopes, each))) }));
      const [least, most] = extent(curves.map(({ points }) => points));
      const margin = (most - least || Math.abs(most) || 1) * MARGIN;
      const y = linearScale(least - margin, most + margin, top + part, top + HEAD - 12);
      return { panel, top, bottom: top + part, place, curves, y, from: least - margin, to: most + margin };
    });
    const shown = {
      height: tall,
      rule: { x: (tesla) => (tesla >= low && tesla <= high ? scale(tesla) : null), tesla: (x) => low + ((x - LEFT) / (right - LEFT)) * (high - low), top: TOP - 8, bottom, width },
      marks: [],
      marksAt(tesla) {
        const place = placeIn(fields, tesla);
        const x = scale(tesla);
        return drawn.flatMap((each) => [
          ...each.curves.map(({ series }) => {
            const y = each.y(each.place(cubicAt(series.values, series.slopes, place)));
            return { x: x - 8, y: y - 5, w: 16, h: 10, part: tesla / end, id: series.id, ids: series.ids, series, get reading() { return reading(series, each.panel, place); } };
          }).sort((one, other) => one.y - other.y),
          ...each.panel.signs.map((sign) => ({
            x: scale(sign.tesla) - SIGN, y: each.y(each.place(sign.value)) - SIGN, w: 2 * SIGN, h: 2 * SIGN, part: sign.tesla / end, id: sign.id, ids: sign.ids, sign, reading: sign.reading,
          })),
        ]);
      },
      // A sign, or else the curve under the finger.
      find(x, y) {
        const { marks } = shown;
        let best = -1;
        let least = REACH;
        const tesla = shown.rule.tesla(x);
        const place = placeIn(fields, Math.min(Math.max(tesla, low), high));
        let index = 0;
        const take = (off) => {
          if (off < least) [best, least] = [index, off];
          index += 1;
        };
        const heights = new Map(drawn.flatMap((each) => each.curves.map(({ series }) => [series, each.y(each.place(cubicAt(series.values, series.slopes, place)))])));
        for (const mark of marks) {
          if (mark.sign) take(mark.part < a || mark.part > b ? Infinity : Math.hypot(mark.x + SIGN - x, mark.y + SIGN - y) - 4);
          else take(x < LEFT - 4 || x > width ? Infinity : Math.abs(heights.get(mark.series) - y));
        }
        return best;
      },
      draw(pen) {
        drawn.forEach((each) => {
          pen.text(8, each.top - 10, each.panel.title, { fill: "quiet" });
          leftAxis(pen, { scale: each.y, from: each.from, to: each.to, x: LEFT, top: each.top, bottom: each.bottom });
          for (const { series, points } of each.curves) {
            pen.polyline(points.map((value, k) => [scale(samples[k].tesla), each.y(value)]), { stroke: series.colour, dash: series.dash, width: chosen(series) ? 4 : 1.5 });
          }
          labels(pen, each, right);
          for (const sign of each.panel.signs) if (sign.tesla >= low && sign.tesla <= high) drawSign(pen, sign.kind, scale(sign.tesla), each.y(each.place(sign.value)));
        });
        if (linearTo !== null && linearTo > low && linearTo < high) {
          pen.line(scale(linearTo), TOP, scale(linearTo), bottom, { stroke: "edge", dash: "1 4" });
          // Beside the names of the levels there is no room for it.
          if (scale(linearTo) > LEFT + 60) pen.text(scale(linearTo) + 4, bottom - 20, "linear up to here", { anchor: scale(linearTo) > right - 110 ? "end" : "start", fill: "quiet", halo: "sheet" });
        }
        bottomAxis(pen, { scale, from: low, to: high, left: LEFT, right, y: bottom, title: axis });
        if (!file) return;
        const x = shown.rule.x(at());
        if (x === null) return;
        pen.line(x, TOP - 8, x, bottom, { stroke: "ink", width: 2 });
        pen.text(x, TOP - 30, ruleText(), { anchor: "middle", weight: 600 });
      },
      placed: () => placed(shown),
    };
    shown.marks = shown.marksAt(Math.min(Math.max(at(), 0), end));
    return shown;
  };
}

// Where curves are drawn through: the fields of the map in view, or points between them where few are.
function sampled(fields, low, high) {
  const inside = fields.filter((tesla) => tesla > low && tesla < high);
  const places = inside.length >= POINTS / 2 ? [low, ...inside, high] : Array.from({ length: POINTS + 1 }, (_, i) => low + ((high - low) * i) / POINTS);
  return places.map((tesla) => ({ tesla, ...placeIn(fields, tesla) }));
}

function extent(curves) {
  let least = Infinity;
  let most = -Infinity;
  for (const points of curves) {
    for (const value of points) {
      if (value < least) least = value;
      if (value > most) most = value;
    }
  }
  return least <= most ? [least, most] : [0, 1];
}

// Each level is named where its states begin, each state where it ends.
function labels(pen, { curves, y, top, bottom }, right) {
  const from = new Map();
  for (const { series, points } of curves) {
    const key = series.groupKey;
    if (series.group && (!from.has(key) || Math.abs(points[0]) < Math.abs(from.get(key).value))) from.set(key, { value: points[0], series });
  }
  const room = Math.floor((bottom - top) / NAMES_APART) - 1;
  const names = [...from.values()].map(({ value, series }) => ({ series, height: y(value) - 4 })).sort((p, q) => p.height - q.height)
    .filter((name, i, all) => all.length <= room || i === 0 || name.height - all[i - 1].height >= NAMES_APART).slice(0, room);
  // Names that would lie upon each other move apart, and stay in the panel.
  let least = top + NAMES_APART;
  for (const name of names) {
    name.height = Math.max(name.height, least);
    least = name.height + NAMES_APART;
  }
  let most = bottom - 4;
  for (const name of names.reverse()) {
    name.height = Math.min(name.height, most);
    most = name.height - NAMES_APART;
  }
  for (const { series, height } of names) pen.text(LEFT + 8, height, series.group, { halo: "sheet" });
  // States that end together are named together, from the highest to the lowest.
  const bundles = [];
  for (const end of curves.map(({ series, points }) => ({ label: series.label, height: y(points.at(-1)) })).filter(({ label }) => label).sort((p, q) => p.height - q.height)) {
    const last = bundles.at(-1);
    if (last && end.height - last.from < APART) Object.assign(last, { to: end.height, lowest: end.label });
    else bundles.push({ from: end.height, to: end.height, highest: end.label, lowest: end.label });
  }
  for (const { from: high, to, highest, lowest } of bundles) {
    const [one, other] = [highest, lowest].map(([{ text }]) => text);
    const both = one === other ? one : one.length + other.length > 6 ? `${one}…` : `${one}…${other}`;
    pen.text(right + 5, (high + to) / 2 + LABEL / 3, both, { fill: "quiet" });
  }
}

function drawSign(pen, kind, x, y) {
  if (kind === "avoided") {
    for (const side of [-1, 1]) {
      pen.polyline([[x + side * SIGN, y - SIGN], [x + side * 2.2, y - 2], [x + side * 2.2, y + 2], [x + side * SIGN, y + SIGN]], { stroke: "ink", width: 1.5 });
    }
  } else if (kind === "clock") pen.line(x - 7, y, x + 7, y, { stroke: "ink", width: 3 });
  else if (kind === "farthest") {
    pen.line(x, y - SIGN, x, y + SIGN, { stroke: "ink", width: 1.5 });
    for (const side of [-1, 1]) pen.line(x - 4, y + side * SIGN, x + 4, y + side * SIGN, { stroke: "ink", width: 1.5 });
  } else {
    pen.line(x - SIGN, y - SIGN, x + SIGN, y + SIGN, { stroke: "ink", width: 1.5 });
    pen.line(x - SIGN, y + SIGN, x + SIGN, y - SIGN, { stroke: "ink", width: 1.5 });
  }
}
