// Tables of the radial functions: energies and radii, integrals, convergence, polarisation, Dirac's
// levels. A set is {name and short name (rich), plain, block, kinds, index}: one configuration of one atom.

import { dataTable } from "../table.js";

const bracket = (power) => ({
  runs: power === null ? [{ text: "⟨r⟩" }] : [{ text: "⟨r" }, { up: power.replace("-", "\u2212") }, { text: "⟩" }],
  plain: power === null ? "<r>" : `<r^${power}>`, speech: `mean of r${power === null ? "" : ` to the power ${power.replace("-", "minus ")}`}`,
  latex: `$\\langle r${power === null ? "" : `^{${power}}`}\\rangle$`,
});
const ZETA = { runs: [{ text: "ζ" }], plain: "zeta", speech: "zeta", latex: "$\\zeta$" };
const NOT_S = "an s electron has none";

/** The shared-choice id of a subshell. */
export function orbitalId(set, label) {
  return `orbital:${set.index}/${label}`;
}

// One word where all sets agree, a word for each row where they do not.
function kindColumn(sets, path) {
  const [first] = sets;
  return sets.every(({ kinds }) => kinds[path] === first.kinds[path]) ? first.kinds[path] ?? null : ({ set }) => set.kinds[path] ?? "";
}

function table(sets, context, { caption, file, rows, columns, identify = null }) {
  const whose = sets.length > 1 ? [{ name: "of", type: "text", value: ({ set }) => set.plain, rich: ({ set }) => set.short }] : [];
  // The row's own name stands first: it is the column that stays while the table scrolls.
  const [name, ...rest] = columns;
  return dataTable({ caption: sets.length > 1 ? caption : [...caption, " of ", ...sets[0].name], file: `${file} ${sets[0].plain}`, rows, columns: [name, ...whose, ...rest], context, identify });
}

/** Energies, radii and ζ of every subshell. */
export function energiesTable(sets, context) {
  const rows = sets.flatMap((set) => set.block.orbitals.map((row) => ({ ...row, set })));
  const column = (key, name, unit, more = {}) => ({ name, unit, type: "number", kind: kindColumn(sets, `orbitals.${key}`), value: (row) => row[key], ...more });
  const mean = (key, power, unit, more) => column(key, bracket(power).plain, unit, { head: [{ sign: bracket(power) }], ...more });
  return table(sets, context, {
    caption: ["Subshells"], file: "orbitals", rows,
    identify: (row) => orbitalId(row.set, row.label),
    columns: [
      { name: "subshell", type: "text", value: (row) => row.label },
      { name: "electrons", type: "number", value: (row) => row.electrons },
      column("energy", "energy", "hartree"),
      column("r_most_probable", "most probable r", "a0"),
      mean("r", null, "a0"), mean("r2", "2", "a0^2"), mean("r_inv", "-1", "a0^-1"), mean("r_inv2", "-2", "a0^-2"),
      mean("r_inv3", "-3", "a0^-3", { reason: NOT_S }),
      column("zeta", "zeta", "cm-1", { head: [{ sign: ZETA }], reason: NOT_S }),
      column("zeta_central", "zeta, central field", "cm-1", { head: [{ sign: ZETA }, ", central field"], reason: NOT_S }),
    ],
  });
}

/** F^k and G^k among the subshells outside the core. */
export function integralsTable(sets, context) {
  return table(sets, context, {
    caption: ["Slater integrals"], file: "integrals", rows: sets.flatMap((set) => set.block.integrals.map((row) => ({ ...row, set }))),
    columns: [
      { name: "integral", type: "text", value: (row) => row.name, rich: (row) => [integralSign(row.name)] },
      { name: "value", unit: "cm-1", type: "number", kind: kindColumn(sets, "integrals.value"), value: (row) => row.value },
    ],
  });
}

function integralSign(name) {
  const [, letter, k, orbitals] = /^([A-Z])(\d+)(.*)$/.exec(name) ?? [null, name, "", ""];
  return { sign: { runs: [{ text: letter }, { up: k }, { text: orbitals }], plain: name, speech: `${letter} ${k} ${orbitals.replace(/[(),]/g, " ").trim()}`, latex: `$${letter}^{${k}}${orbitals}$` } };
}

/** How each configuration converged, and in the field of which nucleus. */
export function convergenceTable(sets, context) {
  const column = (key, name, unit, value, more = {}) => ({ name, unit, type: "number", kind: key === null ? null : kindColumn(sets, key), value: ({ set: { block } }) => value(block), ...more });
  const closed = "a closed form needs none";
  return table(sets, context, {
    caption: ["Energy, convergence and nucleus"], file: "convergence", rows: sets.map((set) => ({ set })),
    columns: [
      { name: "method", type: "text", value: ({ set }) => set.block.method },
      column("total_energy", "average energy", "hartree", (block) => block.total_energy),
      column("virial_ratio", "virial ratio", null, (block) => block.virial_ratio, { reason: "holds without relativity only" }),
      column(null, "iterations", null, (block) => block.iterations),
      column("residual", "residual", null, (block) => block.residual),
      column(null, "splines", null, (block) => block.mesh?.splines ?? null, { reason: closed }),
      column(null, "points", null, (block) => block.mesh?.points ?? null, { reason: closed }),
      column(null, "mesh ends at", "a0", (block) => block.mesh?.end ?? null, { reason: closed }),
      { name: "nucleus", type: "text", value: ({ set: { block: { nucleus } } }) => `${nucleus.model}, charge ${nucleus.charge}` },
      column(null, "mass number", null, ({ nucleus }) => nucleus.mass_number, { reason: "it plays no part here" }),
      { name: "taken from", type: "text", value: ({ set }) => set.block.nucleus.mass_number_by ?? null },
      column("nucleus.rms_radius", "rms radius", "a0", ({ nucleus }) => nucleus.rms_radius, { reason: "a point has none" }),
    ],
  });
}

/** The residual after each iteration. */
export function historyTable(sets, context) {
  return table(sets, context, {
    caption: ["Residual after each iteration"], file: "history", rows: sets.flatMap((set) => set.block.history.map((row) => ({ ...row, set }))),
    columns: [
      { name: "iteration", type: "number", value: (row) => row.iteration },
      { name: "residual", type: "number", kind: kindColumn(sets, "history.residual"), value: (row) => row.residual },
    ],
  });
}

/** What the core polarisation changed. */
export function polarisationTable(sets, context) {
  const given = sets.filter(({ block }) => block.polarisation);
  const column = (key, name, unit, more = {}) => ({ name, unit, type: "number", kind: kindColumn(given, "polarisation.change"), value: (row) => row[key], ...more });
  return table(given, context, {
    caption: ["Changes by core polarisation"], file: "polarisation",
    rows: given.flatMap((set) => {
      const { change } = set.block.polarisation;
      return [{ label: "average energy", energy: change.total_energy, r: null, zeta: null, set }, ...change.orbitals.map((row) => ({ ...row, set }))];
    }),
    columns: [
      { name: "of what", type: "text", value: (row) => row.label },
      column("energy", "change of energy", "hartree"),
      column("r", "change of <r>", "a0", { head: ["change of ", { sign: bracket(null) }], reason: "of a subshell only" }),
      column("zeta", "change of zeta", "cm-1", { head: ["change of ", { sign: ZETA }], reason: NOT_S }),
    ],
  });
}

/** Dirac's levels of an atom with one electron. */
export function diracTable(sets, context) {
  const alone = sets.filter(({ block }) => block.dirac);
  const column = (key, name, unit) => ({ name, unit, type: "number", kind: kindColumn(alone, "dirac.levels"), value: (row) => row[key] });
  return table(alone, context, {
    caption: ["Levels by Dirac’s equation"], file: "dirac", rows: alone.flatMap((set) => set.block.dirac.levels.map((row) => ({ ...row, set }))),
    columns: [
      { name: "level", type: "text", value: (row) => row.label },
      { name: "j", type: "half", value: (row) => row.j },
      column("energy", "energy, nucleus at rest", "hartree"),
      column("energy_finite_mass", "energy, finite mass", "hartree"),
      column("above_lowest", "above the lowest", "cm-1"),
    ],
  });
}

/** The points of the curves that are on show. */
export function curvesTable(curves, context) {
  return dataTable({
    caption: ["Radial distributions"], file: "radial distributions", context,
    rows: curves.flatMap(({ plain, kind, r, density }) => r.map((radius, i) => ({ plain, kind, r: radius, density: density[i] }))),
    columns: [
      { name: "curve", type: "text", value: (row) => row.plain },
      { name: "r", unit: "a0", type: "number", value: (row) => row.r },
      { name: "P²", unit: "a0^-1", type: "number", kind: curves.every(({ kind }) => kind === curves[0].kind) ? curves[0].kind : (row) => row.kind ?? "", value: (row) => row.density },
    ],
  });
}
