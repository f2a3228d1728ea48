// Tables: real ones, sortable, with units and kinds in the head, one shared choice, and a copy menu
// that takes all rows.

import { element, freshId } from "./dom.js";
import { columnFormat, columnRuns, fullDigits, halfValue, trueMinus } from "./digits.js";
import { FORMATS, copyText, fileName, saveAs, tableText } from "./export.js";
import { richLatex, richNode, richPlain, runNodes, unitNode } from "./rich.js";
import { rowWindow } from "./table-window.js";

/** Above this many rows only the visible ones are drawn. */
export const DRAW_ALL = 500;

/**
 * A table.
 *
 * `columns`: [{name, head, unit, kind, type, value, rich, long, reason, sort}]
 *   name   plain heading, used in copies; `head` is its rich text when that differs
 *   type   "text" | "half" (half-integers) | "number"
 *   value  row → text or number as it is copied, null when unknown; `rich` row → rich text to show
 *   long   true for columns of sentences, which may take several lines
 *   reason why a value can be unknown: text, or row → text
 *   copied true for columns that are copied but not shown
 *   digits how many digits stand before the point of a usual value: its decimals follow from these and not from the
 *          largest value; "power" for powers of ten
 *   kind   one kind for the column, or row → kind where they differ
 * `identify`: row → id of the shared choice, or null for rows that cannot be chosen.
 * `concerns`: (row, chosen id) → whether what was chosen elsewhere is this row's matter too.
 * `sorting`: {name, direction} of the column by which it is sorted, kept by a caller that builds it anew.
 */
export function dataTable({ caption, columns, rows, identify = null, concerns = () => false, context, file, sorting = {} }) {
  return new DataTable({ caption, columns, rows, identify, concerns, context, file, sorting }).node;
}

class DataTable {
  #caption;
  #columns;
  #shown;
  #rows;
  #order;
  #identify;
  #concerns;
  #context;
  #file;
  #sorted;
  #sorting;
  #active = 0;
  #formats;
  #window = null;
  #body = element("tbody");
  #region;
  #told = element("span", { class: "note told" });
  #heads = [];

  constructor({ caption, columns, rows, identify, concerns, context, file, sorting }) {
    this.#caption = caption;
    this.#columns = columns;
    this.#shown = columns.filter((column) => !column.copied);
    this.#rows = rows;
    this.#order = rows.map((_, i) => i);
    this.#identify = identify;
    this.#concerns = concerns;
    this.#context = context;
    this.#file = file ?? richPlain(caption);
    this.#formats = this.#shown.map((column) => (column.type === "number"
      ? columnFormat(rows.map((row) => column.value(row)).filter((value) => typeof value === "number"), context.settings.digits ?? 17, column.digits)
      : null));
    this.#sorting = sorting;
    this.#sorted = { column: this.#shown.findIndex(({ name }) => name === sorting.name), direction: sorting.direction ?? 0 };
    if (this.#sorted.column < 0) this.#sorted = { column: -1, direction: 0 };
    this.#build();
  }

  #build() {
    const many = this.#rows.length > DRAW_ALL;
    const captionId = freshId("caption");
    const table = element("table", { class: `data${many ? " many" : ""}`, "aria-rowcount": many ? this.#rows.length + 1 : null },
      element("caption", { id: captionId }, element("span", { class: "caption-line" }, richNode(this.#caption, this.#context.settings))),
      element("thead", {}, element("tr", { "aria-rowindex": many ? 1 : null }, ...this.#shown.map((column, i) => this.#head(column, i)))),
      this.#body);
    this.#region = element("div", { class: "table-region", tabindex: "0", role: "region", "aria-labelledby": captionId }, table);
    this.node = element("div", { class: "table" });
    if (many) {
      this.#window = rowWindow({
        region: this.#region, body: this.#body, table, columns: this.#shown, rows: this.#rows,
        makeRow: (place) => this.#row(place), plain: (row, column) => this.#asShown(row, column),
      });
      this.node.append(this.#find());
    }
    this.node.append(this.#region, this.#moreMark(table), element("div", { class: "table-tools" }, this.#copyMenu(), this.#told));
    this.#arrange();
    if (this.#identify) {
      this.#region.addEventListener("keydown", (event) => this.#key(event));
      this.#body.addEventListener("click", (event) => {
        const place = event.target.closest("tr")?.dataset.place;
        if (place !== undefined && document.getSelection().isCollapsed) this.#choose(Number(place));
      });
      this.#context.choice.subscribe(() => this.#markChoice());
    }
  }

  // A table that goes on to the right says so; the words go once its end is in view.
  #moreMark(table) {
    const mark = element("p", { class: "table-more", "aria-hidden": "true", text: "more columns to the right ▸", hidden: true });
    const look = () => {
      const more = this.#region.scrollLeft + this.#region.clientWidth < this.#region.scrollWidth - 2;
      mark.hidden = !more;
      this.node.classList.toggle("moved-on", this.#region.scrollLeft > 0);
      this.node.classList.toggle("goes-on", more);
    };
    // Before a window of rows draws others: looking afterwards would lay the table out twice.
    this.#region.addEventListener("scroll", look, { passive: true, capture: true });
    const observer = new ResizeObserver(look);
    observer.observe(this.#region);
    observer.observe(table);
    return mark;
  }

  // Chosen itself, or concerned by what is.
  #marked(row, id) {
    const chosen = this.#context.choice.get();
    return chosen !== null && (id === chosen || this.#concerns(row, chosen));
  }

  #head(column, i) {
    const kind = typeof column.kind === "string" ? column.kind : null;
    const inside = [column.head ? richNode(column.head, this.#context.settings) : column.name];
    if (column.unit) inside.push(element("wbr"), element("span", { class: "in-unit" }, "\u00a0(", unitNode(column.unit), ")"));
    const button = element("button", { type: "button", class: "sort", on: { click: () => this.#sort(i) } },
      element("span", {}, ...inside), element("span", { class: "sort-mark", "aria-hidden": "true" }));
    const cell = element("th", { scope: "col", class: columnClass(column) }, button);
    if (kind) cell.append(element("span", { class: `kind-word kind-${kind}`, text: kind }));
    this.#heads.push(cell);
    return cell;
  }

  #draw() {
    if (this.#window) this.#window.reset(this.#order.length);
    else this.#body.replaceChildren(...this.#order.map((_, place) => this.#row(place)));
  }

  #row(place) {
    const row = this.#rows[this.#order[place]];
    const id = this.#identify?.(row) ?? null;
    const chosen = id !== null && this.#marked(row, id);
    const cells = this.#shown.map((column, i) => {
      const cell = element(i === 0 ? "th" : "td", {
        scope: i === 0 ? "row" : null,
        class: columnClass(column),
      });
      if (i === 0 && id !== null) cell.append(element("span", { class: "notch", "aria-hidden": "true", text: chosen ? "▸" : "" }));
      cell.append(this.#cell(row, column, i));
      return cell;
    });
    return element("tr", {
      "data-place": place,
      "data-id": id,
      "aria-rowindex": this.#window ? place + 2 : null,
      "aria-current": chosen ? "true" : null,
      tabindex: id === null ? null : place === this.#active ? "0" : "-1",
    }, ...cells);
  }

  #cell(row, column, i) {
    const value = column.value(row);
    if (value === null || value === undefined || value === "") {
      const reason = typeof column.reason === "function" ? column.reason(row) : column.reason;
      return element("span", { class: "unknown", title: reason ?? null, role: "img", "aria-label": reason ? `unknown: ${reason}` : "none", text: "–", "data-plain": "–" });
    }
    if (column.rich) return richNode(column.rich(row), this.#context.settings);
    const kind = typeof column.kind === "function" ? column.kind(row) : column.kind;
    if (typeof value === "number") return this.#digits(columnRuns(value, this.#formats[i]), kind);
    return document.createTextNode(column.type === "half" ? trueMinus(value) : value);
  }

  // What is computed has no line under it, and long tables are drawn faster with fewer nodes.
  #digits(runs, kind) {
    if (this.#window && (!kind || kind === "computed") && runs.length === 1) return document.createTextNode(runs[0].text);
    return element("span", { class: `digits${kind ? ` kind-${kind}` : ""}` }, ...runNodes(runs));
  }

  // The order of the answer comes back with the third press.
  #sort(i) {
    const direction = this.#sorted.column === i ? { 1: -1, [-1]: 0, 0: 1 }[this.#sorted.direction] : 1;
    this.#sorted = { column: direction === 0 ? -1 : i, direction };
    Object.assign(this.#sorting, { name: direction === 0 ? null : this.#shown[i].name, direction });
    this.#arrange();
  }

  #arrange() {
    const { column: sorted, direction } = this.#sorted;
    this.#heads.forEach((head, at) => {
      if (at === sorted) head.setAttribute("aria-sort", direction > 0 ? "ascending" : "descending");
      else head.removeAttribute("aria-sort");
      head.querySelector(".sort-mark").textContent = at === sorted ? (direction > 0 ? " ↑" : " ↓") : "";
    });
    const kept = this.#order[this.#active];
    this.#order = this.#rows.map((_, at) => at);
    if (sorted >= 0) {
      const column = this.#shown[sorted];
      const keys = this.#rows.map((row) => sortKey(column.sort ? column.sort(row) : column.value(row), column.type));
      this.#order.sort((a, b) => direction * compare(keys[a], keys[b]) || a - b);
    }
    this.#active = Math.max(0, this.#order.indexOf(kept));
    this.#draw();
  }

  #key(event) {
    if (event.ctrlKey || event.metaKey || event.altKey || event.target.closest("button, input")) return;
    const last = this.#order.length - 1;
    const steps = { ArrowDown: 1, ArrowUp: -1, PageDown: 10, PageUp: -10, Home: -Infinity, End: Infinity };
    if (event.key in steps) {
      const inside = event.target.closest("tbody") !== null;
      const next = inside ? this.#active + steps[event.key] : event.key === "End" ? last : event.key === "Home" ? 0 : this.#active;
      this.#focusRow(Math.min(Math.max(next, 0), last));
    } else if ((event.key === "Enter" || event.key === " ") && event.target.closest("tbody")) this.#choose(this.#active);
    else return;
    event.preventDefault();
  }

  #focusRow(place) {
    if (this.#order.length === 0) return;
    const before = this.#body.querySelector(`tr[data-place="${this.#active}"]`);
    if (before?.hasAttribute("tabindex")) before.setAttribute("tabindex", "-1");
    this.#active = place;
    this.#window?.show(place);
    const row = this.#body.querySelector(`tr[data-place="${place}"]`);
    row?.setAttribute("tabindex", "0");
    row?.focus({ preventScroll: this.#window !== null });
  }

  #choose(place) {
    const id = this.#identify(this.#rows[this.#order[place]]);
    if (id === null) return;
    this.#focusRow(place);
    this.#context.choice.set(id === this.#context.choice.get() ? null : id);
  }

  #markChoice() {
    const chosen = this.#context.choice.get();
    for (const row of this.#body.querySelectorAll("tr[data-id]")) {
      const marked = this.#marked(this.#rows[this.#order[Number(row.dataset.place)]], row.dataset.id);
      if (marked) row.setAttribute("aria-current", "true");
      else row.removeAttribute("aria-current");
      row.querySelector(".notch").textContent = marked ? "▸" : "";
    }
    // What was chosen elsewhere is brought into view here, within the table only.
    if (this.#window && chosen !== null && !this.#region.contains(document.activeElement)) {
      const place = this.#order.findIndex((at) => this.#marked(this.#rows[at], this.#identify(this.#rows[at])));
      if (place >= 0) this.#window.show(place);
    }
  }

  #plain(row, column) {
    const value = column.value(row);
    return value === null || value === undefined ? "–" : fullDigits(value);
  }

  // As plain as in a copy, but numbers with no more digits than are shown.
  #asShown(row, column) {
    const value = column.value(row);
    if (typeof value !== "number") return this.#plain(row, column);
    return columnRuns(value, this.#formats[this.#shown.indexOf(column)]).map((run) => run.text ?? run.up).join("");
  }

  /** Everything in the table as it is copied: all rows, in the order shown. */
  #sheet() {
    const mixed = this.#columns.map((column) => typeof column.kind === "function");
    const columns = this.#columns.flatMap((column, i) => {
      const own = { name: column.name, latex: column.head ? richLatex(column.head) : null, unit: column.unit, kind: mixed[i] ? null : column.kind, type: column.type };
      return mixed[i] ? [own, { name: `${column.name} kind`, type: "text" }] : [own];
    });
    const rows = this.#order.map((at) => {
      const row = this.#rows[at];
      return this.#columns.flatMap((column, i) => {
        const value = column.value(row);
        const known = value !== null && value !== undefined;
        const cell = {
          text: known ? this.#plain(row, column) : "",
          value: known && typeof value === "number" ? value : undefined,
          latex: known && column.rich ? richLatex(column.rich(row)) : known ? undefined : "--",
        };
        return mixed[i] ? [cell, { text: column.kind(row) ?? "" }] : [cell];
      });
    });
    return { caption: richPlain(this.#caption), columns, rows };
  }

  #copyMenu() {
    const menu = element("details", { class: "copy-menu" });
    const say = (text) => {
      this.#told.textContent = text;
      this.#context.announce?.(text);
    };
    const rowWords = `${this.#rows.length} ${this.#rows.length === 1 ? "row" : "rows"}`;
    const shut = (refocus) => {
      menu.open = false;
      if (refocus) menu.querySelector("summary").focus();
    };
    const copy = async ({ name, label }) => {
      const done = await copyText(tableText(this.#sheet(), name, this.#context.settings.decimalMark ?? "."));
      shut(true);
      say(done ? `Copied ${rowWords} ${label.replace("Copy ", "")}.` : "The browser refuses to copy; Save CSV makes a file instead.");
    };
    menu.append(element("summary", { text: "Copy" }),
      element("div", { class: "copy-list" },
        ...FORMATS.map((format) => element("button", { type: "button", text: format.label, on: { click: () => copy(format) } })),
        element("button", {
          type: "button", text: "Save CSV",
          on: { click: () => {
            saveAs(fileName(this.#file, "csv"), tableText(this.#sheet(), "csv"), "text/csv;charset=utf-8");
            shut(true);
            say(`Saved ${rowWords} as CSV.`);
          } },
        })));
    menu.addEventListener("keydown", (event) => {
      if (event.key !== "Escape" || !menu.open) return;
      event.stopPropagation();
      shut(true);
    });
    return menu;
  }

  // The browser's own search cannot see rows that are not drawn.
  #find() {
    const id = freshId("find");
    const found = element("span", { class: "note" });
    let hits = [];
    let at = -1;
    const box = element("input", { id, type: "text", autocomplete: "off", autocapitalize: "off", spellcheck: "false" });
    const go = (step) => {
      if (hits.length === 0) return;
      at = (at + step + hits.length) % hits.length;
      this.#active = hits[at];
      this.#window.show(hits[at]);
      this.#window.point(hits[at]);
      found.textContent = `${at + 1} of ${hits.length}`;
    };
    const search = () => {
      const wanted = box.value.trim().toLowerCase();
      hits = wanted === "" ? [] : this.#order.flatMap((rowAt, place) => (
        this.#columns.some((column) => this.#plain(this.#rows[rowAt], column).toLowerCase().includes(wanted)) ? [place] : []));
      at = -1;
      found.textContent = wanted === "" ? "" : "not in this table";
      if (hits.length > 0) go(1);
      else this.#window.point(-1);
    };
    box.addEventListener("input", search);
    box.addEventListener("keydown", (event) => {
      if (event.key !== "Enter") return;
      event.preventDefault();
      go(event.shiftKey ? -1 : 1);
      if (hits.length > 0) this.#context.announce?.(`${found.textContent}: ${this.#columns.map((column) => this.#plain(this.#rows[this.#order[hits[at]]], column)).join(", ")}`);
    });
    return element("div", { class: "find" }, element("label", { for: id, text: `Find in ${this.#rows.length} rows` }), box, found);
  }
}

function columnClass({ type, long = false }) {
  if (type === "number" || type === "half") return `${type}-column`;
  return long ? "long-column" : "text-column";
}

function sortKey(value, type) {
  if (value === null || value === undefined) return null;
  return type === "half" ? halfValue(value) : value;
}

const COLLATOR = new Intl.Collator("en", { numeric: true });

// Unknown values stand last in either direction of numbers, first of nothing.
function compare(a, b) {
  if (a === null || b === null) return (a === null) - (b === null);
  if (typeof a === "number" && typeof b === "number") return a - b;
  return COLLATOR.compare(String(a), String(b));
}
