// How the names of the trade are said aloud.

const MULTIPLICITIES = [null, "singlet", "doublet", "triplet", "quartet", "quintet", "sextet", "septet", "octet", "nonet", "decet"];
const MU_B = { runs: [{ text: "μ" }, { down: "B" }], speech: "Bohr magnetons", latex: "$\\mu_\\mathrm{B}$" };
const ONES = ["zero", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve", "thirteen",
  "fourteen", "fifteen", "sixteen", "seventeen", "eighteen", "nineteen"];
const TENS = [null, null, "twenty", "thirty", "forty", "fifty", "sixty", "seventy", "eighty", "ninety"];
const ROMAN = { I: 1, V: 5, X: 10, L: 50, C: 100 };

/** "triplet" for 3; "multiplicity 12" above decet. */
export function spokenMultiplicity(multiplicity) {
  return MULTIPLICITIES[multiplicity] ?? `multiplicity ${multiplicity}`;
}

/** "three halves" for "3/2", "minus one half" for "-1/2", "2" for "2". */
export function spokenHalf(text) {
  const match = /^([-+\u2212]?)(\d+)\/2$/.exec(text);
  const sign = /^[-\u2212]/.test(text) ? "minus " : "";
  if (match === null) return sign + text.replace(/^[-+\u2212]/, "");
  const numerator = Number(match[2]);
  return `${sign}${cardinal(numerator)} ${numerator === 1 ? "half" : "halves"}`;
}

/** The letter of a total L, or "L 21" for `[21]`. */
export function spokenLetter(letter) {
  const match = /^\[(\d+)\]$/.exec(letter);
  return match === null ? letter : `L ${match[1]}`;
}

/** "3 d 6" for a subshell; one electron is not counted aloud. */
export function spokenSubshell(label, electrons) {
  const match = /^(\d+)(.*)$/.exec(label);
  const orbital = match === null ? label : `${match[1]} ${match[2].replace(/[[\]]/g, "")}`;
  return electrons === 1 ? orbital : `${orbital} ${electrons}`;
}

/** The stage of ionisation as a number: 2 for "II". */
export function stageNumber(stage) {
  let total = 0;
  for (let i = 0; i < stage.length; i += 1) {
    const value = ROMAN[stage[i]] ?? 0;
    total += value < (ROMAN[stage[i + 1]] ?? 0) ? -value : value;
  }
  return total;
}

function cardinal(number) {
  if (number < 20) return ONES[number];
  if (number > 99) return String(number);
  const ones = number % 10;
  return ones === 0 ? TENS[Math.floor(number / 10)] : `${TENS[Math.floor(number / 10)]}-${ONES[ones]}`;
}

const bohr = (power, speech) => ({ runs: [{ text: "a" }, { up: power.replace("-", "\u2212"), down: "0" }], speech, latex: `$a_0^{${power}}$` });

/** Units: how each is set (runs, see rich.js) and said. */
export const UNITS = {
  "cm-1": { runs: [{ text: "cm" }, { up: "\u22121" }], speech: "inverse centimetres", latex: "cm$^{-1}$" },
  GHz: { runs: [{ text: "GHz" }], speech: "gigahertz" },
  MHz: { runs: [{ text: "MHz" }], speech: "megahertz" },
  nm: { runs: [{ text: "nm" }], speech: "nanometres" },
  pm: { runs: [{ text: "pm" }], speech: "picometres" },
  T: { runs: [{ text: "T" }], speech: "tesla" },
  mu_B: MU_B,
  "μ_B": MU_B,
  "mu_B B": { runs: [{ text: "μ" }, { down: "B" }, { text: "\u00a0B" }], speech: "Bohr magnetons times B", latex: "$\\mu_\\mathrm{B} B$" },
  hartree: { runs: [{ text: "hartree" }], speech: "hartree" },
  a0: { runs: [{ text: "a" }, { down: "0" }], speech: "Bohr radii", latex: "$a_0$" },
  "a0^2": bohr("2", "Bohr radii squared"),
  "a0^3": bohr("3", "Bohr radii cubed"),
  "a0^-1": bohr("-1", "inverse Bohr radii"),
  "a0^-2": bohr("-2", "inverse Bohr radii squared"),
  "a0^-3": bohr("-3", "inverse Bohr radii cubed"),
  "s-1": { runs: [{ text: "s" }, { up: "\u22121" }], speech: "per second", latex: "s$^{-1}$" },
  "cm-1 T-1": { runs: [{ text: "cm" }, { up: "\u22121" }, { text: "/T" }], speech: "inverse centimetres per tesla", latex: "cm$^{-1}$\\,T$^{-1}$" },
  "MHz/mT": { runs: [{ text: "MHz/mT" }], speech: "megahertz per millitesla" },
  s: { runs: [{ text: "s" }], speech: "seconds" },
  "Å": { runs: [{ text: "Å" }], speech: "ångström", latex: "\\AA{}" },
  eV: { runs: [{ text: "eV" }], speech: "electron volts" },
  THz: { runs: [{ text: "THz" }], speech: "terahertz" },
  "m-3": { runs: [{ text: "m" }, { up: "\u22123" }], speech: "per cubic metre", latex: "m$^{-3}$" },
  K: { runs: [{ text: "K" }], speech: "kelvins" },
  "°": { runs: [{ text: "°" }], speech: "degrees", latex: "$^\\circ$" },
  "%": { runs: [{ text: "%" }], speech: "per cent", latex: "\\%" },
};

/** The unit's entry; an unknown unit is set and said as it is spelled. */
export function unitOf(unit) {
  return UNITS[unit] ?? { runs: [{ text: unit }], speech: unit };
}
