// The list of lines: where each stands, how strong it is, and what is to be known of it.

import { dataTable } from "../table.js";
import { MEDIA, mediumWords } from "./line-units.js";
import { isOf, levelColumns, lineId } from "./multiplets.js";
import { kindOf } from "./working.js";

/** Units of S: they differ by multipole. */
const S_UNITS = { E1: "e²a₀²", M1: "μ_B²", E2: "e²a₀⁴" };
const WEAK = "rests on cancellation";
const NO_INDEX = "the index is not known at this wavelength";

// The order in which the list was sorted last outlives its choices and answers.
const sorting = { name: "in vacuum", direction: 1 };

/** `rows`: the lines on show; `filters`: LineFilters. */
export function lineList(rows, { answer, levels, filters, context }) {
  const known = (key) => answer.lines.some((line) => line[key] !== null && line[key] !== undefined);
  const strength = (key, name, unit = null, more = {}) => known(key) && { name, unit, type: "number", kind: kindOf(answer, `lines.${key}`), value: (row) => row[key], ...more };
  const multipoles = new Set(rows.map((line) => line.multipole));
  const kinds = [...new Set(rows.map((line) => line.energy_kind))];
  const kind = kinds.length === 1 ? kinds[0] : (row) => row.energy_kind;
  const inAir = filters.units[filters.unit.value()].wave;
  const place = ({ unit, digits }, name, value, shown) => ({ name, unit, digits, type: "number", kind, value, copied: !shown, reason: NO_INDEX });
  const places = Object.entries(filters.units).flatMap(([key, of]) => {
    const { title, wave, value } = of;
    const shown = key === filters.unit.value();
    if (!wave) return [place(of, title.toLowerCase(), (row) => value(row, "vacuum"), shown || (inAir && key === "cm-1"))];
    return Object.entries(MEDIA).filter(([, { key }]) => known(key)).map(([medium, { key, words }]) => (
      place(of, words, (row) => (typeof row[key] === "number" ? value(row, medium) : null), shown)));
  });
  const total = answer.lines.length;
  return dataTable({
    caption: rows.length === total ? `${total} ${total === 1 ? "line" : "lines"}` : `${rows.length} of ${total} lines`,
    rows, context, file: "lines", sorting,
    columns: [
      ...places.filter(({ copied }) => !copied),
      ...levelColumns(levels),
      { name: "multipole", type: "text", value: (row) => row.multipole },
      strength("A", "A", "s-1", { digits: "power" }), strength("gf", "gf"),
      strength("intensity", "emitted intensity"), strength("absorption", "absorption"), strength("optical_depth", "optical depth"),
      // The usual list stays narrow enough to be seen whole and to scroll fast; a copy has all.
      ...[
        strength("f", "f, absorption"), strength("S", "S", multipoles.size === 1 ? S_UNITS[[...multipoles][0]] : null),
        strength("branching", "branching fraction"), strength("cancellation", "cancellation factor"),
      ].filter(Boolean).map((column) => ({ ...column, copied: !filters.more.value() })),
      { name: "to be known", type: "text", value: (row) => notesOf(row).join("; ") || null },
      ...places.filter(({ copied }) => copied),
    ].filter(Boolean),
    identify: lineId, concerns: (row, chosen) => isOf(levels, row, chosen),
  });
}

/** What a reader of this line has to know. */
export function notesOf(line) {
  return [line.weak ? WEAK : null, line.spin_note].filter(Boolean);
}

/** One line as it is read out: rich text. */
export function lineReading(line, { answer, levels, filters, medium }) {
  const number = (value, unit, kind) => ({ number: { text: String(value), unit, kind } });
  const { unit, wave, value } = filters.units[filters.unit.value()];
  const strength = line[filters.measure];
  return [
    ...levels.get(line.lower).rich, " – ", ...levels.get(line.upper).rich, `, ${line.multipole}: `,
    number(value(line, medium), unit, line.energy_kind), wave ? ` ${mediumWords(line, medium)}` : "",
    ...(typeof strength === "number" ? [`; ${filters.measure} `, number(strength, filters.measure === "A" ? "s-1" : null, kindOf(answer, `lines.${filters.measure}`))] : []),
    ...notesOf(line).map((note) => `; ${note}`),
  ];
}

