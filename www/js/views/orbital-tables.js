// Tables of the radial functions: energies and radii, integrals, convergence, polarisation, Dirac's
// levels. A set is {name and short name (rich), plain, block, kinds, index}: one configuration of one atom.

import { dataTable } from "../table.js";

const ZETA = { sign: { runs: [{ text: "ζ" }], plain: "zeta", speech: "zeta", latex: "$\\zeta$" } };
const NOT_S = "an s electron has none";
const CLOSED = "a closed form needs none";

/** The shared-choice id of a subshell. */
export function orbitalId(set, label) {
  return `orbital:${set.index}/${label}`;
}

// ⟨rᵏ⟩ as heading.
function mean(power) {
  const up = power === 1 ? "" : String(power);
  return { sign: {
    runs: up ? [{ text: "⟨r" }, { up: up.replace("-", "\u2212") }, { text: "⟩" }] : [{ text: "⟨r⟩" }],
    plain: up ? `<r^${up}>` : "<r>", speech: `mean of r${up && ` to the power ${up.replace("-", "minus ")}`}`, latex: `$\\langle r${up && `^{${up}}`}\\rangle$`,
  } };
}

// A column of numbers whose kind stands at `path` among the answer's kinds: one word where all sets
// agree, a word for each row where they do not.
function numbers(sets, path, name, unit, value, more = {}) {
  const kind = sets[0]?.kinds[path] ?? null;
  return { name, unit, type: "number", value, kind: sets.every(({ kinds }) => (kinds[path] ?? null) === kind) ? kind : ({ set }) => set.kinds[path] ?? "", ...more };
}

const text = (name, value, rich) => ({ name, type: "text", value, rich });

// The row's own name stands first: it is the column that stays while the table scrolls.
function table(sets, context, caption, file, rowsOf, [name, ...columns], identify = null) {
  const several = sets.length > 1;
  return dataTable({
    caption: several ? [caption] : [`${caption} of `, ...sets[0].name], file: `${file} ${sets[0].plain}`, context, identify,
    rows: sets.flatMap((set) => rowsOf(set.block).map((row) => ({ ...row, set }))),
    columns: [name, ...(several ? [text("of", ({ set }) => set.plain, ({ set }) => set.short)] : []), ...columns],
  });
}

/** Energies, radii and ζ of every subshell. */
export function energiesTable(sets, context) {
  const column = (key, name, unit, more) => numbers(sets, `orbitals.${key}`, name, unit, (row) => row[key], more);
  const power = (key, k, more) => column(key, mean(k).sign.plain, k === 1 ? "a0" : `a0^${k}`, { head: [mean(k)], ...more });
  return table(sets, context, "Subshells", "orbitals", (block) => block.orbitals, [
    text("subshell", (row) => row.label),
    { name: "electrons", type: "number", value: (row) => row.electrons },
    column("energy", "energy", "hartree"), column("r_most_probable", "most probable r", "a0"),
    power("r", 1), power("r2", 2), power("r_inv", -1), power("r_inv2", -2), power("r_inv3", -3, { reason: NOT_S }),
    column("zeta", "zeta", "cm-1", { head: [ZETA], reason: NOT_S }),
    column("zeta_central", "zeta, central field", "cm-1", { head: [ZETA, ", central field"], reason: NOT_S }),
  ], (row) => orbitalId(row.set, row.label));
}

/** F^k and G^k among the subshells outside the core. */
export function integralsTable(sets, context) {
  return table(sets, context, "Slater integrals", "integrals", (block) => block.integrals, [
    text("integral", (row) => row.name, (row) => [integralSign(row.name)]),
    numbers(sets, "integrals.value", "value", "cm-1", (row) => row.value),
  ]);
}

function integralSign(name) {
  const [, letter, k, orbitals] = /^([A-Z])(\d+)(.*)$/.exec(name) ?? [null, name, "", ""];
  return { sign: { runs: [{ text: letter }, { up: k }, { text: orbitals }], plain: name, speech: `${letter} ${k} ${orbitals.replace(/[(),]/g, " ").trim()}`, latex: `$${letter}^{${k}}${orbitals}$` } };
}

/** E1 and E2 integrals between the configurations of the sheet, a table for each. */
export function betweenTables({ between, kinds }, context) {
  return [["E1", "a0"], ["E2", "a0^2"]].map(([multipole, unit]) => {
    const rows = between.filter((row) => row.multipole === multipole);
    const column = (key, name, its = null) => numbers([{ kinds }], `between.${key}`, name, its, (row) => row[key]);
    return rows.length === 0 ? null : dataTable({
      caption: `${multipole} integrals between the configurations`, file: `${multipole} integrals`, rows, context,
      columns: [
        text("integral", (row) => row.name), text("from", (row) => row.lower), text("to", (row) => row.upper),
        column("value", "with overlaps", unit), column("bare", "of the two orbitals alone", unit),
        column("overlap", "overlap of the rest"), column("largest_cross", "largest cross overlap"),
      ],
    });
  });
}

/** How each configuration converged, and in the field of which nucleus: two tables. */
export function convergenceTables(sets, context) {
  const column = (path, name, unit, value, reason = null) => numbers(sets, path, name, unit, value, { reason });
  return [table(sets, context, "Energy and convergence", "convergence", (block) => [block], [
    text("method", (row) => row.method),
    column("total_energy", "average energy", "hartree", (row) => row.total_energy),
    column("virial_ratio", "virial ratio", null, (row) => row.virial_ratio, "holds without relativity only"),
    column("", "iterations", null, (row) => row.iterations),
    column("residual", "residual", null, (row) => row.residual),
    column("", "splines", null, (row) => row.mesh?.splines, CLOSED),
    column("", "points", null, (row) => row.mesh?.points, CLOSED),
    column("", "mesh ends at", "a0", (row) => row.mesh?.end, CLOSED),
  ]), table(sets, context, "Nucleus", "nucleus", (block) => [block], [
    text("model", ({ nucleus }) => nucleus.model),
    column("", "charge", null, ({ nucleus }) => nucleus.charge),
    column("", "mass number", null, ({ nucleus }) => nucleus.mass_number, "it plays no part here"),
    text("taken from", ({ nucleus }) => nucleus.mass_number_by),
    column("nucleus.rms_radius", "rms radius", "a0", ({ nucleus }) => nucleus.rms_radius, "a point has none"),
  ])];
}

/** The residual after each iteration. */
export function historyTable(sets, context) {
  return table(sets, context, "Residual after each iteration", "history", (block) => block.history, [
    { name: "iteration", type: "number", value: (row) => row.iteration },
    numbers(sets, "history.residual", "residual", null, (row) => row.residual),
  ]);
}

/** What the core polarisation changed. */
export function polarisationTable(all, context) {
  const sets = all.filter(({ block }) => block.polarisation);
  const column = (key, name, unit, more) => numbers(sets, "polarisation.change", name, unit, (row) => row[key], more);
  return table(sets, context, "Changes by core polarisation", "polarisation", ({ polarisation: { change } }) => [{ label: "average energy", energy: change.total_energy }, ...change.orbitals], [
    text("of what", (row) => row.label),
    column("energy", "change of energy", "hartree"),
    column("r", "change of <r>", "a0", { head: ["change of ", mean(1)], reason: "of a subshell only" }),
    column("zeta", "change of zeta", "cm-1", { head: ["change of ", ZETA], reason: NOT_S }),
  ]);
}

/** Dirac's levels of an atom with one electron. */
export function diracTable(all, context) {
  const sets = all.filter(({ block }) => block.dirac);
  const column = (key, name, unit) => numbers(sets, "dirac.levels", name, unit, (row) => row[key]);
  return table(sets, context, "Levels by Dirac’s equation", "dirac", (block) => block.dirac.levels, [
    text("level", (row) => row.label), { name: "j", type: "half", value: (row) => row.j },
    column("energy", "energy, nucleus at rest", "hartree"), column("energy_finite_mass", "energy, finite mass", "hartree"), column("above_lowest", "above the lowest", "cm-1"),
  ]);
}

/** The points of the curves that are on show. */
export function curvesTable(curves, context) {
  const sets = curves.map(({ kind }) => ({ kinds: { kind } }));
  return dataTable({
    caption: "Radial distributions", file: "radial distributions", context,
    rows: curves.flatMap(({ plain, r, density }, i) => r.map((radius, k) => ({ plain, r: radius, density: density[k], set: sets[i] }))),
    columns: [
      text("curve", (row) => row.plain), { name: "r", unit: "a0", type: "number", value: (row) => row.r },
      numbers(sets, "kind", "P²", "a0^-1", (row) => row.density),
    ],
  });
}
