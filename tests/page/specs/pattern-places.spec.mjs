// Where the bars of a pattern stand, and how axes are cut.

import assert from "node:assert/strict";
import { test } from "node:test";
import { placesOf, sticksOf } from "../../../www/js/plot/pattern.js";
import { linearScale, tickText, ticks } from "../../../www/js/plot/axis.js";

// The normal triplet 1D2 – 1P1: nine components on three places (standard; from memory).
const NINE = [-1, 0, 1].flatMap((q) => [-1, 0, 1].map((M) => ({
  polarisation: { "-1": "sigma-", 0: "pi", 1: "sigma+" }[q], M_lower: String(M), M_upper: String(M + q), lorentz: q * (1 + 1e-15 * M), pm: null, across: 0.1, strength: 1 / 9,
})));

test("components on one place are one bar with their strengths added", () => {
  const places = placesOf(NINE, "lorentz", "strength");
  assert.deepEqual(places.map(({ polarisation, members }) => [polarisation, members.length]), [["sigma-", 3], ["pi", 3], ["sigma+", 3]]);
  for (const place of places) assert.ok(Math.abs(place.strength - 1 / 3) < 1e-12);
});

test("sticks that a picture cannot tell apart are one, each polarisation a part of it", () => {
  const one = (polarisation, x, strength) => ({ polarisation, x, strength, members: [{}] });
  // π stands above the axis: the three below it at nearly one place are one stick.
  const places = [one("sigma-", -1, 0.1), one("sigma+", -0.999, 0.2), one("sigma-", -0.998, 0.3), one("pi", -0.999, 0.4), one("sigma+", 0.5, 0.6)].sort((a, b) => a.x - b.x);
  const sticks = sticksOf(places, 0.01);
  assert.deepEqual(sticks.map(({ up, places: { length } }) => [up, length]).sort(), [[false, 1], [false, 3], [true, 1]]);
  const three = sticks.find(({ places: { length } }) => length === 3);
  assert.ok(Math.abs(three.strength - 0.6) < 1e-12);
  assert.deepEqual(three.parts.map(({ polarisation, strength }) => [polarisation, Number(strength.toFixed(9))]), [["sigma+", 0.2], ["sigma-", 0.4]]);
  assert.deepEqual(sticksOf(places, 1e-6).map(({ places: { length } }) => length), [1, 1, 1, 1, 1]);
});

test("a unit without values gives no bars", () => {
  assert.deepEqual(placesOf(NINE, "pm", "strength"), []);
});

test("ticks are round, inside, and multiples of their step", () => {
  const { values, decimals } = ticks(-1.93, 1.93, 5);
  assert.deepEqual(values, [-1, 0, 1]);
  assert.equal(decimals, 0);
  assert.deepEqual(ticks(0, 0.35, 7).values.map((value) => tickText(value, ticks(0, 0.35, 7).decimals)), ["0.00", "0.05", "0.10", "0.15", "0.20", "0.25", "0.30", "0.35"]);
  assert.deepEqual(ticks(2, 2, 5).values, [2]);
  assert.equal(tickText(-0, 2), "0.00");
});

test("a scale runs from edge to edge, and a scale of nothing is finite", () => {
  const scale = linearScale(-2, 2, 50, 250);
  assert.equal(scale(0), 150);
  assert.deepEqual([scale(-2), scale(2)], [50, 250]);
  assert.ok(Number.isFinite(linearScale(1, 1, 0, 10)(1)));
});
