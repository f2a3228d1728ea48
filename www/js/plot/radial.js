// Radial distributions: P² against √r or r. The most probable radius is a filled tick on the curve,
// the mean radius a hollow one. Dash and hue tell ℓ, markers on the curve tell whose it is.

import { BOTTOM_AXIS, bottomAxis, linearScale, rootTicks, tickText, ticks } from "./axis.js";
import { LABEL } from "./pen.js";

/** What runs along the horizontal axis. */
export const ALONG = { root: "√r", plain: "r" };
/** What height means. */
export const HEIGHTS = { density: "P² as it is", own: "each to its own highest" };
/** What tells the sets apart: sign in labels and lists, and words. */
export const MARKERS = [{ sign: "", words: "plain" }, { sign: "○", words: "circles" }, { sign: "■", words: "squares" }, { sign: "△", words: "triangles" }, { sign: "◆", words: "diamonds" }];

const LEFT = 56;
const RIGHT = 20;
const TOP = 48;
// More room for the names of many curves.
const MANY = 8;
// s whole, p dashed, d dotted, f in dash and dot.
const DASHES = { 0: null, 1: "9 4", 2: "2 3", 3: "12 3 2 3" };
const HUES = ["s1", "s2", "s3", "s4"];
// Curves are drawn to where they have fallen to this part of their height.
const FALLEN = 2e-3;
// The cursor's places on all curves together.
const MOST_PLACES = 1600;
const MARKER_EVERY = 64;

/**
 * The layout for `picture`. A curve: {id, label, set, l, r, density, height, mean, most_probable,
 * name (rich), kind}; `chosen()` is the id of the curve that stands out.
 */
export function radialLayout({ curves, along, height: how, chosen }) {
  const root = along === "root";
  const place = root ? Math.sqrt : (r) => r;
  const drawn = curves.map((curve) => {
    const last = curve.density.findLastIndex((density) => density > FALLEN * curve.height);
    const r = curve.r.slice(0, last + 2);
    const unit = how === "own" ? curve.height : 1;
    const points = r.map((radius, i) => [place(radius), curve.density[i] / unit]);
    return { ...curve, points, at: (radius) => between(points, place(radius)) };
  });
  const whole = Math.max(...drawn.map(({ points }) => points.at(-1)[0]));
  const every = Math.max(1, Math.ceil(drawn.reduce((sum, { points }) => sum + points.length, 0) / MOST_PLACES));
  return (width, [a, b]) => {
    const [from, to] = [a * whole, b * whole];
    const height = Math.round(Math.min(Math.max((width * 7) / 16, 320), 460));
    const bottom = height - BOTTOM_AXIS;
    const ceiling = drawn.length > MANY ? TOP + 44 : TOP;
    const x = linearScale(from, to, LEFT, width - RIGHT);
    const cut = drawn.map(({ points }) => clipped(points, from, to));
    const top = Math.max(...cut.flat().map(([, value]) => value), 0) * 1.02 || 1;
    const y = linearScale(0, top, bottom, ceiling);
    const tick = (curve, radius) => ({ x: x(place(radius)), y: y(curve.at(radius)), seen: place(radius) >= from && place(radius) <= to });
    return {
      height,
      marks: drawn.flatMap((curve, i) => marksOf(curve, i)),
      draw(pen) {
        frame(pen);
        drawn.forEach((curve, i) => strokes(pen, curve, cut[i]));
        labels(pen);
      },
    };

    function marksOf(curve, i) {
      const part = (u) => u / whole;
      const spots = curve.points.flatMap(([u, value], k) => (k % every === 0 ? [{
        u, x: x(u), y: y(value), w: 0, h: 0, id: null,
        reading: [...curve.name, ": P² is ", number(curve.density[k], "a0^-1", curve.kind), " at r = ", number(curve.r[k], "a0", null)],
      }] : []));
      const own = [[curve.most_probable, "most probable radius "], [curve.mean, "mean radius "]].map(([radius, words]) => ({
        u: place(radius), x: x(place(radius)) - 3, y: y(curve.at(radius)) - 8, w: 6, h: 16, id: curve.id,
        reading: [...curve.name, `: ${words}`, number(radius, "a0", curve.kind)],
      }));
      return [...spots, ...own].sort((one, other) => one.u - other.u).map((mark) => ({ ...mark, part: part(mark.u), chooses: curve.id, curve: i }));
    }

    function frame(pen) {
      pen.text(4, 16, how === "own" ? "P², each curve to its own highest" : [{ text: "P² (1/a" }, { down: "0" }, { text: ")" }], { fill: "quiet" });
      const { values, decimals } = ticks(0, top, 4);
      for (const value of values) {
        pen.line(LEFT - 5, y(value), LEFT, y(value), { stroke: "edge" });
        pen.text(LEFT - 8, y(value) + 4, tickText(value, decimals), { anchor: "end", fill: "quiet" });
      }
      pen.line(LEFT, ceiling - 8, LEFT, bottom, { stroke: "edge" });
      bottomAxis(pen, {
        scale: (r) => x(place(r)), from: root ? from * from : from, to: root ? to * to : to, left: LEFT, right: width - RIGHT, y: bottom,
        title: [{ text: "r (a" }, { down: "0" }, { text: root ? "), spaced as √r" : ")" }],
        at: root ? rootTicks(from * from, to * to, (r) => x(place(r)), 40) : null,
      });
    }

    function strokes(pen, curve, points) {
      const stroke = HUES[curve.l] ?? "ink";
      const out = chosen() === curve.id;
      const line = points.map(([u, value]) => [x(u), y(value)]);
      pen.polyline(line, { stroke, width: out ? 4 : 2, dash: curve.l in DASHES ? DASHES[curve.l] : "6 2 2 2 2 2" });
      if (curve.set > 0) for (const spot of spotsOn(line)) marker(pen, curve.set, spot, stroke);
      for (const [radius, fill] of [[curve.most_probable, stroke], [curve.mean, "sheet"]]) {
        const at = tick(curve, radius);
        if (at.seen) pen.rect(at.x - 2.5, at.y - 8, 5, 16, { fill, stroke, width: 1.5 });
      }
    }

    // Each curve is named at its filled tick; names that would meet step up.
    function labels(pen) {
      const box = (spot, wide) => ({ x: spot.x, y: spot.y + 5, wide });
      const taken = drawn.flatMap((curve, i) => [
        ...[curve.most_probable, curve.mean].map((radius) => box(tick(curve, radius), 8)),
        ...cut[i].map(([u, value]) => box({ x: x(u), y: y(value) }, 1)),
      ]);
      const named = drawn.map((curve) => ({ curve, ...tick(curve, curve.most_probable) })).filter(({ seen }) => seen).sort((one, other) => one.x - other.x);
      for (const { curve, x: at, y: peak } of named) {
        const text = `${curve.label}${curve.set > 0 ? ` ${MARKERS[curve.set].sign}` : ""}`;
        const wide = 8 * text.length + 6;
        const middle = Math.min(Math.max(at, LEFT + wide / 2), width - RIGHT - wide / 2);
        let line = peak - 13;
        while (line > 30 && taken.some((other) => Math.abs(other.x - middle) < (other.wide + wide) / 2 && Math.abs(other.y - line) < LABEL + 2)) line -= 4;
        taken.push({ x: middle, y: line, wide });
        if (peak - line > 22) pen.line(middle, line + 3, at, peak - 9, { stroke: "edge" });
        pen.text(middle, line, text, { anchor: "middle", fill: HUES[curve.l] ?? "ink", weight: 600 });
      }
    }
  };
}

/** Left and right along a curve, up and down to the nearest place of the next one. */
export function radialWalk(at, key, marks) {
  const here = marks[at];
  if (key === "ArrowLeft" || key === "ArrowRight") {
    const next = at + (key === "ArrowRight" ? 1 : -1);
    return marks[next]?.curve === here.curve ? next : at;
  }
  const wanted = here.curve + (key === "ArrowDown" ? 1 : -1);
  let best = at;
  marks.forEach((mark, i) => {
    if (mark.curve === wanted && (best === at || Math.abs(mark.u - here.u) < Math.abs(marks[best].u - here.u))) best = i;
  });
  return best;
}

function number(value, unit, kind) {
  return { number: { text: String(value), unit, kind } };
}

// Only to place a tick on the line that is drawn.
function between(points, u) {
  const i = points.findIndex(([at]) => at >= u);
  if (i <= 0) return points.at(i)[1];
  const [[u0, v0], [u1, v1]] = [points[i - 1], points[i]];
  return v0 + ((u - u0) / (u1 - u0)) * (v1 - v0);
}

function clipped(points, from, to) {
  const inside = points.filter(([u]) => u >= from && u <= to);
  const last = points.at(-1)[0];
  return [
    ...(from > points[0][0] && from < last ? [[from, between(points, from)]] : []),
    ...inside,
    ...(to < last ? [[to, between(points, to)]] : []),
  ];
}

// Places of markers on a line, even along its way.
function spotsOn(line) {
  const spots = [];
  let left = MARKER_EVERY / 2;
  for (let i = 1; i < line.length; i += 1) {
    left -= Math.hypot(line[i][0] - line[i - 1][0], line[i][1] - line[i - 1][1]);
    if (left > 0) continue;
    spots.push(line[i]);
    left = MARKER_EVERY;
  }
  return spots;
}

function marker(pen, set, [x, y], stroke) {
  const style = { stroke, width: 1.5, fill: set === 1 || set === 3 ? "sheet" : stroke };
  if (set === 1) pen.circle(x, y, 3.5, style);
  else if (set === 2) pen.rect(x - 3, y - 3, 6, 6, style);
  else if (set === 3) pen.polygon([[x, y - 5], [x + 4.5, y + 3], [x - 4.5, y + 3]], style);
  else pen.polygon([[x, y - 5], [x + 4, y], [x, y + 5], [x - 4, y]], style);
}
