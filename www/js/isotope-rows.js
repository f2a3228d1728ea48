// The isotopes of a sample: a row of fields for each, a way to take it out, and the natural ones at one press.

import { element } from "./dom.js";
import { namedRows } from "./named-rows.js";

const PATH = "/isotopes";

/** `constants(path, of)`: the fields for the hyperfine constants under a path. */
export function isotopeRows({ fields, store, put, constants, natural }) {
  const rows = [];
  const list = element("div", { class: "isotope-rows" });
  const add = element("button", { type: "button", class: "action", text: "Add an isotope", on: { click: () => {
    const count = isotopesOf(store).length;
    put(`${PATH}/${count}/isotope`, "", "Add an isotope");
    fields.focus(`${PATH}/${count}/isotope`);
  } } });
  const all = element("button", { type: "button", class: "action", text: "Put in the natural isotopes", hidden: true, on: { click: () => {
    put(PATH, natural().map(({ isotope, share }) => ({ isotope, ...(share ? { share } : {}) })), "Put in the natural isotopes");
  } } });
  const arrange = () => {
    const wanted = isotopesOf(store).length;
    while (rows.length > wanted) {
      const row = rows.pop();
      for (const path of row.paths) fields.remove(path);
      row.node.remove();
    }
    while (rows.length < wanted) rows.push(makeRow(rows.length));
  };
  function makeRow(at) {
    const path = (key) => `${PATH}/${at}/${key}`;
    const keys = ["isotope", "share", "shift"];
    const nth = `Isotope ${at + 1}`;
    const node = element("div", { class: "isotope-row" },
      element("div", { class: "field-row" },
        fields.make(path("isotope"), { label: nth, hint: "such as 85Rb", suggestions: () => natural().map(({ isotope }) => isotope) }),
        fields.make(path("share"), { label: `${nth}, share`, hint: "empty: the natural one" }),
        fields.make(path("shift"), { label: `${nth}, shift`, hint: "of the line, such as 78 MHz" })),
      constants(`${PATH}/${at}`, `${nth}, `),
      element("button", { type: "button", class: "action", text: "Take it out", "aria-label": `Take it out: isotope ${at + 1}`, on: { click: () => {
        put(`${PATH}/${at}`, undefined, `Take out isotope ${at + 1}`);
        add.focus();
      } } }));
    list.append(node);
    return { node, paths: keys.map(path) };
  }
  store.subscribe(arrange);
  arrange();
  return {
    node: element("div", { class: "named-rows" }, list, element("div", { class: "actions" }, add, all)),
    /** What the core knows of the element may have changed. */
    refresh() {
      all.hidden = natural().length === 0;
    },
  };
}

function isotopesOf(store) {
  return Array.isArray(store.sheet.isotopes) ? store.sheet.isotopes : [];
}

/** The fields of A and B under a path; labels begin with `of`. */
export function constantRows({ fields, store, suggestions }, path, of = "") {
  const rows = (key, letter, one) => namedRows({
    fields, store, path: `${path}/${key}`, suggestions,
    words: { name: `${of}level for ${letter}`, value: `${of}${letter}`, hint: "such as 885.8 MHz", add: `Give ${letter}`, one, of: `${of}${letter} of ` },
  });
  return element("div", { class: "constant-rows" },
    rows("magnetic_dipole", "A", "such as 3s 2S1/2"), rows("electric_quadrupole", "B", "J and I of at least 1"));
}
