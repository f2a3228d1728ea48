// Numbers as they are shown.

import assert from "node:assert/strict";
import { test } from "node:test";
import { columnFormat, columnRuns, fullDigits, halfText, halfValue, numberRuns, trueMinus } from "../../../www/js/digits.js";

const shown = (runs) => runs.map((run) => run.text ?? `^${run.up}`).join("");
const column = (values, digits) => {
  const format = columnFormat(values, digits);
  return values.map((value) => shown(columnRuns(value, format)));
};

test("a column has equal decimals and a true minus", () => {
  assert.deepEqual(column([1.50115965, -0.5, 0], 6), ["1.50116", "\u22120.50000", "0.00000"]);
  assert.deepEqual(column([0.25, 0.5, 1], 6), ["0.25", "0.50", "1.00"]);
  assert.deepEqual(column([12, 3, 140], 3), ["12", "3", "140"]);
});

test("the smallest entry keeps two digits, and rounding leaves no negative zero", () => {
  assert.deepEqual(column([1234.5678, 0.001234], 4), ["1234.5678", "0.0012"]);
  assert.equal(shown(columnRuns(-1e-9, { decimals: 3 })), "0.000");
});

test("all digits means all digits", () => {
  const value = 0.46686447719;
  assert.deepEqual(column([value], 17), [String(value)]);
  assert.equal(shown(numberRuns(String(value), 17)), String(value));
  assert.equal(fullDigits(value), String(value));
});

test("very large and very small columns use powers of ten", () => {
  assert.deepEqual(column([1.25e12, 2e11], 4), ["1\u00a0×\u00a010^12", "2\u00a0×\u00a010^11"]);
  assert.deepEqual(column([1.5e-20, 2e-19], 3), ["1.50\u00a0×\u00a010^\u221220", "2.00\u00a0×\u00a010^\u221219"]);
});

test("fewer digits than the setting are not filled up", () => {
  assert.equal(shown(numberRuns("0.5", 6)), "0.5");
  assert.equal(shown(numberRuns("0.50", 6)), "0.50");
});

test("half-integers", () => {
  assert.equal(halfValue("-3/2"), -1.5);
  assert.equal(halfValue("4"), 4);
  assert.equal(halfText(2.5), "5/2");
  assert.equal(halfText(3), "3");
  assert.equal(trueMinus("-3/2"), "\u22123/2");
  assert.equal(trueMinus("jj-coupling"), "jj-coupling");
});
