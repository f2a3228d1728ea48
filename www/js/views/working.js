// The working of an answer: each formula, the same formula with this case's numbers, result, source.

import { element } from "../dom.js";
import { formulaNode } from "../formula.js";
import { richNode } from "../rich.js";

/** The working as a node. */
export function workingNode(answer, settings) {
  return element("div", { class: "steps" }, ...(answer.working ?? []).map((step) => element("div", { class: "step" },
    element("h4", { text: step.title }),
    step.formula ? formulaNode(step.formula, settings) : null,
    step.numbers ? formulaNode(step.numbers, settings) : null,
    step.result ? element("p", { class: "result" }, richNode(step.result, settings)) : null,
    step.source ? element("p", { class: "note", text: `Source: ${step.source}` }) : null)));
}

/** The kind of number that an answer gives for a path such as "levels.g", or null. */
export function kindOf(answer, path) {
  return answer.kinds?.[path] ?? null;
}
