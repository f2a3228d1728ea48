// How does it split? What hangs from the rung: one evidence that outlives the answers, and their working.

import { SplittingEvidence } from "./splitting-evidence.js";
import { workingNode } from "./working.js";

// The map and its rule stay on the page while answers come and go: one evidence for each page.
const made = new WeakMap();

/** Evidence and working of an answer to "splitting". */
export function render(answer, context) {
  if (!made.has(context.store)) made.set(context.store, new SplittingEvidence({ ...context, choice: context.lastingChoice }));
  const evidence = made.get(context.store);
  evidence.update(answer, context);
  return { evidence: evidence.node, working: workingNode(answer, context.settings) };
}
