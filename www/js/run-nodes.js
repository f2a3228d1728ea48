// What a run says while it is under way, waits, was stopped or ended by itself.

import { trueMinus } from "./digits.js";
import { element } from "./dom.js";
import { duration, estimateWords } from "./questions.js";

/**
 * What a run, an estimate or a stop says, with its buttons. `kept`: a last answer is still there;
 * `act`: {stop, start, again, save}.
 */
export function runNodes(entry, kept, act) {
  const button = (text, does) => element("button", { type: "button", class: "action", text, on: { click: () => does() } });
  if (entry.run?.shown) return [element("p", { text: runWords(entry.run) }), button("Stop", act.stop)];
  if (entry.panic !== null) return [panicNode(entry.panic, act.again, act.save)];
  if (entry.waits !== null) return [element("p", { text: `This will take ${estimateWords(entry.waits)}. It starts when you say so.` }), button("Start", act.start)];
  if (entry.stopped) return [element("p", { text: kept ? "Stopped. The last answer is still here." : "Stopped." }), button("Start again", act.start)];
  return [];
}

/** What is under way: where it stands, if it tells, and how long it takes. */
export function runWords({ progress, estimate }) {
  const of = progress?.of > 1 ? `, ${progress.configuration + 1} of ${progress.of}` : "";
  const step = progress ? ` ${progress.label}${of}: ${stepWords(progress)}` : "";
  return `Calculating${step}${estimate?.seconds ? `, estimated ${duration(estimate.seconds)} in all` : ""}. The sheet can be changed meanwhile.`;
}

// Radial functions tell iteration and residual, an energy matrix how much of it is done.
function stepWords({ done, iteration, residual }) {
  return typeof done === "number" ? `${Math.round(100 * done)}\u00a0%` : `iteration ${iteration}, residual ${trueMinus(residual.toExponential(1))}`;
}

/** What is shown when a calculation ended by itself. */
export function panicNode(words, again, save) {
  return element("div", { class: "fault", role: "group", "aria-label": "The calculation stopped unexpectedly" },
    element("p", { class: "sentence", text: "The calculation stopped unexpectedly; your sheet is safe." }),
    element("div", { class: "ways" },
      element("button", { type: "button", class: "way", text: "Try again", on: { click: again } }),
      element("button", { type: "button", class: "way", text: "Save the sheet for a report", on: { click: save } })),
    element("details", { class: "fold" }, element("summary", { text: "What the program said" }), element("pre", { class: "key", tabindex: "0", text: words.slice(0, 4000) })));
}
