// Formulas: the core's trees as MathML. System fonts stretch brackets badly, so only the brackets
// around an array of angular momenta may stretch.

import { element } from "./dom.js";
import { mathElement } from "./markup.js";
import { ALL_DIGITS, numberRuns } from "./digits.js";

const BRACKETS = { round: ["(", ")"], curly: ["{", "}"] };
// A long formula may break before these.
const BREAKS_BEFORE = /^[-=+\u2212≈≤≥→]$/;

/**
 * A formula {tree, plain} in a box of its own that scrolls, never the page. It stands in pieces, one
 * for each top-level relation or sum, because browsers break lines between formulas only.
 */
export function formulaNode({ tree, plain }, settings = {}) {
  const digits = settings.digits ?? ALL_DIGITS;
  const pieces = pieceTrees(tree).map((piece) => mathElement("math", {}, mathTree(piece, digits)));
  return element("div", { class: "formula", tabindex: "0", role: "group", "aria-label": `Formula: ${plain}`, "data-plain": plain },
    ...pieces.flatMap((piece, i) => (i === 0 ? [piece] : [" ", piece])));
}

/** The tree cut before each = + − that stands in no bracket. */
function pieceTrees(tree) {
  if (!Array.isArray(tree) || tree[0] !== "row") return [tree];
  const pieces = [["row"]];
  let depth = 0;
  for (const part of tree.slice(1)) {
    const sign = part[0] === "o" ? part[1] : "";
    if (depth === 0 && BREAKS_BEFORE.test(sign) && pieces.at(-1).length > 1) pieces.push(["row"]);
    depth += (/^[([{]$/.test(sign) ? 1 : 0) - (/^[)\]}]$/.test(sign) ? 1 : 0);
    pieces.at(-1).push(part);
  }
  return pieces;
}

/** The MathML of one tree, its numbers at the shown digits. */
export function mathTree(tree, digits = ALL_DIGITS) {
  if (typeof tree === "string") return mathElement("mtext", {}, tree);
  const [form, ...parts] = tree;
  const inner = () => parts.map((part) => mathTree(part, digits));
  switch (form) {
    case "row": return mathElement("mrow", {}, ...inner());
    case "i": return identifier(parts[0]);
    case "n": return number(parts[0], digits);
    case "o": return operator(parts[0]);
    case "t": return mathElement("mtext", {}, parts[0]);
    case "sub": return mathElement("msub", {}, ...inner());
    case "sup": return mathElement("msup", {}, ...inner());
    case "subsup": return mathElement("msubsup", {}, ...inner());
    case "frac": return mathElement("mfrac", {}, ...inner());
    case "sqrt": return mathElement("msqrt", {}, ...inner());
    case "paren": return mathElement("mrow", {}, operator("("), ...inner(), operator(")"));
    case "term": return term(parts[0]);
    case "table": return array(parts[0], parts[1], digits);
    default: throw new RangeError(`A formula has no form "${form}".`);
  }
}

// What only looks like a number, such as −3/2 or −M, stays as it is, with a true minus.
function number(text, digits) {
  const ascii = String(text).replace("\u2212", "-");
  const runs = Number.isFinite(Number(ascii)) ? numberRuns(ascii, digits) : [{ text: ascii.replaceAll("-", "\u2212") }];
  const [base, power] = runs.map((run) => mathElement("mn", {}, run.text ?? run.up));
  return power === undefined ? base : mathElement("msup", {}, base, power);
}

// Single letters are slanted by the browser; words and upright Greek stay upright.
function identifier(text) {
  return mathElement("mi", text.length > 1 ? { mathvariant: "normal" } : {}, text);
}

function operator(text) {
  const bracket = /^[()[\]{}|⟨⟩]$/.test(text);
  return mathElement("mo", bracket ? { stretchy: "false" } : {}, text === "-" ? "\u2212" : text);
}

function term({ multiplicity, letter, odd = false, J = null, index = null }) {
  const none = () => mathElement("mrow");
  const symbol = mathElement("mmultiscripts", {},
    mathElement("mi", { mathvariant: "normal" }, letter),
    J === null ? none() : mathElement("mn", {}, J),
    odd ? mathElement("mi", { mathvariant: "normal" }, "o") : none(),
    mathElement("mprescripts"), none(), mathElement("mn", {}, String(multiplicity)));
  return index === null ? symbol : mathElement("mrow", {}, symbol, mathElement("mtext", {}, `\u00a0#${index}`));
}

function array(shape, rows, digits) {
  const [open, close] = BRACKETS[shape] ?? BRACKETS.round;
  return mathElement("mrow", {},
    mathElement("mo", { stretchy: "true" }, open),
    mathElement("mtable", {}, ...rows.map((row) => mathElement("mtr", {}, ...row.map((cell) => mathElement("mtd", {}, mathTree(cell, digits)))))),
    mathElement("mo", { stretchy: "true" }, close));
}
