// The four layers of one answer: sentence, evidence, working, limits.

import { scopedChoice } from "./choice.js";
import { element } from "./dom.js";
import { richNode, richPlain, richSpeech } from "./rich.js";

/** What hangs from a rung once it has an answer. `render(answer, context)` is the view's. */
export class Layers {
  #render;
  #context;
  #view;
  #name;
  #turn = 0;
  #choice;
  #parts;
  #shown = null;
  #say = element("p", { class: "say", tabindex: "0" });
  #copied = element("span", { class: "note", role: "status" });
  #cautions = element("div", { class: "cautions" });
  #evidence;
  #evidenceBody = element("div", { class: "evidence-body" });
  #workingBody = element("div", { class: "working-body" });
  #working;
  #limits;

  /** `more`: a node between evidence and working that outlives the answers. */
  constructor({ name, render, context, view, more = null }) {
    this.#name = name;
    this.#render = render;
    this.#context = context;
    this.#view = view;
    this.#choice = scopedChoice(context.choice);
    const heading = (text) => element("h3", { id: `${name}-${text.toLowerCase()}`, text });
    this.#evidence = element("section", { class: "evidence", tabindex: "-1", "aria-labelledby": `${name}-evidence ${name}-name` }, heading("Evidence"), this.#evidenceBody);
    this.#working = element("details", { class: "working fold" }, element("summary", {}, heading("Working")), this.#workingBody);
    this.#limits = element("section", { class: "limits", "aria-labelledby": `${name}-limits ${name}-name` });
    this.#working.open = view.get(`working:${name}`) ?? false;
    this.#working.addEventListener("toggle", () => view.set(`working:${name}`, this.#working.open));
    this.#say.addEventListener("copy", (event) => this.#copy(event));
    const line = element("div", { class: "say-line" }, this.#say,
      element("button", { type: "button", class: "action copy-say", text: "Copy", "aria-label": "Copy the answer's sentence", on: { click: () => this.#copyBy() } }),
      this.#copied);
    const under = element("div", { class: "under" }, this.#working, this.#limits);
    this.#parts = [line, this.#cautions, this.#evidence, under];
    this.node = element("div", { class: "layers" }, line, this.#cautions, this.#evidence, more, under);
    this.#hide(true);
  }

  #hide(hidden) {
    for (const part of this.#parts) part.hidden = hidden;
  }

  /** The sentence as it is spoken. */
  speech() {
    return this.#shown ? richSpeech(this.#shown.answer.say) : "";
  }

  /** Shows an answer: the sentence at once, what proves it after the sentence has been painted. */
  show(answer, { old, unfolded }) {
    this.node.classList.toggle("old", old);
    if (this.#shown?.answer === answer && this.#shown.settings === this.#context.settings.values) {
      if (unfolded) this.#evidenceLater(answer);
      return;
    }
    this.#shown = { answer, settings: this.#context.settings.values, drawn: false };
    this.#turn += 1;
    this.#say.replaceChildren(richNode(answer.say, this.#context.settings.values));
    this.#copied.textContent = "";
    this.#hide(false);
    if (unfolded) this.#evidenceLater(answer);
  }

  /** There is nothing to show. */
  clear() {
    this.#turn += 1;
    this.#shown = null;
    this.#hide(true);
    this.#choice.release();
    this.#evidenceBody.replaceChildren();
    this.#workingBody.replaceChildren();
  }

  #evidenceLater(answer) {
    if (this.#shown.drawn) return;
    this.#shown.drawn = true;
    const turn = this.#turn;
    afterPaint(() => {
      if (turn === this.#turn) this.#draw(answer);
    });
  }

  #draw(answer) {
    this.#cautions.replaceChildren(...(answer.cautions ?? []).map((text) => element("p", { class: "caution" },
      element("strong", { text: "Caution: " }), text)));
    const limits = answer.limits ?? [];
    this.#limits.hidden = limits.length === 0;
    this.#limits.replaceChildren(
      element("h3", { id: `${this.#name}-limits`, text: "Limits" }),
      element("ul", {}, ...limits.map((text) => element("li", { text }))));
    const place = focusPlace(this.#evidence) ?? focusPlace(this.#workingBody);
    this.#choice.release();
    try {
      const { evidence, working } = this.#render(answer, this.#viewContext());
      // Evidence that outlives its answers stays where it is, with the finger on it.
      if (evidence !== this.#evidenceBody.firstChild) this.#evidenceBody.replaceChildren(evidence);
      this.#workingBody.replaceChildren(working);
    } catch (error) {
      // The sentence and the limits stand; what cannot be drawn says so where it would have been.
      this.#evidenceBody.replaceChildren(element("div", { class: "fault" },
        element("p", { class: "sentence", text: "The evidence could not be drawn; your sheet is safe." }),
        element("p", { class: "key", text: String(error) })));
      this.#workingBody.replaceChildren();
      console.error(error);
    }
    if (place !== null) place();
  }

  // The view's subscriptions end when its nodes go.
  #viewContext() {
    const { settings, ...rest } = this.#context;
    return { ...rest, view: this.#view, settings: settings.values, sheet: this.#context.store.sheet, choice: this.#choice, lastingChoice: this.#context.choice };
  }

  #copy(event) {
    const selection = document.getSelection();
    if (selection !== null && !selection.isCollapsed && String(selection).trim() !== "") return;
    event.clipboardData.setData("text/plain", richPlain(this.#shown.answer.say));
    event.preventDefault();
    this.#copied.textContent = "Copied.";
  }

  async #copyBy() {
    try {
      await navigator.clipboard.writeText(richPlain(this.#shown.answer.say));
      this.#copied.textContent = "Copied.";
    } catch {
      // At a file's address some browsers have no clipboard: selecting leaves it to the person.
      document.getSelection().selectAllChildren(this.#say);
      this.#say.focus();
      this.#copied.textContent = "The browser refuses to copy; the sentence is selected.";
    }
  }
}

// Runs once the frame that is being made has been painted, or soon when none is (a hidden page).
function afterPaint(act) {
  let done = false;
  const once = () => {
    if (done) return;
    done = true;
    act();
  };
  requestAnimationFrame(() => setTimeout(once, 0));
  setTimeout(once, 200);
}

// How to find focus again after the nodes under it have been made anew.
export function focusPlace(container) {
  const focused = document.activeElement;
  if (!container.contains(focused) || focused === container) return null;
  const all = () => [...container.querySelectorAll("a[href], button, input, select, summary, [tabindex]")];
  const index = all().indexOf(focused);
  const { id, tagName } = focused;
  return () => {
    if (document.activeElement === focused) return;
    const again = (id && document.getElementById(id)) || all()[index];
    if (again && again.tagName === tagName) again.focus();
    else container.closest("section, details")?.focus();
  };
}
