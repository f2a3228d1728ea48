// The contrasts of the colours, computed from the style sheet itself.
//
// Formula: relative luminance and contrast ratio of WCAG 2.2 (https://www.w3.org/TR/WCAG22/,
// definitions "relative luminance" and "contrast ratio"); 4.5 for text (1.4.3), 3 for the borders
// of fields and for marks in pictures (1.4.11).

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";

const source = readFileSync(new URL("../../../www/style/tokens.css", import.meta.url), "utf8");

/** The colours declared in the block that follows `selector`. */
function tokens(selector) {
  const at = source.indexOf(selector);
  assert.notEqual(at, -1, selector);
  const block = source.slice(source.indexOf("{", at) + 1, source.indexOf("}", at));
  return Object.fromEntries([...block.matchAll(/--([a-z0-9-]+):\s*(#[0-9A-Fa-f]{6});/g)].map(([, name, value]) => [name, value]));
}

function luminance(colour) {
  const [r, g, b] = [1, 3, 5].map((at) => parseInt(colour.slice(at, at + 2), 16) / 255)
    .map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

function contrast(one, other) {
  const [dark, light] = [luminance(one), luminance(other)].sort((a, b) => a - b);
  return (light + 0.05) / (dark + 0.05);
}

const schemes = {
  light: tokens(":root {"),
  "dark by choice": tokens(":root[data-theme=\"dark\"] {"),
  "dark by the system": tokens(":root:not([data-theme=\"light\"]) {"),
};

// What the design promises, to one decimal: on paper, on sheet.
const PROMISED = {
  light: { ink: [14.7, 16.0], quiet: [6.9, 7.5], edge: [3.7, 4.1], hair: [1.3, 1.4], rung: [7.4, 8.2], care: [6.9, 7.6], fault: [7.3, 8.0] },
  dark: { ink: [15.0, 13.5], quiet: [8.9, 8.0], edge: [5.2, 4.7], hair: [1.7, 1.5], rung: [9.9, 8.9], care: [9.9, 8.9], fault: [8.4, 7.5] },
};
const PROMISED_ON_WASH = {
  light: { chosen: 13.6, care: 14.3, fault: 13.7 },
  dark: { chosen: 10.3, care: 12.0, fault: 12.7 },
};

test("the formula gives 21 for black on white", () => {
  assert.ok(Math.abs(contrast("#000000", "#FFFFFF") - 21) < 1e-9);
});

test("both ways to dark are the same colours", () => {
  assert.deepEqual(schemes["dark by choice"], schemes["dark by the system"]);
});

for (const [scheme, colours] of Object.entries(schemes)) {
  const kind = scheme.split(" ")[0];
  test(`contrasts, ${scheme}`, () => {
    for (const ground of ["paper", "sheet"]) {
      for (const text of ["ink", "quiet", "rung", "care", "fault"]) {
        assert.ok(contrast(colours[text], colours[ground]) >= 4.5, `${text} on ${ground}`);
      }
      for (const mark of ["edge", "s1", "s2", "s3", "s4"]) {
        assert.ok(contrast(colours[mark], colours[ground]) >= 3, `${mark} on ${ground}`);
      }
      for (const series of ["s1", "s2", "s3", "s4"]) {
        assert.ok(contrast(colours[series], colours[ground]) >= (kind === "light" ? 5.45 : 7.85), `${series} on ${ground}`);
      }
    }
    for (const [token, promised] of Object.entries(PROMISED[kind])) {
      ["paper", "sheet"].forEach((ground, index) => {
        const found = contrast(colours[token], colours[ground]);
        assert.ok(Math.abs(found - promised[index]) <= 0.051, `${token} on ${ground}: ${found.toFixed(2)}, promised ${promised[index]}`);
      });
    }
    for (const [wash, promised] of Object.entries(PROMISED_ON_WASH[kind])) {
      const found = contrast(colours.ink, colours[`wash-${wash}`]);
      assert.ok(Math.abs(found - promised) <= 0.051, `ink on the ${wash} wash: ${found.toFixed(2)}, promised ${promised}`);
    }
    for (const wash of ["care", "fault"]) {
      assert.ok(contrast(colours[wash], colours[`wash-${wash}`]) >= 4.5, `${wash} on its wash`);
    }
  });
}
