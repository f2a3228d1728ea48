// A part of the evidence that is closed to one line until somebody opens it, and made only then.

import { element } from "../dom.js";

// Without the page's own memory a fold is remembered until the page closes.
const memory = new Map();

/** `make` builds what is inside, once, when it is first opened. */
export function fold(context, key, title, make) {
  const view = context.view ?? memory;
  const body = element("div", { class: "fold-body" });
  const node = element("details", { class: "fold part" }, element("summary", {}, ...title), body);
  const fill = () => {
    if (node.open && body.childNodes.length === 0) body.append(...[make()].flat().filter(Boolean));
  };
  node.open = view.get(key) ?? false;
  fill();
  node.addEventListener("toggle", () => {
    view.set(key, node.open);
    fill();
  });
  return node;
}

/** A choice among words, remembered like a fold: {node, value(), words()}. */
export function select(context, key, label, options, act, initially = null) {
  const view = context.view ?? memory;
  const kept = view.get(key) ?? initially;
  const box = element("select", { "aria-label": label }, ...options.map(([value, text]) => element("option", { value, text })));
  if (options.some(([value]) => value === kept)) box.value = kept;
  box.addEventListener("change", () => {
    view.set(key, box.value);
    act(box.value);
  });
  return { node: element("label", { class: "choose" }, element("span", { text: label }), box), value: () => box.value, words: () => box.selectedOptions[0]?.textContent ?? "" };
}

/** A yes-or-no choice, remembered: {node, value()}. */
export function check(context, key, label, act, initially = false) {
  const view = context.view ?? memory;
  const box = element("input", { type: "checkbox" });
  box.checked = view.get(key) ?? initially;
  box.addEventListener("change", () => {
    view.set(key, box.checked);
    act(box.checked);
  });
  return { node: element("label", { class: "check" }, box, element("span", { text: label })), value: () => box.checked };
}

/** What a hint says to a finger, or to a mouse and keys. */
export function pointerWords(touch, mouse) {
  return window.matchMedia("(pointer: coarse)").matches ? touch : mouse;
}
