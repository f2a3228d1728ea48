// What is chosen, told in full: one level or one line, with all that is known of it.

import { element } from "../dom.js";
import { richNode } from "../rich.js";
import { notesOf } from "./line-list.js";
import { MEDIA } from "./line-units.js";
import { lineId } from "./multiplets.js";
import { kindOf } from "./working.js";

/** A block that follows the shared choice. */
export function chosenBlock({ answer, levels, context }) {
  const node = element("div", { class: "chosen-one", role: "status" });
  const show = () => {
    const id = context.choice.get() ?? "";
    const line = id.startsWith("line:") ? answer.lines.find((each) => lineId(each) === id) : null;
    const level = id.startsWith("level:") ? levels.get(id.slice("level:".length)) : null;
    node.replaceChildren(...(line ? ofLine(line, answer, levels, context) : level ? ofLevel(level, answer, context) : []));
  };
  context.choice.subscribe(show);
  show();
  return node;
}

function ofLine(line, answer, levels, context) {
  const kind = (key) => kindOf(answer, `lines.${key}`);
  const lower = levels.get(line.lower);
  const upper = levels.get(line.upper);
  return [
    element("p", { class: "chosen-name" }, "▸ ", richNode([...lower.rich, " – ", ...upper.rich, `, ${line.multipole}`], context.settings)),
    facts(context, [
      ...Object.values(MEDIA).map(({ key, words }) => [words, line[key], "nm", line.energy_kind]), ["wavenumber", line.wavenumber, "cm-1", line.energy_kind],
      ["A", line.A, "s-1", kind("A")], ["gf", line.gf, null, kind("gf")], ["f", line.f, null, kind("f")], ["S", line.S, null, kind("S")],
      ["branching fraction", line.branching, null, kind("branching")], ["optical depth", line.optical_depth, null, kind("optical_depth")], ["cancellation factor", line.cancellation, null, kind("cancellation")],
    ]),
    ...notesOf(line).map((note) => element("p", { class: "note", text: `To be known: ${note}.` })),
    element("button", {
      type: "button", class: "action", text: "Split it in a field",
      on: { click: () => context.setField("/line", { upper: line.upper, lower: line.lower }, `Take the line ${line.lower} – ${line.upper}`) },
    }),
  ];
}

function ofLevel(level, answer, context) {
  const count = (side) => answer.lines.filter((line) => line[side] === level.label).length;
  return [
    element("p", { class: "chosen-name" }, "▸ ", richNode(level.rich, context.settings)),
    facts(context, [
      ["above the lowest", level.above_lowest, "cm-1", level.energy_kind], ["g", level.g, null, "computed"], ["lifetime", level.lifetime, "s", "computed"],
      ["lines down", count("upper"), null, null], ["lines up", count("lower"), null, null],
    ]),
    ...(level.composition?.length ? [element("p", { class: "note" }, richNode(["Made of ", ...shares(level.composition)], context.settings))] : []),
  ];
}

/** "92 % ³P, 5 % ¹D" as rich text. */
export function shares(composition) {
  return composition.flatMap(({ rich, name, percent }, i) => [`${i > 0 ? ", " : ""}${Number(percent.toPrecision(3))} % `, ...(rich?.length ? rich : [name])]);
}

/** Named numbers with unit and kind: [[name, value, unit, kind]]; unknown ones are left out. */
export function facts(context, rows) {
  return element("dl", { class: "facts" }, ...rows.filter(([, value]) => value !== null && value !== undefined).map(([name, value, unit, kind]) => element("div", { class: "pair-line" },
    element("dt", { text: name }), element("dd", {}, richNode([{ number: { text: String(value), unit, kind } }], context.settings)))));
}
