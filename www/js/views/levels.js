// Levels: what they are made of, how their intervals go, from which parameters they come, and series.

import { element } from "../dom.js";
import { wayButton } from "../fields.js";
import { richNode, richPlain } from "../rich.js";
import { dataTable } from "../table.js";
import { facts, shares } from "./chosen.js";
import { fold, select } from "./fold.js";
import { kindOf } from "./working.js";

const SCHEMES = { LS: "composition", jj: "composition_jj", jK: "composition_jk" };
const sorting = {};

/** The folds of an answer to "levels"; `endsOf(chosen)`: labels of the levels of a chosen line. */
export function levelParts(whole, levels, endsOf, context) {
  const part = (key, title, rows, make) => (rows?.length ? fold(context, `lines:${key}`, [title], make) : null);
  return [
    fold(context, "lines:levels", [`Levels and what they are made of (${whole.levels.length}${whole.levels_total > whole.levels.length ? ` of ${whole.levels_total}` : ""})`], () => levelsPart(whole, levels, endsOf, context)),
    part("parameters", "Parameters of the energies", whole.parameters, () => parametersTable(whole, context)),
    part("intervals", "Fine-structure intervals and Landé’s rule", whole.intervals, () => intervalsTable(whole, context)),
    part("series", "Series and their limits", whole.series, () => whole.series.map((series) => seriesTable(series, levels, context))),
  ].filter(Boolean);
}

/** How much correlation would help here, with the button that puts it in; nothing where the sheet does not refuse it, or no level is computed. */
export function correlationNode({ correlation, levels }, { setField }) {
  return levels.some(({ energy_kind: kind }) => kind === "computed") ? offerNode(correlation, setField) : null;
}

/** What the sheet could have computed besides, with the button that puts it in; nothing where it is in. */
export function offerNode(offer, setField) {
  if (!offer?.way) return null;
  const { label, path, value } = offer.way;
  return element("div", { class: "ways offer" },
    wayButton({ label }, () => setField(path, value ?? undefined, label)),
    element("span", { class: "note", text: offer.say }));
}

function levelsPart(whole, levels, endsOf, context) {
  const box = element("div", {});
  const known = Object.keys(SCHEMES).filter((scheme) => whole.levels.some((level) => level[SCHEMES[scheme]]?.length));
  const best = whole.schemes?.find((scheme) => scheme.best)?.scheme;
  const options = known.map((scheme) => [scheme, scheme === best ? `${scheme}, which fits best` : scheme]);
  const scheme = select(context, "lines:scheme", "Composition in", options, () => fill());
  const fill = () => box.replaceChildren(levelsTable(whole, levels, endsOf, scheme.value(), context));
  fill();
  return [
    groundNode(whole, context), schemesNode(whole), element("div", { class: "choices" }, scheme.node), box,
    whole.ionisation ? balanceNode(whole, context) : null,
    whole.partition ? element("p", { class: "note" }, richNode(partitionWords(whole), context.settings)) : null,
  ];
}

function balanceNode({ ionisation: found, kinds }, context) {
  const kind = (key) => kinds[`ionisation.${key}`] ?? null;
  return element("div", {}, element("p", { class: "note", text: "Balance with the next ion, by Saha’s equation:" }), facts(context, [
    ["next ions for each of these", found.ratio, null, kind("ratio")], ["share ionised", found.ionised, null, kind("ratio")],
    ["ionisation limit", found.limit, "cm-1", found.limit_kind], ["lowered by", found.lowering, "cm-1", kind("lowering")],
    ["temperature", found.temperature, "K", "entered"], ["electron density", found.electron_density, "m-3", "entered"],
  ]));
}

function partitionWords(whole) {
  const { temperature, value, cut_off: cutOff } = whole.partition;
  const number = (text, unit, kind) => ({ number: { text: String(text), unit, kind } });
  return ["Partition function at ", number(temperature, "K", "entered"), ": ", number(value, null, kindOf(whole, "partition.value")), ", of the levels up to ", number(cutOff, "cm-1", null), "."];
}

function schemesNode({ schemes }) {
  if (!schemes?.length) return null;
  const words = schemes.map(({ scheme, mean_leading: mean, best }) => `${scheme} ${mean.toFixed(1)} %${best ? " (best)" : ""}`);
  return element("p", { class: "note", text: `Mean share of the leading state: ${words.join(", ")}. The best scheme is the one with the highest.` });
}

function groundNode({ ground }, context) {
  if (!ground) return null;
  const against = (name, { term, J, agrees }) => `${name} ${agrees ? "agrees" : `says ${term}, J ${J}`}`;
  const words = [ground.hund && against("Hund’s rules", ground.hund), ground.observed && against("the observed ground level", ground.observed)].map((text, i) => (text && i === 0 ? text.replace("rules agrees", "rules agree").replace("rules says", "rules say") : text)).filter(Boolean);
  return element("p", {}, "Lowest by energy: ", richNode(ground.rich, context.settings), words.length ? `; ${words.join("; ")}.` : ".");
}

function levelsTable(whole, levels, endsOf, scheme, context) {
  const kind = (key) => kindOf(whole, `levels.${key}`);
  const energyKinds = [...new Set(whole.levels.map((level) => level.energy_kind))];
  const energyKind = energyKinds.length === 1 ? energyKinds[0] : (row) => row.energy_kind;
  const key = SCHEMES[scheme];
  return dataTable({
    caption: ["Levels of ", ...(whole.species ?? [])], rows: whole.levels, context, file: "levels", sorting,
    columns: [
      { name: "level", type: "text", value: (row) => row.label, rich: (row) => row.rich },
      { name: "J", type: "half", value: (row) => row.J },
      { name: "parity", type: "text", value: (row) => row.parity },
      { name: "above the lowest", unit: "cm-1", type: "number", kind: energyKind, value: (row) => row.above_lowest },
      { name: "energy", unit: "cm-1", type: "number", kind: energyKind, value: (row) => row.energy, copied: true },
      ...(energyKinds.includes("measured") || energyKinds.includes("entered") ? [{ name: "computed energy", unit: "cm-1", type: "number", kind: "computed", value: (row) => row.computed_energy ?? null, reason: "nothing was computed" }] : []),
      { name: "g", type: "number", kind: kind("g"), value: (row) => row.g, reason: "J is 0" },
      { name: "leading share", unit: "%", type: "number", kind: kind("composition.percent"), value: (row) => row[key]?.[0]?.percent ?? null, reason: "no such scheme here" },
      { name: `composition in ${scheme}`, type: "text", value: (row) => (row[key]?.length ? richPlain(shares(row[key])) : null), rich: (row) => shares(row[key]) },
      { name: "lifetime", unit: "s", type: "number", kind: kind("lifetime"), value: (row) => row.lifetime, reason: "no line leads down from here" },
      ...(whole.levels.some((row) => typeof row.population === "number") ? [{ name: "population", type: "number", kind: kind("population"), value: (row) => row.population }] : []),
    ],
    identify: (row) => `level:${row.label}`, concerns: (row, chosen) => levels.get(row.label)?.termId === chosen || endsOf(chosen).includes(row.label),
  });
}

function parametersTable(whole, context) {
  const number = (key, name, more = {}) => ({ name, type: "number", value: (row) => row[key], ...more });
  return [
    element("p", { class: "note", text: "Scales and values of your own are among the fields of this question, under “Energies: scales and values of your own”." }),
    dataTable({
      caption: "Parameters", rows: whole.parameters, context, file: "parameters",
      columns: [
        { name: "parameter", type: "text", value: (row) => row.name },
        { name: "configuration", type: "text", value: (row) => (row.second ? `${row.configuration}, ${row.second}` : row.configuration), reason: "all that have these shells" },
        number("value", "value", { kind: (row) => row.kind }), { name: "unit", type: "text", value: (row) => row.unit },
        number("computed", "as computed", { kind: "computed", reason: "nothing is computed here" }), number("scale", "scale", { reason: "a given value is not scaled" }),
      ],
    }),
  ];
}

function intervalsTable(whole, context) {
  const kind = kindOf(whole, "intervals.interval");
  return dataTable({
    caption: "Intervals within each term", rows: whole.intervals, context, file: "intervals",
    columns: [
      { name: "term", type: "text", value: (row) => `${row.configuration} ${row.term}`, rich: (row) => row.rich },
      { name: "J upper", type: "half", value: (row) => row.upper_J }, { name: "J lower", type: "half", value: (row) => row.lower_J },
      { name: "interval", unit: "cm-1", type: "number", kind, value: (row) => row.interval },
      { name: "ratio to the one below", type: "number", kind, value: (row) => row.ratio, reason: "there is none below" },
      { name: "ratio by Landé’s rule", type: "number", kind: "exact", value: (row) => row.expected_ratio, reason: "there is none below" },
    ],
  });
}

function seriesTable(series, levels, context) {
  return dataTable({
    caption: ["Series ", ...(series.rich ?? [series.name]), ", limit ", { number: { text: String(series.limit), unit: "cm-1", kind: series.limit_kind } }], rows: series.members, context, file: `series ${series.name}`,
    columns: [
      { name: "n", type: "number", value: (row) => row.n },
      { name: "level", type: "text", value: (row) => row.label, reason: "extrapolated" },
      { name: "energy", unit: "cm-1", type: "number", kind: (row) => row.kind, value: (row) => row.energy },
      { name: "effective n", type: "number", kind: (row) => row.kind, value: (row) => row.n_effective },
      { name: "quantum defect", type: "number", kind: (row) => row.kind, value: (row) => row.defect },
    ],
    identify: (row) => (levels.has(row.label) ? `level:${row.label}` : null),
  });
}
