// The panel "Open": a file, an empty sheet, or one of the examples.

import { toAddress } from "./address.js";
import { element } from "./dom.js";

/** Fills the panel. `act` offers choose (a file), replace(sheet, label). */
export function openPanel(panel, examples, act) {
  const link = (example) => element("a", {
    href: toAddress(example), text: example.title,
    on: { click: (event) => {
      // A plain click opens it here, undoable; any other opens the address as links do.
      if (event.ctrlKey || event.metaKey || event.shiftKey || event.button !== 0) return;
      event.preventDefault();
      act.replace(example, `Open "${example.title}"`);
    } },
  });
  panel.append(
    element("h2", { text: "Open" }),
    element("div", { class: "actions" },
      element("button", { type: "button", class: "action", text: "Choose a file", on: { click: act.choose } }),
      element("button", { type: "button", class: "action", text: "Empty sheet", on: { click: () => act.replace({ rungline: 1 }, "Empty sheet") } })),
    element("p", { class: "note", text: "A sheet of at most 5 MB or a record of at most 40 MB; it can also be dropped anywhere on the page. Undo brings back what was here." }),
    element("h3", { text: "Examples" }),
    element("p", { class: "note", text: "All play in an invented scenario: a metal works called Tarn Gate Alloys. They are computed when opened." }),
    element("ul", { class: "examples" }, ...examples.map((example) => element("li", {}, link(example)))));
}
