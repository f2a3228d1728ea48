// The M_L × M_S grid: how many microstates of the open shells have each pair, and the block that one
// term takes out of it.

import { halfValue, trueMinus } from "../digits.js";
import { LABEL } from "./pen.js";

const LEFT = 44;
const TOP = 48;
const LEAST_CELL = 26;
const MOST_CELL = 44;

/** The signs of the grid's two directions, as rich text. */
export const M_L = { sign: { runs: [{ text: "M" }, { down: "L" }], plain: "M_L", speech: "M L", latex: "$M_L$" } };
/** See M_L. */
export const M_S = { sign: { runs: [{ text: "M" }, { down: "S" }], plain: "M_S", speech: "M S", latex: "$M_S$" } };

/**
 * The layout for `picture`. `grid` is {M_L, M_S, counts}; `chosen()` the chosen term {L, S} or null;
 * `idOf(L, S)` the shared-choice id of the term whose corner a cell is, or null.
 */
export function gridLayout({ grid, chosen, idOf }) {
  // M_S grows to the right, M_L upwards.
  const columns = grid.M_S.map((text, i) => ({ text, value: halfValue(text), i })).sort((a, b) => a.value - b.value);
  const rows = grid.M_L.map((value, i) => ({ value: Number(value), i })).sort((a, b) => b.value - a.value);
  return (width) => {
    const cell = Math.min(Math.max(Math.floor((width - LEFT - 2) / columns.length), LEAST_CELL), MOST_CELL);
    const tall = Math.min(cell, 32);
    const needed = LEFT + columns.length * cell + 2;
    const height = TOP + rows.length * tall + 4;
    const at = (r, c) => [LEFT + c * cell, TOP + r * tall];
    return {
      width: Math.max(width, needed),
      height,
      marks: rows.flatMap((row, r) => columns.map((column, c) => {
        const count = grid.counts[row.i][column.i];
        const [x, y] = at(r, c);
        return {
          x: x + 3, y: y + 3, w: cell - 6, h: tall - 6,
          id: row.value >= 0 && column.value >= 0 ? idOf(row.value, column.value) : null,
          reading: [M_L, ` ${trueMinus(row.value)}, `, M_S, ` ${trueMinus(column.text)}: ${count} ${count === 1 ? "microstate" : "microstates"}`],
        };
      })),
      draw(pen) {
        const term = chosen();
        pen.text(LEFT + (columns.length * cell) / 2, 14, M_S.sign.runs, { anchor: "middle", fill: "quiet" });
        pen.text(LEFT - 8, 14, M_L.sign.runs, { anchor: "end", fill: "quiet" });
        columns.forEach((column, c) => pen.text(LEFT + (c + 0.5) * cell, TOP - 8, trueMinus(column.text), { anchor: "middle", fill: "quiet", size: column.text.length > 3 && cell < 32 ? 11 : LABEL }));
        rows.forEach((row, r) => pen.text(LEFT - 8, TOP + (r + 0.5) * tall + 5, trueMinus(row.value), { anchor: "end", fill: "quiet" }));
        rows.forEach((row, r) => columns.forEach((column, c) => {
          const [x, y] = at(r, c);
          const count = grid.counts[row.i][column.i];
          const inside = term !== null && Math.abs(row.value) <= term.L && Math.abs(column.value) <= term.S;
          pen.rect(x, y, cell, tall, { stroke: "hair", fill: inside ? "wash-chosen" : "sheet" });
          pen.text(x + cell / 2, y + tall / 2 + 5, count === 0 ? "·" : String(count), { anchor: "middle", fill: count === 0 ? "quiet" : "ink", size: Math.min(LABEL, (1.6 * cell) / Math.max(String(count).length, 1)) });
        }));
        if (term !== null) frame(pen, rows, columns, term, at, cell, tall);
      },
    };
  };
}

/** Walks the grid in two directions. */
export function gridWalk(columnCount) {
  return (index, key, marks) => {
    const step = { ArrowLeft: -1, ArrowRight: 1, ArrowUp: -columnCount, ArrowDown: columnCount }[key];
    const next = index + step;
    const sameRow = Math.floor(next / columnCount) === Math.floor(index / columnCount);
    if (next < 0 || next >= marks.length || (Math.abs(step) === 1 && !sameRow)) return index;
    return next;
  };
}

// The block of a term: one cell for each of its M_L and M_S.
function frame(pen, rows, columns, { L, S }, at, cell, tall) {
  const r = [rows.findIndex((row) => Math.abs(row.value) <= L), rows.findLastIndex((row) => Math.abs(row.value) <= L)];
  const wanted = (column) => Math.abs(column.value) <= S && Number.isInteger(column.value - S);
  const c = [columns.findIndex(wanted), columns.findLastIndex(wanted)];
  if (r[0] < 0 || c[0] < 0) return;
  const [x, y] = at(r[0], c[0]);
  pen.rect(x, y, (c[1] - c[0] + 1) * cell, (r[1] - r[0] + 1) * tall, { stroke: "rung", width: 3 });
}
