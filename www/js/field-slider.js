// The slider beside the typed field: from no field to the end of the map.

import { element, freshId } from "./dom.js";
import { STEPS } from "./field-sweep.js";

/** The slider; away while there is no field to begin with. */
export function fieldSlider(sweep) {
  const id = freshId("slider");
  const hint = element("span", { class: "hint" });
  const box = element("input", { id, type: "range", min: 0, max: STEPS, step: 1 });
  const node = element("div", { class: "field slider", hidden: true }, element("label", { for: id, text: "Move the field" }), hint, box);
  let held = false;
  const show = () => {
    node.hidden = !(sweep.end > 0);
    if (node.hidden) return;
    const words = `0 to ${sweep.textOf(sweep.end)}`;
    if (hint.textContent !== words) hint.textContent = words;
    const value = String(Math.round((sweep.place / sweep.end) * STEPS));
    if (box.value !== value) box.value = value;
    const text = `${sweep.at === null ? "" : "about "}${sweep.textOf(sweep.place)}`;
    if (box.getAttribute("aria-valuetext") !== text) box.setAttribute("aria-valuetext", text);
  };
  box.addEventListener("pointerdown", () => { held = true; });
  box.addEventListener("input", () => sweep.move((Number(box.value) / STEPS) * sweep.end, held));
  const release = () => {
    if (!held) return;
    held = false;
    sweep.release();
  };
  for (const end of ["pointerup", "pointercancel", "change"]) box.addEventListener(end, release);
  sweep.subscribe(show);
  return node;
}
