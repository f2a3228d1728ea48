// What was entered, for paper: fields are not printed.

import { element } from "./dom.js";

/** A list of every field that says something, by label; `fill` brings it in line with the sheet. */
export function enteredList(store) {
  const node = element("dl", { class: "entered", hidden: true });
  const fill = () => {
    const boxes = [...document.querySelectorAll("#main [data-path]")].filter(({ dataset }) => store.text(dataset.path) !== "" && !/^\/(title|note)$/.test(dataset.path));
    node.replaceChildren(...boxes.map((box) => element("div", {},
      element("dt", { text: box.labels[0].textContent }),
      element("dd", { text: box.type === "checkbox" ? (box.checked ? "yes" : "no") : box.selectedOptions?.[0].textContent ?? box.value }))));
  };
  // The media change comes to paper and to a preview of it alike.
  window.addEventListener("beforeprint", fill);
  window.matchMedia("print").addEventListener("change", ({ matches }) => {
    if (matches) fill();
  });
  return node;
}
