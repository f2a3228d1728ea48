// The fields of "Which lines?": window and conditions, how energies come about, measured levels.

import { element } from "./dom.js";
import { flagField, wordField } from "./fields.js";
import { namedRows } from "./named-rows.js";

/** The fields; `openCsv()` lets a person choose a table of measured levels. */
export function lineFields(fields, questions, { store, view, setField, openCsv }) {
  const levels = () => questions.entries.get("lines")?.answer?.beside?.levels ?? null;
  const fold = (key, title, ...inside) => {
    const node = element("details", { class: "fold part" }, element("summary", { text: title }), element("div", { class: "fold-body question-fields" }, ...inside));
    node.open = view.get(`fields:${key}`) ?? false;
    node.addEventListener("toggle", () => view.set(`fields:${key}`, node.open));
    return node;
  };
  const row = (...inside) => element("div", { class: "field-row" }, ...inside);
  const field = (path, label, hint, more = {}) => fields.make(path, { label, hint, ...more });
  const scale = (key, sign = key) => field(`/structure/scale/${key}`, `Multiply computed ${sign} by`, "a number; empty is 1", { number: true });
  const parameters = () => (levels()?.parameters ?? []).filter((parameter) => parameter.can_be_given !== false);
  return element("div", { class: "question-fields" },
    row(field("/window/0", "Show lines between", "such as 580 nm or 2 eV; empty is open", { pair: "/window" }), field("/window/1", "Show lines up to", "the other end, such as 600 nm; empty is open", { pair: "/window" }),
      wordField({ store, setField }, "/medium", "Tell wavelengths", [["", "as in vacuum"], ["air", "as in air"]]),
      field("/source/temperature", "Temperature", "for intensities, such as 5000 K")),
    element("div", { class: "parts" },
      fold("energies", "Energies: factors and values of your own",
        row(wordField({ store, setField }, "/structure/energies", "Energies", [["", "computed"], ["given", "from given values alone"]]),
          element("div", { class: "flags" },
            flagField({ store, setField }, "/structure/mixing", "Configurations mix", "Mixing")),
          wordField({ store, setField }, "/structure/correlation", "Correlation within subshells", [["", "where it is sound"], [true, "everywhere"], [false, "left out"]])),
        row(scale("F"), scale("G"), scale("R"), scale("zeta", "ζ")),
        namedRows({
          fields, store, path: "/structure/given",
          words: { name: "Parameter", value: "Value", hint: "such as 11.46 cm-1", add: "Give a value", one: "such as zeta(3p) or F2(3d,3d) @ 3d6 4s2" },
          suggestions: () => parameters().map(({ name }) => name),
          usual: (name) => {
            const known = parameters().find((parameter) => parameter.name === name);
            return known ? `${known.value} ${known.unit ?? ""}`.trim() : "";
          },
        })),
      fold("measured", "Measured levels",
        element("button", { type: "button", class: "action", text: "Open a table of levels (CSV)", on: { click: openCsv } }),
        namedRows({
          fields, store, path: "/measured",
          words: { name: "Level", value: "Measured energy", hint: "above the lowest, such as 16956.17 cm-1", add: "Add a level", one: "such as 3p 2P1/2" },
          suggestions: () => questions.reading?.levels ?? [],
        })),
      fold("conditions", "Index, air, electrons",
        row(field("/refractive_index", "Refractive index", "of a host or gas; empty for that of air"),
          field("/source/electron_density", "Electron density", "such as 1e16 cm-3")),
        row(field("/air/temperature", "Air temperature", "usual: 20 °C"), field("/air/pressure", "Air pressure", "usual: 101325 Pa"),
          field("/air/humidity", "Humidity", "such as 0.5"), field("/air/co2", "CO₂", "such as 450 ppm")))));
}
