// Shells, subshells and their one-electron states; the bare shell; how an atom fills.

import { element } from "../dom.js";
import { richNode, richPlain } from "../rich.js";
import { dataTable } from "../table.js";

const M_ELL = { sign: { runs: [{ text: "m" }, { down: "ℓ" }], plain: "m_l", speech: "m l", latex: "$m_\\ell$" } };

function range(values) {
  if (values.length === 0) return "";
  return values.length === 1 ? String(values[0]) : `${String(values[0]).replace("-", "\u2212")} … ${values.at(-1)}`;
}

/** Every subshell with its capacity and occupancy. */
export function shellsTable(entry, context) {
  const rows = (entry.shells ?? []).flatMap((shell) => shell.subshells.map((subshell) => ({ ...subshell, shell })));
  return dataTable({
    caption: ["Shells and subshells of ", { configuration: entry.configuration }], rows, context, file: `shells ${entry.configuration.text}`,
    columns: [
      { name: "shell", type: "text", value: ({ shell }) => `${shell.letter} (n = ${shell.n})`, sort: ({ shell }) => shell.n },
      { name: "in the shell", type: "text", value: ({ shell }) => `${shell.electrons} of ${shell.capacity}`, sort: ({ shell }) => shell.electrons },
      { name: "subshell", type: "text", value: (row) => row.label },
      { name: "electrons", type: "number", value: (row) => row.electrons },
      { name: "capacity", type: "number", value: (row) => row.capacity },
      { name: "filled", type: "text", value: (row) => row.filled },
      { name: "m_l", head: [M_ELL], type: "text", value: (row) => range(row.m_l ?? []) },
      { name: "m_s", head: [{ sign: { runs: [{ text: "m" }, { down: "s" }], plain: "m_s", speech: "m s", latex: "$m_s$" } }], type: "text", value: (row) => (row.m_s ?? []).map((text) => text.replace("-", "\u2212")).join(", ") },
      { name: "states", type: "number", value: (row) => (typeof row.states === "number" ? row.states : Number(row.states)) },
    ],
  });
}

/** All (n, ℓ) of a bare shell. */
export function bareShellTable(entry, context) {
  const bare = entry.bare_shell;
  return dataTable({
    caption: [`Shell n = ${bare.n}${bare.letter ? ` (${bare.letter})` : ""}: ${bare.l.length} values of ℓ, ${bare.pairs} pairs (ℓ, `, M_ELL, `), ${bare.states} states`], rows: bare.l, context, file: `shell n=${bare.n}`,
    columns: [
      { name: "subshell", type: "text", value: (row) => `${bare.n}${row.letter}`, sort: (row) => row.l },
      { name: "ℓ", type: "number", value: (row) => row.l },
      { name: "m_l", head: [M_ELL], type: "text", value: (row) => range(row.m_l) },
      { name: "pairs", type: "number", value: (row) => row.pairs },
      { name: "states", type: "number", value: (row) => row.states },
    ],
  });
}

/** Rule and observation of how the atom fills. */
export function fillingNode(filling, context) {
  const line = (name, rich, after) => element("div", { class: "pair-line" }, element("dt", { text: name }), element("dd", {}, richNode(rich, context.settings), after ?? ""));
  return element("div", { class: "filling" },
    element("dl", { class: "facts" },
      line("By the (n + ℓ, n) rule", filling.rule.rich),
      filling.observed ? line("Observed", filling.observed.rich, `, ${filling.observed.status}`) : line("Observed", ["not known for this ion"]),
      line("Used here", [filling.used === "observed" ? "the observed one" : "the rule's"], filling.differs ? "; the two differ" : "")),
    filling.note ? element("p", { text: filling.note }) : null);
}

/** Hund's rules step by step, against what is observed. */
export function groundNode(entry, context) {
  const { ground } = entry;
  const { hund, observed } = ground;
  const table = hund?.steps?.length ? dataTable({
    caption: ["Hund’s rules for ", { configuration: entry.configuration }], rows: hund.steps.map((step, i) => ({ ...step, i: i + 1 })), context, file: `hund ${entry.configuration.text}`,
    columns: [
      { name: "step", type: "number", value: (row) => row.i },
      { name: "rule", type: "text", long: true, value: (row) => row.rule },
      { name: "leaves", type: "text", value: (row) => richPlain(row.kept), rich: (row) => row.kept },
    ],
  }) : null;
  const verdict = !observed
    ? ["No observed ground level is known for this configuration of this ion; Hund’s rules stand alone."]
    : [ground.differs_from_hund ? "They differ: Hund’s rules give " : "They agree: Hund’s rules give ", ...hund.rich, ", observed is ", ...observed.rich, ` (${observed.status}; ${observed.source}).`];
  return element("div", { class: "ground" }, table, element("p", {}, richNode(verdict, context.settings)));
}
