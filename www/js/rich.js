// Rich text: what the core says about configurations, terms and numbers, made visible, audible
// and copyable by one function, `describe`, so that the three cannot drift apart.
//
// A description is {runs, plain, speech, latex, kind}: `runs` is a list of
//   {text}  plain     {up}  raised     {down}  lowered     {up, down}  one above the other
// of which text nodes, SVG spans and canvas strokes are made alike.

import { element } from "./dom.js";
import { ALL_DIGITS, fullDigits, numberRuns } from "./digits.js";
import { spokenHalf, spokenLetter, spokenMultiplicity, spokenSubshell, stageNumber, unitOf } from "./spoken.js";

/** Sight, speech, copy and LaTeX of one item. */
export function describe(item, settings = {}) {
  if (typeof item === "string") return { runs: [{ text: item }], plain: item, speech: item, latex: latexText(item), kind: "text" };
  if (item.term) return describeTerm(item.term);
  if (item.configuration) return describeConfiguration(item.configuration);
  if (item.jj) return describeJj(item.jj, settings);
  if (item.pair) return describePair(item.pair, settings);
  if (item.species) return describeSpecies(item.species);
  if (item.number) return describeNumber(item.number, settings);
  // A sign of the page's own making, such as σ⁺ or M_L: the core never sends one.
  if (item.sign) return { latex: latexText(item.sign.plain), ...item.sign, kind: "sign" };
  return describe(String(item.text ?? ""));
}

/** Rich text as nodes. */
export function richNode(rich, settings = {}) {
  watchCopying();
  const fragment = document.createDocumentFragment();
  for (const item of listOf(rich)) {
    const said = describe(item, settings);
    if (said.kind === "text") fragment.append(said.plain);
    else if (said.kind === "number") fragment.append(numberNode(item.number, said));
    else {
      fragment.append(element("span", { class: said.kind, role: "img", "aria-label": said.speech, "data-plain": said.plain }, ...runNodes(said.runs)));
    }
  }
  return fragment;
}

/** Rich text in the spelling of the sheet, all digits. */
export function richPlain(rich) {
  return listOf(rich).map((item) => describe(item).plain).join("");
}

/** Rich text as it is said. */
export function richSpeech(rich, settings = {}) {
  return listOf(rich).map((item) => describe(item, settings).speech).join("");
}

/** Rich text for LaTeX, all digits. */
export function richLatex(rich) {
  return listOf(rich).map((item) => describe(item).latex).join("");
}

/** Rich text as runs, for pictures. */
export function richRuns(rich, settings = {}) {
  return listOf(rich).flatMap((item) => describe(item, settings).runs);
}

/** Runs as nodes of text. */
export function runNodes(runs) {
  return runs.map((run) => {
    if (run.text !== undefined) return document.createTextNode(run.text);
    if (run.up !== undefined && run.down !== undefined) {
      return element("span", { class: "after" }, element("sup", { text: run.up }), element("sub", { text: run.down }));
    }
    return run.up !== undefined ? element("sup", { text: run.up }) : element("sub", { text: run.down });
  });
}

/** A unit as a node that is read out in full. */
export function unitNode(unit) {
  const { runs, speech } = unitOf(unit);
  return element("span", { class: "unit", role: "img", "aria-label": speech, "data-plain": unit }, ...runNodes(runs));
}

/** What a term symbol says: ³P₂° is "triplet P 2, odd"; a repeat is spelled `2D5/2 #2`. */
function describeTerm({ multiplicity, letter, odd = false, J = null, index = null }) {
  const runs = [{ up: String(multiplicity) }, { text: letter }];
  if (odd && J !== null) runs.push({ up: "o", down: J });
  else if (odd) runs.push({ up: "o" });
  else if (J !== null) runs.push({ down: J });
  if (index !== null) runs.push({ text: `\u00a0#${index}` });
  const name = [spokenMultiplicity(multiplicity), spokenLetter(letter), J === null ? null : spokenHalf(J)].filter(Boolean).join(" ");
  return {
    runs, kind: "term",
    speech: [name, odd ? "odd" : null, index === null ? null : `number ${index}`].filter(Boolean).join(", "),
    plain: `${multiplicity}${letter}${J ?? ""}${index === null ? "" : ` #${index}`}`,
    latex: `\${}^{${multiplicity}}\\mathrm{${letter}}${odd ? "^{\\mathrm{o}}" : ""}${J === null ? "" : `_{${J}}`}$${index === null ? "" : `~\\#${index}`}`,
  };
}

function describeConfiguration({ core = null, subshells = [] }) {
  const runs = core === null ? [] : [{ text: `[${core}]${subshells.length ? " " : ""}` }];
  subshells.forEach(({ label, electrons }, i) => {
    runs.push({ text: (i > 0 ? " " : "") + label });
    if (electrons !== 1) runs.push({ up: String(electrons) });
  });
  const names = subshells.map(({ label, electrons }) => label + (electrons === 1 ? "" : electrons));
  return {
    runs, kind: "configuration",
    plain: [core === null ? null : `[${core}]`, ...names].filter(Boolean).join(" "),
    speech: [core === null ? null : `${core} core`, ...subshells.map((s) => spokenSubshell(s.label, s.electrons))].filter(Boolean).join(", "),
    latex: [core === null ? null : `[${core}]`, ...subshells.map((s) => s.label + (s.electrons === 1 ? "" : `$^{${s.electrons}}$`))].filter(Boolean).join("~"),
  };
}

function describeJj({ subshells, J = null }) {
  const many = J !== null;
  const runs = [{ text: many ? "(" : "" }];
  subshells.forEach(({ label, j, electrons }, i) => {
    runs.push({ text: (i > 0 ? " " : "") + label }, electrons === 1 ? { down: j } : { up: String(electrons), down: j });
  });
  if (many) runs.push({ text: ")" }, { down: J });
  const inner = subshells.map(({ label, j, electrons }) => `${label}(${j})${electrons === 1 ? "" : electrons}`).join(" ");
  const spoken = subshells.map(({ label, j, electrons }) => `${spokenSubshell(label, 1)} ${spokenHalf(j)}${electrons === 1 ? "" : ` times ${electrons}`}`);
  const set = subshells.map(({ label, j, electrons }) => `${label}_{${j}}${electrons === 1 ? "" : `^{${electrons}}`}`).join("\\,");
  return {
    runs: runs.filter((run) => run.text !== ""), kind: "jj",
    plain: many ? `${inner} J=${J}` : inner,
    speech: spoken.join(", ") + (many ? `, J ${spokenHalf(J)}` : ""),
    latex: many ? `$(\\mathrm{${set}})_{${J}}$` : `$\\mathrm{${set}}$`,
  };
}

// The parent is left out where it has been named before, as in "(²P₃₂) 4s ²[3/2]°".
function describePair({ parent, multiplicity, K, odd = false, J = null }, settings) {
  const named = parent !== null && parent.length > 0;
  const after = odd && J !== null ? [{ up: "o", down: J }] : odd ? [{ up: "o" }] : J !== null ? [{ down: J }] : [];
  const own = `${spokenMultiplicity(multiplicity)} K ${spokenHalf(K)}${J === null ? "" : `, J ${spokenHalf(J)}`}${odd ? ", odd" : ""}`;
  return {
    kind: "pair",
    runs: [...(named ? [{ text: "(" }, ...richRuns(parent, settings), { text: ")\u00a0" }] : []), { up: String(multiplicity) }, { text: `[${K}]` }, ...after],
    plain: `${named ? `(${richPlain(parent)}) ` : ""}${multiplicity}[${K}]${J ?? ""}`,
    speech: named ? `parent ${richSpeech(parent, settings)}, ${own}` : own,
    latex: `${named ? `(${richLatex(parent)}) ` : ""}$^{${multiplicity}}[${K}]${odd ? "^{\\mathrm{o}}" : ""}${J === null ? "" : `_{${J}}`}$`,
  };
}

function describeSpecies({ symbol, charge = 0, stage: written = null, mass_number = null }) {
  const stage = written || null;
  // A negative ion has no spectrum number; its charge stands behind the symbol.
  const minus = charge < 0 ? `${charge === -1 ? "" : -charge}\u2212` : "";
  if (symbol === "*") return { runs: [{ text: "any atom" }], plain: "*", speech: "any atom", latex: "any atom", kind: "species" };
  const runs = mass_number === null ? [] : [{ up: String(mass_number) }];
  runs.push({ text: stage === null ? symbol : `${symbol}\u00a0${stage}` });
  if (minus) runs.push({ up: minus });
  const mass = mass_number ?? "";
  return {
    runs, kind: "species",
    plain: `${mass}${symbol}${stage === null ? minus.replace("\u2212", "-") : ` ${stage}`}`,
    speech: `${mass === "" ? "" : `${mass} `}${symbol}${minus ? ` ${charge === -1 ? "" : `${-charge} `}minus` : ""}${stage === null ? "" : ` ${stageNumber(stage)}`}`,
    latex: `${mass === "" ? "" : `$^{${mass}}$`}${symbol}${minus ? `$^{${minus.replace("\u2212", "-")}}$` : ""}${stage === null ? "" : `~\\textsc{${stage.toLowerCase()}}`}`,
  };
}

function describeNumber({ text, unit = null, kind = null }, settings) {
  const digits = numberRuns(text, settings.digits ?? ALL_DIGITS);
  const shown = digits.map((run) => run.text ?? `^${run.up}`).join("");
  const suffix = unit === null ? null : unitOf(unit);
  return {
    kind: "number", digits,
    runs: [...digits, ...(suffix ? [{ text: "\u00a0" }, ...suffix.runs] : []), ...(kind ? [{ text: `\u00a0${kind}` }] : [])],
    plain: [fullDigits(text), unit, kind].filter(Boolean).join(" "),
    speech: [shown.replace(/\u2212/g, "minus "), suffix?.speech, kind].filter(Boolean).join(" "),
    latex: [trueLatex(fullDigits(text)), suffix ? suffix.latex ?? suffix.runs[0].text : null, kind].filter(Boolean).join("~"),
  };
}

function numberNode({ unit = null, kind = null }, said) {
  const node = element("span", { class: "number", "data-plain": said.plain },
    element("span", { class: `digits${kind ? ` kind-${kind}` : ""}` }, ...runNodes(said.digits)));
  if (unit !== null) node.append("\u00a0", unitNode(unit));
  if (kind !== null) node.append(" ", element("span", { class: "kind-word", text: kind }));
  return node;
}

/** A single string is a rich text of one item. */
function listOf(rich) {
  if (rich === null || rich === undefined) return [];
  return Array.isArray(rich) ? rich : [rich];
}

// Signs of the page that plain LaTeX has no letters for.
const LATEX_SIGNS = {
  "\u2212": "$-$", "\u00a0": "~", "\u2013": "--", "\u2019": "'", "\u2026": "\\ldots{}", "\u00d7": "$\\times$", "\u00b0": "$^\\circ$",
  "π": "$\\pi$", "σ": "$\\sigma$", "μ": "$\\mu$", "Δ": "$\\Delta$", "ℓ": "$\\ell$", "\u207a": "$^{+}$", "\u207b": "$^{-}$", "≤": "$\\le$", "≥": "$\\ge$",
};

/** Text with the characters that LaTeX reads as commands made harmless; half-integers are set as fractions. */
export function latexText(text) {
  return String(text)
    .replace(/[\\{}$&#%_^~]/g, (c) => ({ "\\": "\\textbackslash{}", "^": "\\textasciicircum{}", "~": "\\textasciitilde{}" })[c] ?? `\\${c}`)
    .replace(/(?<![\p{L}\d/.])([-\u2212]?)(\d+)\/2(?![\p{L}\d/])/gu, (_, sign, halves) => `$${sign ? "-" : ""}\\tfrac{${halves}}{2}$`)
    .replace(/[\u2212\u00a0\u2013\u2019\u2026\u00d7\u00b0πσμΔℓ\u207a\u207b≤≥]/g, (sign) => LATEX_SIGNS[sign]);
}

function trueLatex(number) {
  return `$${number.replace(/e([+-]?\d+)$/, (_, exponent) => `\\times 10^{${Number(exponent)}}`)}$`;
}

let watching = false;
// Selected text is copied in the sheet's own spelling: `3P2`, not "3Po2" on three lines.
function watchCopying() {
  if (watching) return;
  watching = true;
  document.addEventListener("copy", (event) => {
    if (event.defaultPrevented || /^(INPUT|TEXTAREA)$/.test(document.activeElement?.tagName ?? "")) return;
    const selection = document.getSelection();
    if (selection === null || selection.isCollapsed || selection.rangeCount === 0) return;
    const part = selection.getRangeAt(0).cloneContents();
    const set = [...part.querySelectorAll("[data-plain]")];
    if (set.length === 0) return;
    for (const node of set) if (!node.parentElement?.closest("[data-plain]")) node.replaceChildren(node.dataset.plain);
    for (const row of part.querySelectorAll("tr, p, li, caption")) row.append("\n");
    for (const cell of part.querySelectorAll("td, th")) if (cell.nextElementSibling) cell.append("\t");
    event.clipboardData.setData("text/plain", part.textContent);
    event.preventDefault();
  });
}
