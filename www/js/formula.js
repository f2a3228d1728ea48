// Formulas: the core's trees as MathML. System fonts stretch brackets badly, so only the brackets
// around an array of angular momenta may stretch.

import { element } from "./dom.js";
import { mathElement } from "./markup.js";
import { trueMinus } from "./digits.js";

const BRACKETS = { round: ["(", ")"], curly: ["{", "}"] };
// A long formula may break before these.
const BREAKS_BEFORE = /^[-=+\u2212≈≤≥→]$/;

/**
 * A formula {tree, plain} in a box of its own that scrolls, never the page. It stands in pieces, one
 * for each top-level relation or sum, because browsers break lines between formulas only.
 */
export function formulaNode({ tree, plain }) {
  const pieces = pieceTrees(tree).map((piece) => mathElement("math", {}, mathTree(piece)));
  return element("div", { class: "formula", tabindex: "0", role: "group", "aria-label": `Formula: ${plain}`, "data-plain": plain },
    ...pieces.flatMap((piece, i) => (i === 0 ? [piece] : [" ", piece])));
}

/** The tree cut before each top-level = + −. */
function pieceTrees(tree) {
  if (!Array.isArray(tree) || tree[0] !== "row") return [tree];
  const pieces = [["row"]];
  for (const part of tree.slice(1)) {
    if (part[0] === "o" && BREAKS_BEFORE.test(part[1]) && pieces.at(-1).length > 1) pieces.push(["row"]);
    pieces.at(-1).push(part);
  }
  return pieces;
}

/** The MathML of one tree. */
export function mathTree(tree) {
  if (typeof tree === "string") return mathElement("mtext", {}, tree);
  const [form, ...parts] = tree;
  switch (form) {
    case "row": return mathElement("mrow", {}, ...parts.map(mathTree));
    case "i": return identifier(parts[0]);
    case "n": return mathElement("mn", {}, trueMinus(String(parts[0])));
    case "o": return operator(parts[0]);
    case "t": return mathElement("mtext", {}, parts[0]);
    case "sub": return mathElement("msub", {}, ...parts.map(mathTree));
    case "sup": return mathElement("msup", {}, ...parts.map(mathTree));
    case "subsup": return mathElement("msubsup", {}, ...parts.map(mathTree));
    case "frac": return mathElement("mfrac", {}, ...parts.map(mathTree));
    case "sqrt": return mathElement("msqrt", {}, ...parts.map(mathTree));
    case "paren": return mathElement("mrow", {}, operator("("), ...parts.map(mathTree), operator(")"));
    case "term": return term(parts[0]);
    case "table": return array(parts[0], parts[1]);
    default: throw new RangeError(`A formula has no form "${form}".`);
  }
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

function array(shape, rows) {
  const [open, close] = BRACKETS[shape] ?? BRACKETS.round;
  return mathElement("mrow", {},
    mathElement("mo", { stretchy: "true" }, open),
    mathElement("mtable", {}, ...rows.map((row) => mathElement("mtr", {}, ...row.map((cell) => mathElement("mtd", {}, mathTree(cell)))))),
    mathElement("mo", { stretchy: "true" }, close));
}
