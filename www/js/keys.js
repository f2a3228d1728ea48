// Every key that does something, and the keys that work everywhere on the page.

import { element } from "./dom.js";

const KEYS = [
  ["Anywhere", [
    ["Ctrl Z", "undo, in every field and beyond"],
    ["Ctrl Shift Z or Ctrl Y", "redo"],
    ["Ctrl S", "save the sheet as a file"],
    ["Ctrl O", "open a file or an example"],
    ["Esc", "stop the calculations under way; otherwise fold in the open panel"],
    ["Tab, Shift Tab", "next or previous field, button, table or picture"],
    ["Enter or Space", "press the button or fold the question in or out"],
  ]],
  ["Answer sentence", [
    ["Ctrl C", "copy the sentence when nothing is selected"],
  ]],
  ["Picture in focus", [
    ["Arrows", "from mark to mark; with Shift ten at once"],
    ["Home, End", "first or last mark"],
    ["+ − 0", "larger, smaller, whole"],
    ["Enter or Space", "choose the mark"],
    ["Esc", "leave the mark"],
  ]],
  ["Field map in focus", [
    ["Left, Right", "move the reading rule; with Shift ten times as far"],
    ["Up, Down", "over states and crossings"],
  ]],
  ["Row of a table in focus", [
    ["Up, Down, Home, End", "from row to row; first or last row"],
    ["Enter or Space", "choose the row"],
  ]],
  ["Chart of the elements in focus", [
    ["Arrows, Home, End", "from element to element"],
    ["Enter or Space", "take the element"],
  ]],
];

/** The list of all keys. */
export function keyList() {
  return element("div", { class: "keys" }, ...KEYS.map(([where, rows]) => element("section", {},
    element("h4", { text: where }),
    element("dl", {}, ...rows.flatMap(([key, what]) => [
      element("dt", {}, element("kbd", { text: key })),
      element("dd", { text: what }),
    ])))));
}

/** Listens for the keys that work everywhere; on an Apple keyboard Command stands for Ctrl. */
export function listen({ undo, redo, save, open, escape }) {
  document.addEventListener("keydown", (event) => {
    if (event.defaultPrevented || event.altKey) return;
    const key = event.key.toLowerCase();
    if (event.key === "Escape") {
      if (escape()) event.preventDefault();
      return;
    }
    if (!(event.ctrlKey || event.metaKey)) return;
    const act = { z: event.shiftKey ? redo : undo, y: redo, s: save, o: open }[key];
    if (act === undefined || (event.shiftKey && key !== "z")) return;
    event.preventDefault();
    act();
  });
}
