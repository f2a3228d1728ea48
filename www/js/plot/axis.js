// Scales and axes: ticks outside, the title with its unit at the end.

import { trueMinus } from "../digits.js";
import { LABEL } from "./pen.js";

const TICK = 5;

/** A linear scale from [from, to] to pixels [left, right]. */
export function linearScale(from, to, left, right) {
  const span = to - from || 1;
  return (value) => left + ((value - from) / span) * (right - left);
}

/** Round values between `from` and `to`, about `wanted` of them, with the decimals they need. */
export function ticks(from, to, wanted) {
  const span = to - from;
  if (!(span > 0) || !Number.isFinite(span)) return { values: [from], decimals: 0 };
  const rough = span / Math.max(wanted, 1);
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((factor) => factor * power).find((size) => size >= rough * 0.999999);
  const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const first = Math.ceil(from / step - 1e-9);
  const count = Math.floor(to / step + 1e-9) - first;
  // Multiples of the step, not sums of it: sums drift.
  return { values: Array.from({ length: count + 1 }, (_, i) => (first + i) * step), decimals };
}

/** A horizontal axis at `y`, with the title (runs) beneath; `at` are its ticks where they are not even. */
export function bottomAxis(pen, { scale, from, to, left, right, y, title, at = null }) {
  const { values, decimals } = at ?? ticks(from, to, Math.max(2, (right - left) / 64));
  pen.line(left, y, right, y, { stroke: "edge" });
  for (const value of values) {
    const x = scale(value);
    pen.line(x, y, x, y + TICK, { stroke: "edge" });
    pen.text(x, y + TICK + LABEL + 1, tickText(value, decimals ?? decimalsOf(value)), { anchor: "middle", fill: "quiet" });
  }
  pen.text((left + right) / 2, y + TICK + 2 * LABEL + 9, title, { anchor: "middle", fill: "quiet" });
}

/** A vertical axis at `x`, its numbers to the left of it. */
export function leftAxis(pen, { scale, from, to, x, top, bottom }) {
  const wanted = Math.max(2, (bottom - top) / 48);
  const usual = ticks(from, to, wanted);
  // One number alone is no scale.
  const { values, decimals } = usual.values.length < 2 ? ticks(from, to, 2 * wanted) : usual;
  pen.line(x, top, x, bottom, { stroke: "edge" });
  for (const value of values) {
    pen.line(x - TICK, scale(value), x, scale(value), { stroke: "edge" });
    pen.text(x - TICK - 4, scale(value) + LABEL / 3, tickText(value, decimals), { anchor: "end", fill: "quiet" });
  }
}

/** Round values from `from` to `to` on an axis that runs as the root: at least `apart` pixels apart. */
export function rootTicks(from, to, place, apart) {
  const values = [];
  const add = (value) => {
    if (value >= from && value <= to && values.every((other) => Math.abs(place(other) - place(value)) >= apart)) values.push(value);
  };
  add(0);
  // Round ones first, then what fits between them.
  for (const steps of [[1], [5], [2]]) for (let power = 3; power >= -5; power -= 1) for (const step of steps) add(Number(`${step}e${power}`));
  return values.length < 3 ? ticks(from, to, 4) : { values };
}

/** The height that `bottomAxis` takes beneath its line. */
export const BOTTOM_AXIS = TICK + 2 * LABEL + 16;

function decimalsOf(value) {
  return Math.max(0, -Math.floor(Math.log10(Math.abs(value) || 1) + 1e-9));
}

/** A tick's number; with enough decimals for its step. */
export function tickText(value, decimals) {
  if (value !== 0 && (Math.abs(value) < 1e-6 || Math.abs(value) >= 1e7)) return trueMinus(value.toExponential(1).replace("e+", "e"));
  const text = value.toFixed(Math.min(decimals, 12));
  return trueMinus(Number(text) === 0 ? text.replace("-", "") : text);
}
