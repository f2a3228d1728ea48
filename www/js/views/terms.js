// Tables of terms, levels and other couplings of one configuration.

import { halfText, halfValue, trueMinus } from "../digits.js";
import { element } from "../dom.js";
import { M_L, M_S } from "../plot/grid.js";
import { dataTable } from "../table.js";
import { richPlain } from "../rich.js";
import { kindOf } from "./working.js";

/** The shared-choice id of a term. */
export function termId(entry, term, index) {
  return `term:${entry.configuration.text}/${term}#${index ?? 1}`;
}

/** The chosen term of this configuration as {L, S, id}, or null; a chosen level chooses its term. */
export function chosenTerm(entry, chosen) {
  if (chosen === null) return null;
  for (const row of termRows(entry)) if (termId(entry, row.term, row.index) === chosen) return { L: row.L, S: (row.multiplicity - 1) / 2, id: chosen };
  if (!chosen.startsWith("level:")) return null;
  const level = (entry.levels ?? []).find((one) => `level:${one.label}` === chosen);
  if (!level) return null;
  // Where the kinds of a term cannot be told apart, all its levels point at the one row.
  return chosenTerm(entry, termId(entry, level.term, level.index)) ?? chosenTerm(entry, termId(entry, level.term, null));
}

/** Whether a chosen level or line has to do with this term. */
function termConcerned(entry) {
  const found = new Map();
  return (row, chosen) => {
    if (!found.has(chosen)) {
      found.clear();
      found.set(chosen, new Set((entry.levels ?? []).filter((level) => levelConcerned(level, chosen)).map((level) => chosenTerm(entry, `level:${level.label}`)?.id)));
    }
    return found.get(chosen).has(termId(entry, row.term, row.index));
  };
}

/** Whether a level is the chosen one or an end of the chosen line. */
function levelConcerned({ label }, chosen) {
  if (chosen === `level:${label}`) return true;
  if (!chosen.startsWith("line:")) return false;
  const ends = chosen.slice("line:".length, chosen.lastIndexOf("/"));
  return ends.startsWith(`${label}/`) || ends.endsWith(`/${label}`);
}

/** One row for each kind of each term, where kinds can be told apart; one for each term otherwise. */
export function termRows(entry) {
  return (entry.terms ?? []).flatMap((term) => {
    const kinds = term.kinds?.length ? term.kinds : [{ index: null }];
    return kinds.map((kind) => ({ ...kind, term: term.term, multiplicity: term.multiplicity, L: term.L, odd: term.odd, times: term.times, J: term.J, index: kind.index ?? null }));
  });
}

/** A term's symbol as rich text. */
export function termRich({ term, multiplicity, odd, index = null }) {
  return [{ term: { multiplicity, letter: term.replace(/^\d+/, ""), odd, J: null, index } }];
}

function captionOf(entry, ...after) {
  return [...after, { configuration: entry.configuration }];
}

/** The table of terms. */
export function termsTable(entry, context) {
  const rows = termRows(entry);
  const has = (key) => rows.some((row) => row[key] !== null && row[key] !== undefined);
  const group = "only for repeated terms of one open d or f shell";
  const columns = [
    { name: "term", type: "text", value: (row) => richPlain(termRich(row)), rich: termRich },
    { name: "J", type: "text", value: (row) => row.J.join(", ") },
    { name: "times", type: "number", value: (row) => row.times },
    has("seniority") && { name: "seniority", type: "number", value: (row) => row.seniority, reason: group },
    has("W") && { name: "W", head: [{ sign: { runs: [{ text: "W" }], plain: "W", speech: "W, label of the rotation group", latex: "$W$" } }], type: "text", value: (row) => (row.W ? `(${row.W.join(" ")})` : null), reason: group },
    has("U") && { name: "U", head: [{ sign: { runs: [{ text: "U" }], plain: "U", speech: "U, label of the group G 2", latex: "$U$" } }], type: "text", value: (row) => (row.U ? `(${row.U.join(" ")})` : null), reason: "only for f shells" },
  ].filter(Boolean);
  const counted = `${entry.n_terms} ${entry.n_terms === 1 ? "term" : "terms"}, ${entry.n_levels} ${entry.n_levels === 1 ? "level" : "levels"}, ${entry.states} states`;
  const table = dataTable({
    caption: [...captionOf(entry, "Terms of "), `: ${counted} (exact, by counting)`], columns, rows,
    identify: (row) => termId(entry, row.term, row.index), concerns: termConcerned(entry), context, file: `terms ${entry.configuration.text}`,
  });
  return has("W") ? element("div", { class: "table-and-note" }, table, element("p", { class: "note", text: has("U")
    ? "W labels the rotation group in 2ℓ + 1 dimensions and U the group G₂ for each term: they tell terms of the same name apart."
    : "W labels the rotation group in 2ℓ + 1 dimensions for each term: with the seniority it tells terms of the same name apart." })) : table;
}

/** What each term is made of: its parents with one electron less, or its coupling chains. */
export function parentageTable(entry, context, answer) {
  const rows = termRows(entry).flatMap((row) => (row.parents ?? []).map((parent) => ({ ...row, parent })));
  if (rows.length === 0) return null;
  return dataTable({
    caption: captionOf(entry, "Parents, with one electron less, of the terms of "), rows, context, file: `parents ${entry.configuration.text}`,
    columns: [
      { name: "term", type: "text", value: (row) => richPlain(termRich(row)), rich: termRich },
      { name: "parent", type: "text", value: (row) => richPlain(termRich(row.parent)), rich: (row) => termRich(row.parent) },
      { name: "weight", type: "number", kind: kindOf(answer, "terms.kinds.parents.weight"), value: (row) => row.parent.weight },
    ],
    identify: (row) => termId(entry, row.term, row.index),
  });
}

/** How terms of several open shells come about. */
export function chainsTable(entry, context) {
  const rows = (entry.terms ?? []).flatMap((term) => (term.chains ?? []).map((chain) => ({ ...term, index: null, chain })));
  if (rows.length === 0) return null;
  return dataTable({
    caption: captionOf(entry, "Ways to couple the open shells of "), rows, context, file: `coupling ${entry.configuration.text}`,
    columns: [
      { name: "term", type: "text", value: (row) => row.term, rich: termRich },
      { name: "coupled from", type: "text", value: (row) => richPlain(row.chain), rich: (row) => row.chain },
    ],
    identify: (row) => termId(entry, row.term, null),
  });
}

/** The table of levels with g_J. */
export function levelsTable(entry, context, answer) {
  const rows = entry.levels ?? [];
  const table = dataTable({
    caption: [...captionOf(entry, "Levels of "), " in LS coupling"], rows, context, file: `levels ${entry.configuration.text}`,
    columns: [
      { name: "level", type: "text", value: (row) => row.label, rich: (row) => row.rich },
      { name: "J", type: "half", value: (row) => row.J },
      { name: "parity", type: "text", value: (row) => row.parity },
      gColumn(kindOf(answer, "levels.g"), (row) => row.g),
      { name: "mu_eff", head: [{ sign: { runs: [{ text: "μ" }, { down: "eff" }], plain: "mu_eff", speech: "mu effective", latex: "$\\mu_\\mathrm{eff}$" } }], unit: "mu_B", type: "number", kind: kindOf(answer, "levels.mu_eff"), value: (row) => row.mu_eff, reason: NO_MOMENT },
    ],
    identify: (row) => `level:${row.label}`, concerns: levelConcerned,
  });
  const all = String(entry.n_levels) === String(rows.length);
  return all ? table : [table, element("p", { class: "note", text: `The first ${rows.length} of ${entry.n_levels} levels are listed; the table of levels by J counts them all.` })];
}

const NO_MOMENT = "a level with J = 0 has no magnetic moment";

function gColumn(kind, value) {
  const sign = { runs: [{ text: "g" }, { down: "J" }], plain: "g_J", speech: "g J", latex: "$g_J$" };
  return { name: "g_J", head: [{ sign }], type: "number", kind, value, reason: NO_MOMENT };
}

/** How many levels have each J. */
export function levelsByJTable(counts, caption, context, file) {
  const rows = Object.entries(counts ?? {}).map(([J, count]) => ({ J, count })).sort((a, b) => halfValue(a.J) - halfValue(b.J));
  return dataTable({
    caption, rows, context, file,
    columns: [
      { name: "J", type: "half", value: (row) => row.J },
      { name: "levels", type: "number", value: (row) => row.count },
      { name: "states", type: "number", value: (row) => (typeof row.count === "number" ? row.count * (2 * halfValue(row.J) + 1) : String(BigInt(row.count) * BigInt(2 * halfValue(row.J) + 1))) },
    ],
  });
}

/** The jj distributions of the electrons over nlj. */
export function jjTable(entry, context) {
  const sum = (levels) => Object.entries(levels).sort(([a], [b]) => halfValue(a) - halfValue(b)).map(([J, count]) => (count === 1 ? J : `${J} (${count}×)`)).join(", ");
  return dataTable({
    caption: [...captionOf(entry, "Levels of "), " in jj coupling"], rows: entry.jj, context, file: `jj ${entry.configuration.text}`,
    columns: [
      { name: "subshells", type: "text", value: (row) => richPlain(row.name), rich: (row) => row.name },
      { name: "levels", type: "number", value: (row) => row.n_levels },
      { name: "J", type: "text", value: (row) => sum(row.levels) },
    ],
  });
}

/** g of every j subshell that occurs: the same for all levels of electrons that share one nℓj. */
export function jjFactorTable(entry, context, answer) {
  const rows = [];
  for (const factor of entry.jj.flatMap((row) => row.factors ?? [])) {
    if (!rows.some((other) => other.label === factor.label && other.j === factor.j)) rows.push(factor);
  }
  const rich = (row) => [{ jj: { subshells: [{ label: row.label, j: row.j, electrons: 1 }], J: null } }];
  return dataTable({
    caption: "g of each j subshell", rows, context, file: `g of j subshells ${entry.configuration.text}`,
    columns: [
      { name: "subshell", type: "text", value: (row) => richPlain(rich(row)), rich },
      { name: "j", type: "half", value: (row) => row.j },
      gColumn(kindOf(answer, "jj.factors"), (row) => row.g),
    ],
  });
}

/** Pair-coupling names of the levels of an outer electron on a parent level. */
export function jKTable(entry, context, answer) {
  const rows = entry.jK.flatMap((pair) => pair.J.map((J, place) => ({ ...pair, J, g: pair.g?.[place] ?? null })));
  return dataTable({
    caption: [...captionOf(entry, "Levels of "), " in jK (pair) coupling"], rows, context, file: `jK ${entry.configuration.text}`,
    columns: [
      { name: "name", type: "text", value: (row) => richPlain(row.name), rich: (row) => row.name },
      { name: "parent", type: "text", value: (row) => richPlain(row.parent), rich: (row) => row.parent },
      { name: "K", type: "half", value: (row) => row.K },
      { name: "J", type: "half", value: (row) => row.J },
      gColumn(kindOf(answer, "jK.g"), (row) => row.g),
    ],
  });
}

/** How the terms are read off the grid: each takes one state from every cell of its block. */
export function readOffTable(entry, context) {
  const rows = [];
  let left = BigInt(entry.states);
  const terms = [...(entry.terms ?? [])].sort((a, b) => b.multiplicity - a.multiplicity || b.L - a.L);
  for (const term of terms) {
    const each = term.multiplicity * (2 * term.L + 1);
    left -= BigInt(each) * BigInt(term.times);
    rows.push({ ...term, index: null, each, left: countValue(left) });
  }
  return dataTable({
    caption: captionOf(entry, "Terms read off the grid of "), rows, context, file: `read-off ${entry.configuration.text}`,
    columns: [
      { name: "corner M_S", head: ["corner ", M_S], type: "half", value: (row) => halfText((row.multiplicity - 1) / 2) },
      { name: "corner M_L", head: ["corner ", M_L], type: "number", value: (row) => row.L },
      { name: "term", type: "text", value: (row) => row.term, rich: termRich },
      { name: "times", type: "number", value: (row) => row.times },
      { name: "states of one", type: "number", value: (row) => row.each },
      { name: "states left", type: "number", value: (row) => row.left },
    ],
    identify: (row) => termId(entry, row.term, 1),
  });
}

/** The grid's counts as a table. */
export function gridTable(entry, context) {
  const { grid } = entry;
  return dataTable({
    caption: [...captionOf(entry, "Microstates of the open shells of "), " by ", M_L, " and ", M_S], context, file: `grid ${entry.configuration.text}`,
    rows: grid.M_L.map((value, r) => ({ value, counts: grid.counts[r] })),
    columns: [
      { name: "M_L", head: [M_L], type: "number", value: (row) => row.value },
      ...grid.M_S.map((value, c) => ({ name: `M_S ${value}`, head: [M_S, ` ${trueMinus(value)}`], type: "number", value: (row) => row.counts[c] })),
    ],
  });
}

// Counts above 2⁵³ are text, as the core writes them.
function countValue(count) {
  return count <= BigInt(Number.MAX_SAFE_INTEGER) ? Number(count) : String(count);
}
