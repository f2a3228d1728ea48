// The four forms in which a table is copied.

import assert from "node:assert/strict";
import { test } from "node:test";
import { FORMATS, fileName, headText, tableText } from "../../../www/js/export.js";
import { SIGNS } from "../../../www/js/plot/pattern.js";
import { latexText, richLatex } from "../../../www/js/rich.js";

const SHEET = {
  caption: "Levels of 2p2",
  columns: [
    { name: "level", type: "text" },
    { name: "J", type: "half" },
    { name: "g_J", latex: "$g_J$", type: "number", kind: "computed" },
    { name: "offset", unit: "cm-1", type: "number", kind: "exact" },
  ],
  rows: [
    [{ text: "2p2 3P2", latex: "2p$^{2}$ ${}^{3}\\mathrm{P}_{2}$" }, { text: "2" }, { text: "1.5011596521", value: 1.5011596521 }, { text: "-0.25", value: -0.25 }],
    [{ text: 'odd, "quoted"' }, { text: "3/2" }, { text: "", latex: "--" }, { text: "1e-7", value: 1e-7 }],
  ],
};

test("there are four forms, and no fifth", () => {
  assert.deepEqual(FORMATS.map(({ name }) => name), ["text", "spreadsheet", "csv", "latex"]);
  assert.throws(() => tableText(SHEET, "papyrus"), RangeError);
});

// Quoting and line ends by RFC 4180.
test("CSV has a point, units and kinds, and quotes what needs it", () => {
  assert.equal(tableText(SHEET, "csv", ","),
    'level,J,g_J [computed],offset (cm-1) [exact]\r\n2p2 3P2,2,1.5011596521,-0.25\r\n"odd, ""quoted""",3/2,,1e-7\r\n');
});

test("a spreadsheet gets tabs, the person's decimal mark, and 3/2 as a number, not a day", () => {
  assert.equal(tableText(SHEET, "spreadsheet", ","),
    'level\tJ\tg_J [computed]\toffset (cm-1) [exact]\n2p2 3P2\t2\t1,5011596521\t-0,25\nodd, "quoted"\t1,5\t\t1e-7\n');
  assert.match(tableText(SHEET, "spreadsheet", "."), /2p2 3P2\t2\t1\.5011596521\t-0\.25/);
});

test("text is aligned, numbers to the right", () => {
  const lines = tableText(SHEET, "text").split("\n");
  assert.equal(lines[0], "Levels of 2p2");
  assert.equal(lines[1].indexOf("offset"), lines[1].length - "offset (cm-1) [exact]".length);
  assert.equal(lines[2].length, lines[3].length);
});

test("LaTeX typesets terms, numbers and units", () => {
  const text = tableText(SHEET, "latex");
  assert.match(text, /\\begin\{tabular\}\{lrrr\}/);
  assert.ok(text.includes("level & J & $g_J$ [computed] & offset (cm$^{-1}$) [exact] \\\\"));
  assert.ok(text.includes("2p$^{2}$ ${}^{3}\\mathrm{P}_{2}$ & 2 & $1.5011596521$ & $-0.25$ \\\\"));
  assert.ok(text.includes("-- & $1\\times 10^{-7}$ \\\\"));
});

test("heads and file names", () => {
  assert.equal(headText({ name: "S", unit: "e2a02", kind: "exact" }), "S (e2a02) [exact]");
  assert.equal(fileName("terms 3d6 4s2", "csv"), "terms-3d6-4s2.csv");
  assert.equal(fileName("///", "svg"), "rungline.svg");
});

test("a lone half-integer is a number to a spreadsheet in every column, and a fraction to LaTeX", () => {
  const sheet = { caption: "c", columns: [{ name: "J", type: "text" }, { name: "M", type: "half" }], rows: [[{ text: "1/2" }, { text: "-3/2" }], [{ text: "1/2, 3/2" }, { text: "-1" }]] };
  assert.equal(tableText(sheet, "spreadsheet", "."), "J\tM\n0.5\t-1.5\n1/2, 3/2\t-1\n");
  const latex = tableText(sheet, "latex");
  assert.ok(latex.includes("$\\tfrac{1}{2}$ & $-\\tfrac{3}{2}$ \\\\"), latex);
  assert.ok(latex.includes("$\\tfrac{1}{2}$, $\\tfrac{3}{2}$ & $-1$ \\\\"), latex);
});

test("polarisations are set in LaTeX's own letters", () => {
  assert.deepEqual(["pi", "sigma+", "sigma-"].map((name) => richLatex([{ sign: SIGNS[name] }])), ["$\\pi$", "$\\sigma^+$", "$\\sigma^-$"]);
  assert.equal(latexText("3p 2P3/2 – σ⁻"), "3p 2P3/2 -- $\\sigma$$^{-}$");
});
