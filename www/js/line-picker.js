// A line taken from the answer to Which lines? into the fields of How does it split?

import { element, freshId, setText } from "./dom.js";
import { MEDIA, mediumOf } from "./views/line-units.js";

/** Lines in the list; a longer one is no help to anybody. */
const LISTED = 500;
const MANY = 20_000;
/** Strongest first. */
const MULTIPOLES = ["E1", "M1", "E2"];

/**
 * A line picked from the answer to "Which lines?" fills both levels at once. Each pair of levels
 * stands there once, by its strongest multipole: the field splits the levels, not the multipole.
 */
export function linePicker(questions, put, { choice, store }) {
  const id = freshId("pick-line");
  const box = element("select", { id, "aria-describedby": `${id}-note` });
  const note = element("span", { class: "hint", id: `${id}-note` });
  const chosenNote = element("p", { class: "note line-choice", role: "status" });
  const node = element("div", { class: "field line-picker", hidden: true },
    element("label", { for: id, text: "Take a line from the list" }), note, box, chosenNote);
  let shown = null;
  let pairs = [];
  const fill = () => {
    const lines = questions.entries.get("lines")?.answer?.lines ?? [];
    if (lines === shown) return;
    shown = lines;
    const medium = mediumOf(store);
    // Nobody picks a forbidden line from tens of thousands in a list.
    pairs = linePairs(lines.length > MANY ? lines.filter(({ multipole }) => multipole === MULTIPOLES[0]) : lines);
    node.hidden = pairs.length === 0;
    note.textContent = pairs.length > LISTED ? `The first ${LISTED} of ${pairs.length}; type the levels for the others.` : "";
    box.replaceChildren(element("option", { value: "", text: "Choose …" }), ...pairs.slice(0, LISTED).map((line, index) => element("option", {
      value: String(index), text: `${line.lower} – ${line.upper} (${line.multipole})${wavelength(line, medium)}`,
    })));
  };
  const mark = () => {
    const { upper, lower } = store.sheet.line ?? {};
    const own = choice.get()?.startsWith(`line:${lower}/${upper}/`) === true;
    node.classList.toggle("is-chosen", own);
    setText(chosenNote, own ? "▸ This is the line chosen under “Which lines?”." : "");
  };
  box.addEventListener("change", () => {
    const line = pairs[Number(box.value)];
    if (box.value === "" || line === undefined) return;
    put("/line", { upper: line.upper, lower: line.lower }, `Take the line ${line.lower} – ${line.upper}`);
    box.value = "";
  });
  questions.subscribe((what) => {
    if (what === "lines") fill();
  });
  choice.subscribe(mark);
  store.subscribe(mark);
  return node;
}

// As the list of lines tells it.
function wavelength(line, medium) {
  const { key, words } = MEDIA[typeof line[MEDIA[medium].key] === "number" ? medium : "vacuum"];
  return typeof line[key] === "number" ? `, ${line[key].toFixed(3)} nm ${words}` : "";
}

/** Each pair of levels once, by its strongest multipole; pairs with an E1 line first. */
export function linePairs(lines) {
  const pairs = new Map();
  const rank = ({ multipole }) => (MULTIPOLES.includes(multipole) ? MULTIPOLES.indexOf(multipole) : MULTIPOLES.length);
  for (const line of lines) {
    const key = `${line.lower}\n${line.upper}`;
    const other = pairs.get(key);
    if (other === undefined || rank(line) < rank(other)) pairs.set(key, line);
  }
  return [...pairs.values()].sort((a, b) => rank(a) - rank(b));
}
