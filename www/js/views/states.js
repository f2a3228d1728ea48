// Which states? Terms, levels, shells and the ground level of each configuration.

import { element } from "../dom.js";
import { M_L, M_S, gridLayout, gridWalk } from "../plot/grid.js";
import { picture } from "../plot/picture.js";
import { richNode } from "../rich.js";
import { bareShellTable, fillingNode, groundNode, shellsTable } from "./occupancy.js";
import { tableAndPicture } from "./beside.js";
import { fold, pointerWords } from "./fold.js";
import {
  chainsTable, chosenTerm, gridTable, jKTable, jjFactorTable, jjTable, levelsByJTable, levelsTable, parentageTable, readOffTable, termId, termRows, termsTable,
} from "./terms.js";
import { kindOf, workingNode } from "./working.js";

/** Evidence and working of an answer to "states". */
export function render(answer, context) {
  const entries = answer.by_configuration?.length ? answer.by_configuration : [answer];
  const evidence = element("div", { class: "evidence-parts" }, ...entries.map((entry, i) => section(entry, { answer, context, several: entries.length > 1, first: i === 0 })));
  return { evidence, working: workingNode(answer, context.settings) };
}

function section(entry, { answer, context, several, first }) {
  const key = (name) => `states:${name}`;
  const part = (name, title, make) => fold(context, key(name), [title], make);
  const configuration = [{ configuration: entry.configuration }];
  const head = several ? element("h4", { class: "configuration-head" }, richNode(entry.bare_shell ? [`n = ${entry.bare_shell.n}`] : configuration, context.settings)) : null;
  if (entry.bare_shell) return element("section", { class: "of-configuration" }, head, bareShellTable(entry, context));
  const filling = first ? entry.filling ?? answer.filling : null;
  return element("section", { class: "of-configuration" }, head,
    tableAndPicture(termsTable(entry, context), gridPicture(entry, context)),
    facts(entry, context),
    element("div", { class: "parts" },
      entry.levels?.length ? part("levels", `Levels and their g factors (${entry.n_levels})`, () => levelsTable(entry, context, answer)) : null,
      part("by-j", "Levels counted by J", () => levelsByJTable(entry.levels_by_J, ["Levels of ", ...configuration, " by J"], context, `levels by J ${entry.configuration.text}`)),
      entry.grid ? part("read-off", "Terms by corner cell", () => readOffTable(entry, context)) : null,
      termRows(entry).some((row) => row.parents?.length) ? part("parents", "Parents of each term", () => parentageTable(entry, context, answer)) : null,
      entry.terms?.some((term) => term.chains?.length) ? part("chains", "Coupling of the open shells", () => chainsTable(entry, context)) : null,
      entry.ground?.hund ? part("hund", "Ground level: Hund’s rules and observation", () => groundNode(entry, context)) : null,
      entry.shells?.length ? part("shells", "Shells and subshells", () => shellsTable(entry, context)) : null,
      entry.jj?.length ? part("jj", "Levels in jj coupling", () => [jjTable(entry, context), jjFactorTable(entry, context, answer),
        entry.jj_levels_by_J ? levelsByJTable(entry.jj_levels_by_J, ["jj levels of ", ...configuration, " by J"], context, `jj levels by J ${entry.configuration.text}`) : null]) : null,
      entry.jK?.length ? part("jk", "Names in jK (pair) coupling", () => jKTable(entry, context, answer)) : null,
      filling ? part("filling", "How the atom fills", () => fillingNode(filling, context)) : null));

  function facts() {
    const mu = entry.spin_only?.mu;
    const items = [
      entry.completed_core ? ["Filled core", [`${entry.completed_core}, completed from the electron count`]] : null,
      ["Configuration", [{ typed: "as typed", observed: "the observed ground configuration", rule: "by the filling rule" }[entry.source_of_configuration] ?? ""]],
      ["Parity", [entry.parity]],
      mu !== undefined && mu !== null ? ["Spin-only moment", [{ number: { text: String(mu), unit: "mu_B", kind: kindOf(answer, "spin_only") } }]] : null,
    ].filter((item) => item !== null && item[1][0]);
    return element("dl", { class: "facts" }, ...items.map(([name, rich]) => element("div", { class: "pair-line" },
      element("dt", { text: name }), element("dd", {}, richNode(rich, context.settings)))));
  }
}

function gridPicture(entry, context) {
  if (!entry.grid?.counts?.length) return null;
  const byCorner = new Map(termRows(entry).map((row) => [`${row.L}|${(row.multiplicity - 1) / 2}`, termId(entry, row.term, row.index)]).reverse());
  const shown = picture({
    context,
    name: [M_L, " by ", M_S, " grid of ", { configuration: entry.configuration }],
    rest: ["Microstates by ", M_L, " and ", M_S, ". Choose a term to see the cells it takes; ", pointerWords("a tap on", "Enter on"), " a corner cell chooses its term."],
    zoomable: false,
    walk: gridWalk(entry.grid.M_S.length),
    layout: gridLayout({
      grid: entry.grid,
      chosen: () => chosenTerm(entry, context.choice.get()),
      idOf: (L, S) => byCorner.get(`${L}|${S}`) ?? null,
    }),
    table: () => gridTable(entry, context),
  });
  context.choice.subscribe(() => shown.redraw());
  return shown.node;
}
