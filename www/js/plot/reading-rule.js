// The vertical reading rule of a map: a line with a handle that is dragged along the axis. Keys move it
// through the picture it lies on, which has the one tab stop.

import { element } from "../dom.js";

/** `act`: {value(x), move(value), release()}; the node lies over a stage, `place` puts it there. */
export class ReadingRule {
  #act;
  #label = element("span", { class: "rule-label" });

  constructor(act) {
    this.#act = act;
    this.node = element("div", { class: "reading-rule", "aria-hidden": "true" }, this.#label);
    this.node.addEventListener("pointerdown", (event) => this.#take(event));
    this.node.addEventListener("pointermove", (event) => {
      if (this.node.hasPointerCapture(event.pointerId)) this.#act.move(this.#act.value(this.#at(event)));
    });
    for (const end of ["pointerup", "pointercancel"]) {
      this.node.addEventListener(end, (event) => {
        if (!this.node.hasPointerCapture(event.pointerId)) return;
        this.node.releasePointerCapture(event.pointerId);
        this.node.classList.remove("held");
        event.stopPropagation();
        this.#act.release();
      });
    }
  }

  #take(event) {
    if (event.button !== 0) return;
    // The stage would take it for the beginning of a band.
    event.stopPropagation();
    event.preventDefault();
    this.node.setPointerCapture(event.pointerId);
    this.node.classList.add("held");
  }

  #at(event) {
    const stage = this.node.parentElement;
    return event.clientX - stage.getBoundingClientRect().left + stage.scrollLeft;
  }

  /** At `x` from `top` to `bottom`, or away where x is null. */
  place(x, top, bottom, text, right) {
    this.node.hidden = x === null;
    if (x === null) return;
    this.node.style.transform = `translateX(${Math.round(x * 10) / 10}px)`;
    this.node.style.top = `${top}px`;
    this.node.style.height = `${bottom - top}px`;
    this.node.classList.toggle("leans", right);
    if (this.#label.textContent !== text) this.#label.textContent = text;
  }
}
