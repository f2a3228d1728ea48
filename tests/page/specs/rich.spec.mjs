// Terms, configurations and numbers: what is seen, what is said, what is copied. Multiplicity names
// and the reading of J are the trade's (common practice, no source).

import assert from "node:assert/strict";
import { test } from "node:test";
import { describe, richLatex, richPlain, richRuns, richSpeech } from "../../../www/js/rich.js";

// [multiplicity, letter, J, odd, index, said]
const TERMS = [
  [1, "S", "0", false, null, "singlet S 0"],
  [3, "P", "2", false, null, "triplet P 2"],
  [3, "P", "1", true, null, "triplet P 1, odd"],
  [2, "P", "3/2", true, null, "doublet P three halves, odd"],
  [2, "P", "1/2", true, null, "doublet P one half, odd"],
  [2, "S", "1/2", false, null, "doublet S one half"],
  [4, "S", "3/2", true, null, "quartet S three halves, odd"],
  [5, "D", "4", false, null, "quintet D 4"],
  [6, "S", "5/2", false, null, "sextet S five halves"],
  [7, "S", "3", false, null, "septet S 3"],
  [8, "S", "7/2", true, null, "octet S seven halves, odd"],
  [9, "F", "9", false, null, "nonet F 9"],
  [10, "D", "13/2", false, null, "decet D thirteen halves"],
  [11, "G", "6", true, null, "multiplicity 11 G 6, odd"],
  [12, "H", "21/2", false, null, "multiplicity 12 H twenty-one halves"],
  [2, "D", "5/2", false, 2, "doublet D five halves, number 2"],
  [2, "D", null, false, 1, "doublet D, number 1"],
  [4, "D", "1/2", true, 3, "quartet D one half, odd, number 3"],
  [2, "F", "5/2", true, 10, "doublet F five halves, odd, number 10"],
  [3, "F", null, false, null, "triplet F"],
  [3, "F", null, true, null, "triplet F, odd"],
  [4, "I", "15/2", true, null, "quartet I fifteen halves, odd"],
  [6, "H", "15/2", true, null, "sextet H fifteen halves, odd"],
  [1, "[21]", "21", false, null, "singlet L 21 21"],
  [2, "[22]", "43/2", false, null, "doublet L 22 forty-three halves"],
  [2, "K", "17/2", true, null, "doublet K seventeen halves, odd"],
  [2, "Q", "31/2", true, null, "doublet Q thirty-one halves, odd"],
  [2, "L", "30", false, null, "doublet L 30"],
  [4, "M", "20/2", false, null, "quartet M twenty halves"],
  [2, "N", "101/2", false, null, "doublet N 101 halves"],
];

/** What the eye reads from left to right. */
const seen = (runs) => runs.map((run) => run.text ?? [run.up, run.down].filter(Boolean).join("/")).join("|");

test("thirty terms are said as the trade says them, and seen with every part", () => {
  for (const [multiplicity, letter, J, odd, index, said] of TERMS) {
    const rich = [{ term: { multiplicity, letter, J, odd, index } }];
    assert.equal(richSpeech(rich), said);
    assert.equal(richPlain(rich), `${multiplicity}${letter}${J ?? ""}${index === null ? "" : ` #${index}`}`);
    const runs = richRuns(rich);
    assert.equal(runs[0].up, String(multiplicity));
    assert.equal(runs[1].text, letter);
    assert.equal(runs.some((run) => run.up === "o"), odd);
    assert.equal(runs.some((run) => run.down === J), J !== null);
    if (odd && J !== null) assert.deepEqual(runs[2], { up: "o", down: J });
  }
});

const OTHERS = [
  [{ configuration: { core: null, subshells: [{ label: "3d", electrons: 6 }] } }, "3 d 6", "3d6", "3d|6"],
  [{ configuration: { core: "Ar", subshells: [{ label: "3d", electrons: 6 }, { label: "4s", electrons: 2 }] } }, "Ar core, 3 d 6, 4 s 2", "[Ar] 3d6 4s2", "[Ar] |3d|6| 4s|2"],
  [{ configuration: { core: null, subshells: [{ label: "3p", electrons: 1 }] } }, "3 p", "3p", "3p"],
  [{ configuration: { core: "Xe", subshells: [{ label: "4f", electrons: 14 }, { label: "5d", electrons: 1 }] } }, "Xe core, 4 f 14, 5 d", "[Xe] 4f14 5d", "[Xe] |4f|14| 5d"],
  [{ configuration: { core: "He", subshells: [] } }, "He core", "[He]", "[He]"],
  [{ configuration: { core: null, subshells: [{ label: "30[21]", electrons: 2 }] } }, "30 21 2", "30[21]2", "30[21]|2"],
  [{ species: { symbol: "Fe", charge: 0, stage: "I", mass_number: null } }, "Fe 1", "Fe I", "Fe\u00a0I"],
  [{ species: { symbol: "Fe", charge: 1, stage: "II", mass_number: 57 } }, "57 Fe 2", "57Fe II", "57|Fe\u00a0II"],
  [{ species: { symbol: "W", charge: 43, stage: "XLIV", mass_number: null } }, "W 44", "W XLIV", "W\u00a0XLIV"],
  [{ species: { symbol: "*", charge: 0, stage: "", mass_number: null } }, "any atom", "*", "any atom"],
  [{ jj: { subshells: [{ label: "3d", j: "3/2", electrons: 4 }], J: null } }, "3 d three halves times 4", "3d(3/2)4", "3d|4/3/2"],
  [{ jj: { subshells: [{ label: "3d", j: "3/2", electrons: 4 }, { label: "3d", j: "5/2", electrons: 2 }], J: "4" } },
    "3 d three halves times 4, 3 d five halves times 2, J 4", "3d(3/2)4 3d(5/2)2 J=4", "(|3d|4/3/2| 3d|2/5/2|)|4"],
  [{ jj: { subshells: [{ label: "6p", j: "1/2", electrons: 1 }], J: "1/2" } }, "6 p one half, J one half", "6p(1/2) J=1/2", "(|6p|1/2|)|1/2"],
  [{ pair: { parent: [{ term: { multiplicity: 2, letter: "P", odd: true, J: "3/2", index: null } }], multiplicity: 2, K: "3/2", odd: true, J: "2" } },
    "parent doublet P three halves, odd, doublet K three halves, J 2, odd", "(2P3/2) 2[3/2]2", "(|2|P|o/3/2|)\u00a0|2|[3/2]|o/2"],
  [{ pair: { parent: [], multiplicity: 2, K: "1/2", odd: false, J: null } }, "doublet K one half", "2[1/2]", "2|[1/2]"],
  [{ number: { text: "1.5", unit: "cm-1", kind: "exact" } }, "1.5 inverse centimetres exact", "1.5 cm-1 exact", "1.5|\u00a0|cm|\u22121|\u00a0exact"],
  [{ number: { text: "-0.25", unit: "T", kind: "entered" } }, "minus 0.25 tesla entered", "-0.25 T entered", "\u22120.25|\u00a0|T|\u00a0entered"],
  [{ number: { text: "4.898979485566356", unit: "mu_B", kind: "computed" } }, "4.89898 Bohr magnetons computed", "4.898979485566356 mu_B computed", "4.89898|\u00a0|μ|B|\u00a0computed"],
  [{ number: { text: "589.592", unit: "nm", kind: "measured" } }, "589.592 nanometres measured", "589.592 nm measured", "589.592|\u00a0|nm|\u00a0measured"],
  [{ number: { text: "13.99624493", unit: "GHz", kind: null } }, "13.9962 gigahertz", "13.99624493 GHz", "13.9962|\u00a0|GHz"],
  [{ number: { text: "0", unit: null, kind: null } }, "0", "0", "0"],
  [{ number: { text: "3432", unit: null, kind: "exact" } }, "3432 exact", "3432 exact", "3432|\u00a0exact"],
  [{ number: { text: "0.000012345678", unit: null, kind: null } }, "1.23457\u00a0×\u00a010^minus 5", "0.000012345678", "1.23457\u00a0×\u00a010|\u22125"],
  [{ number: { text: "2.0", unit: "pm", kind: "fitted" } }, "2.0 picometres fitted", "2.0 pm fitted", "2.0|\u00a0|pm|\u00a0fitted"],
  [{ number: { text: "7.5", unit: "furlong", kind: null } }, "7.5 furlong", "7.5 furlong", "7.5|\u00a0|furlong"],
  ["plain words", "plain words", "plain words", "plain words"],
  [{ sign: { runs: [{ text: "σ" }, { up: "+" }], plain: "σ⁺", speech: "sigma plus" } }, "sigma plus", "σ⁺", "σ|+"],
  [{ configuration: { core: null, subshells: [{ label: "1s", electrons: 2 }, { label: "2p", electrons: 3 }] } }, "1 s 2, 2 p 3", "1s2 2p3", "1s|2| 2p|3"],
  [{ species: { symbol: "U", charge: 2, stage: "III", mass_number: 238 } }, "238 U 3", "238U III", "238|U\u00a0III"],
  [{ number: { text: "1e-30", unit: null, kind: null } }, "1.00000\u00a0×\u00a010^minus 30", "1e-30", "1.00000\u00a0×\u00a010|\u221230"],
];

test("thirty configurations, species, couplings and numbers at six shown digits", () => {
  for (const [item, said, plain, eye] of OTHERS) {
    assert.equal(richSpeech([item], { digits: 6 }), said);
    assert.equal(richPlain([item]), plain);
    assert.equal(seen(richRuns([item], { digits: 6 })), eye);
  }
});

test("speech and copy come from the same description, for a list as for its parts", () => {
  const all = [...TERMS.map(([multiplicity, letter, J, odd, index]) => ({ term: { multiplicity, letter, J, odd, index } })), ...OTHERS.map(([item]) => item)];
  assert.equal(all.length, 60);
  assert.equal(richSpeech(all), all.map((item) => describe(item).speech).join(""));
  assert.equal(richPlain(all), all.map((item) => describe(item).plain).join(""));
});

test("nothing and a bare string are rich text too", () => {
  assert.equal(richPlain(null), "");
  assert.equal(richPlain("text"), "text");
  assert.deepEqual(richRuns([]), []);
});

test("LaTeX of a term, a configuration and a number", () => {
  assert.equal(richLatex([{ term: { multiplicity: 2, letter: "P", J: "3/2", odd: true, index: null } }]), "${}^{2}\\mathrm{P}^{\\mathrm{o}}_{3/2}$");
  assert.equal(richLatex([{ configuration: { core: "Ar", subshells: [{ label: "3d", electrons: 6 }] } }]), "[Ar]~3d$^{6}$");
  assert.equal(richLatex([{ number: { text: "-1.5e-7", unit: "cm-1", kind: "computed" } }]), "$-1.5\\times 10^{-7}$~cm$^{-1}$~computed");
  assert.equal(richLatex("50 % & more_"), "50 \\% \\& more\\_");
});
