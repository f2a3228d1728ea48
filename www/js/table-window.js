// Draws only those rows of a long table that can be seen.

import { element } from "./dom.js";

// Rows drawn beyond each edge, so that a short scroll shows no gap.
const SPARE = 8;
// How wide typeset text is, as part of the same text spelled out.
const NARROW = 0.85;
// Until a row has been measured.
const USUAL_HEIGHT = 32;

/** Keeps the visible rows of `body` drawn while `region` scrolls. */
export function rowWindow({ region, body, table, columns, rows, makeRow, plain }) {
  let count = 0;
  let height = USUAL_HEIGHT;
  let first = -1;
  let last = -1;
  let pointed = -1;
  const above = spacer(columns.length);
  const below = spacer(columns.length);
  region.classList.add("windowed");
  body.before(above.node);
  body.after(below.node);
  const lengths = lengthsOf(columns, rows, plain);
  table.prepend(element("colgroup", {}, ...lengths.map((length) => {
    const col = element("col");
    col.style.width = `${length.toFixed(1)}ch`;
    return col;
  })));
  // With a width of its own the table is laid out by its columns, not by what is in them.
  table.style.width = `${lengths.reduce((sum, length) => sum + length, 0).toFixed(1)}ch`;
  // A caption has to be the first child of its table.
  table.prepend(table.querySelector("caption"));

  const draw = (anew = false) => {
    const view = region.clientHeight || 600;
    const from = Math.max(0, Math.floor(region.scrollTop / height) - SPARE);
    const to = Math.min(count, Math.ceil((region.scrollTop + view) / height) + SPARE);
    if (!anew && from === first && to === last) return;
    const held = body.contains(document.activeElement) ? document.activeElement.dataset.place : undefined;
    const rowsOf = (start, end) => Array.from({ length: Math.max(end - start, 0) }, (_, i) => makeRow(start + i));
    if (anew || from >= last || to <= first) body.replaceChildren(...rowsOf(from, to));
    else {
      // Rows that stay in view stay as they are.
      for (let place = first; place < from; place += 1) body.firstElementChild.remove();
      for (let place = last; place > to; place -= 1) body.lastElementChild.remove();
      body.prepend(...rowsOf(from, first));
      body.append(...rowsOf(last, to));
    }
    [first, last] = [from, to];
    above.set(from * height);
    below.set((count - to) * height);
    if (pointed >= 0) body.querySelector(`tr[data-place="${pointed}"]`)?.classList.add("found");
    // The focused row may have been scrolled away: its table keeps the focus then.
    if (held !== undefined) (body.querySelector(`tr[data-place="${held}"]`) ?? region).focus({ preventScroll: true });
  };
  const measure = () => {
    const row = body.querySelector("tr");
    const found = row?.getBoundingClientRect().height;
    if (found && Math.abs(found - height) > 0.1) {
      height = found;
      draw(true);
    }
  };
  region.addEventListener("scroll", () => draw(), { passive: true });
  new ResizeObserver(() => {
    measure();
    draw();
  }).observe(region);

  return {
    reset(rowCount) {
      count = rowCount;
      pointed = -1;
      draw(true);
    },
    /** Scrolls so that the row can be seen. */
    show(place) {
      const head = table.tHead.getBoundingClientRect().height;
      const top = place * height;
      const room = region.clientHeight - head - height;
      if (top < region.scrollTop) region.scrollTop = top;
      else if (top > region.scrollTop + room) region.scrollTop = top - Math.max(room, 0) + height;
      draw();
    },
    /** Marks the row that was searched for; none for −1. */
    point(place) {
      pointed = place;
      draw(true);
    },
  };
}

function spacer(columns) {
  const cell = element("td", { colspan: columns });
  const node = element("tbody", { class: "spacer", "aria-hidden": "true" }, element("tr", {}, cell));
  return {
    node,
    set(height) {
      node.hidden = height <= 0;
      cell.style.height = `${Math.max(height, 0)}px`;
    },
  };
}

// Of numbers with equal decimals the largest and the smallest are the longest.
function outermost(rows, { value }) {
  const known = rows.filter((row) => typeof value(row) === "number");
  const most = (sign) => known.reduce((best, row) => (sign * value(row) > sign * value(best) ? row : best), known[0]);
  return known.length === 0 ? rows.slice(0, 1) : [most(1), most(-1)];
}

// Columns keep their widths while rows come and go: each in characters.
function lengthsOf(columns, rows, plain) {
  return columns.map((column, i) => {
    // Heads break after 14 characters; raised and lowered parts are narrower than their letters.
    let longest = Math.min([...column.name].length, 14) / NARROW;
    for (const row of column.type === "number" ? outermost(rows, column) : rows) longest = Math.max(longest, plain(row, column).length);
    // The first column has the room of the notch besides.
    return Math.min(longest, 60) * (column.rich ? NARROW : 1) + (i === 0 ? 5 : 3);
  });
}
