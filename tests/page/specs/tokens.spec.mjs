// The contrasts of the colours, computed from the style sheet by WCAG 2.2, "relative luminance"
// and "contrast ratio" (https://www.w3.org/TR/WCAG22/#dfn-contrast-ratio).

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";

const TOKENS = readFileSync(new URL("../../../www/style/tokens.css", import.meta.url), "utf8");

/** The colours of the first block that starts with this text. */
function colours(start) {
  const from = TOKENS.indexOf(start);
  assert.notEqual(from, -1, start);
  const block = TOKENS.slice(from, TOKENS.indexOf("}", from));
  return Object.fromEntries([...block.matchAll(/--([\w-]+):\s*(#[0-9A-Fa-f]{6})/g)].map(([, name, value]) => [name, value]));
}

function luminance(colour) {
  const [red, green, blue] = [1, 3, 5].map((at) => {
    const part = parseInt(colour.slice(at, at + 2), 16) / 255;
    return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(one, other) {
  const [light, dark] = [luminance(one), luminance(other)].sort((a, b) => b - a);
  return (light + 0.05) / (dark + 0.05);
}

const THEMES = {
  light: colours(":root {"),
  "dark by choice": colours(':root[data-theme="dark"]'),
  "dark by the system": colours(':root:not([data-theme="light"])'),
};

test("white on black is 21 to 1", () => {
  assert.ok(Math.abs(contrast("#FFFFFF", "#000000") - 21) < 1e-9);
});

for (const [theme, colour] of Object.entries(THEMES)) {
  // SC 1.4.3 asks for 4.5 for text and SC 1.4.11 for 3 for what is needed to see a control; text
  // that carries an answer has 7 (SC 1.4.6), which leaves room for poor projectors.
  const least = { ink: 7, quiet: 4.5, rung: 4.5, care: 4.5, fault: 4.5, edge: 3, s1: 4.5, s2: 4.5, s3: 4.5, s4: 4.5 };
  for (const [name, bound] of Object.entries(least)) {
    test(`${name} on paper and sheet, ${theme}`, () => {
      for (const ground of ["paper", "sheet"]) {
        const found = contrast(colour[name], colour[ground]);
        assert.ok(found >= bound, `${name} on ${ground}: ${found.toFixed(2)} of at least ${bound}`);
      }
    });
  }
  test(`ink on every wash, ${theme}`, () => {
    for (const wash of ["wash-chosen", "wash-care", "wash-fault"]) {
      const found = contrast(colour.ink, colour[wash]);
      assert.ok(found >= 7, `${wash}: ${found.toFixed(2)}`);
    }
  });
}

test("both dark themes are the same", () => {
  assert.deepEqual(THEMES["dark by the system"], THEMES["dark by choice"]);
});

// The ratios as the design states them, to one decimal; hair is decoration and has no bound.
const STATED = {
  light: { ink: [14.7, 16.0], quiet: [6.9, 7.5], edge: [3.7, 4.1], hair: [1.3, 1.4], rung: [7.4, 8.2], care: [6.9, 7.6], fault: [7.3, 8.0] },
  "dark by choice": { ink: [15.0, 13.5], quiet: [8.9, 8.0], edge: [5.2, 4.7], hair: [1.7, 1.5], rung: [9.9, 8.9], care: [9.9, 8.9], fault: [8.4, 7.5] },
};
for (const [theme, stated] of Object.entries(STATED)) {
  test(`the stated ratios, ${theme}`, () => {
    for (const [name, [paper, sheet]] of Object.entries(stated)) {
      assert.ok(Math.abs(contrast(THEMES[theme][name], THEMES[theme].paper) - paper) <= 0.06, `${name} on paper`);
      assert.ok(Math.abs(contrast(THEMES[theme][name], THEMES[theme].sheet) - sheet) <= 0.06, `${name} on sheet`);
    }
  });
}
