// The chart of the elements: eighteen columns where there is room, the filling ladder where there is
// not; tinted by the open shell or by the ground term, with its words in every cell.

import { element } from "../dom.js";
import { describe, richPlain, richSpeech, runNodes } from "../rich.js";
import { dataTable } from "../table.js";

const TINTS = { open: "open shell", term: "ground term" };
let lastTint = "open";

/**
 * The chart as a node; `pick(symbol)` is called for the element that is pressed, `present()` gives
 * the symbol of the sheet's own element.
 */
export function renderChart(chart, { pick, tint = lastTint, settings, announce, present = () => undefined }) {
  const node = element("div", { class: "chart" });
  const box = element("select", { "aria-label": "Tint by" }, ...Object.entries(TINTS).map(([value, text]) => element("option", { value, text })));
  box.value = tint;
  const columns = element("div", { class: "chart-columns", role: "group", "aria-label": "Chart of the elements, eighteen columns. Arrow keys move." });
  const ladder = element("div", { class: "chart-ladder", role: "group", "aria-label": "Filling ladder of the elements. Arrow keys move." });
  const draw = () => {
    lastTint = box.value;
    fillColumns(columns, chart.cells, box.value, pick, settings);
    fillLadder(ladder, chart.cells, box.value, pick, settings);
    markPresent(node, present());
  };
  box.addEventListener("change", draw);
  walk(columns);
  walk(ladder);
  const tableBox = element("div", { class: "picture-table", hidden: true });
  const tableButton = element("button", { type: "button", class: "word", text: "Show as table", "aria-expanded": "false" });
  tableButton.addEventListener("click", () => {
    if (tableBox.childNodes.length === 0) tableBox.append(chartTable(chart, settings, announce));
    tableBox.hidden = !tableBox.hidden;
    tableButton.setAttribute("aria-expanded", String(!tableBox.hidden));
    tableButton.textContent = tableBox.hidden ? "Show as table" : "Hide the table";
  });
  node.append(element("div", { class: "choices" }, element("label", { class: "choose" }, element("span", { text: "Tint by" }), box), tableButton), columns, ladder, tableBox);
  draw();
  return node;
}

/** Marks the sheet's own element, where Tab enters the chart. */
export function markPresent(chart, symbol) {
  for (const box of chart.querySelectorAll(".chart-columns, .chart-ladder")) {
    for (const cell of box.querySelectorAll('[aria-current="true"]')) cell.removeAttribute("aria-current");
    const own = [...box.querySelectorAll("button.cell")].find((cell) => cell.dataset.symbol === symbol);
    if (own === undefined) continue;
    own.setAttribute("aria-current", "true");
    if (box.contains(document.activeElement)) continue;
    for (const cell of box.querySelectorAll('[tabindex="0"]')) cell.setAttribute("tabindex", "-1");
    own.setAttribute("tabindex", "0");
  }
}

function fillColumns(box, cells, tint, pick, settings) {
  box.replaceChildren(...cells.map((cell) => {
    const button = cellButton(cell, tint, pick, settings);
    button.style.gridRow = String(cell.row);
    button.style.gridColumn = String(cell.column);
    return button;
  }));
  oneStop(box);
}

// One row for each subshell in the order in which subshells fill.
function fillLadder(box, cells, tint, pick, settings) {
  const rows = new Map();
  for (const cell of cells) rows.set(cell.ladder, [...(rows.get(cell.ladder) ?? []), cell]);
  box.replaceChildren(...[...rows].map(([label, own]) => element("div", { class: "ladder-row" },
    element("div", { class: "ladder-label", text: label }),
    element("div", { class: `ladder-cells of-${Math.min(own.length, 14)}` }, ...own.map((cell) => cellButton(cell, tint, pick, settings))))));
  oneStop(box);
}

function cellButton(cell, tint, pick, settings) {
  // The charge leaves this atom no electron.
  if (cell.rich === undefined) return bareCell(cell);
  const term = cell.ground?.find((item) => item.term)?.term ?? null;
  const group = tint === "open" ? openGroup(cell) : term ? term.letter : "";
  const words = tint === "open" ? openRuns(cell) : term ? describe({ term: { ...term, J: null, odd: false, index: null } }).runs : [{ text: "–" }];
  const said = [`${cell.name}, ${cell.Z}`, richSpeech(cell.rich), cell.ground ? groundSpeech(cell.ground) : "ground level not known", cell.source].join(", ");
  return element("button", {
    type: "button", class: `cell tint-${group || "none"}`, "data-symbol": cell.symbol, tabindex: "-1",
    on: { click: () => pick(cell.symbol) },
  }, element("span", { class: "cell-symbol", text: cell.symbol }), element("span", { class: "cell-words" }, ...runNodes(words)),
    element("span", { class: "heard-only", text: ` ${said}` }));
}

// A level that is known by its J only says so in words of its own.
function groundSpeech(ground) {
  return `ground level ${richSpeech(ground)}`.replace("level a level", "level");
}

function bareCell(cell) {
  return element("button", { type: "button", class: "cell tint-none", "data-symbol": cell.symbol, tabindex: "-1", "aria-disabled": "true" },
    element("span", { class: "cell-symbol", text: cell.symbol }), element("span", { class: "cell-words", text: "–" }),
    element("span", { class: "heard-only", text: ` ${cell.name}, ${cell.Z}: no electron is left at this charge` }));
}

// The letter of the open shell, or of the block where all are closed.
function openGroup(cell) {
  const match = /^\d+([a-z])/.exec(cell.open);
  return match ? match[1] : "closed";
}

// The first open subshell, or the outermost one of an atom whose shells are all closed.
function openRuns(cell) {
  const closed = cell.rich.find((item) => item.configuration)?.configuration.subshells.at(-1);
  const match = /^\d+([a-z])(\d*)/.exec(cell.open) ?? (closed ? /^\d+([a-z])(\d*)/.exec(`${closed.label}${closed.electrons}`) : null);
  if (match === null) return [{ text: "–" }];
  const [, letter, electrons] = match;
  return electrons === "" || electrons === "1" ? [{ text: letter }] : [{ text: letter }, { up: electrons }];
}

function oneStop(box) {
  box.querySelector("button")?.setAttribute("tabindex", "0");
}

// Arrows go to the nearest cell in their direction, as it lies on the screen.
function walk(box) {
  box.addEventListener("keydown", (event) => {
    const all = [...box.querySelectorAll("button.cell")];
    const now = event.target.closest("button.cell");
    if (now === null || event.ctrlKey || event.metaKey || event.altKey) return;
    const direction = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] }[event.key];
    const next = event.key === "Home" ? all[0] : event.key === "End" ? all.at(-1) : direction ? nearest(all, now, direction) : null;
    if (next === null || next === undefined) return;
    event.preventDefault();
    now.setAttribute("tabindex", "-1");
    next.setAttribute("tabindex", "0");
    next.focus();
  });
}

function nearest(all, now, [dx, dy]) {
  const middle = (node) => {
    const box = node.getBoundingClientRect();
    return [box.left + box.width / 2, box.top + box.height / 2];
  };
  const [x, y] = middle(now);
  let best = null;
  let least = Infinity;
  for (const node of all) {
    const [cx, cy] = middle(node);
    const along = (cx - x) * dx + (cy - y) * dy;
    const aside = Math.abs((cx - x) * dy) + Math.abs((cy - y) * dx);
    // Along a row only its own cells; from row to row the one that lies nearest above or below.
    const cost = dx !== 0 ? (aside < 4 ? along : Infinity) : along * 4 + aside;
    if (node !== now && along > 4 && cost < least) [best, least] = [node, cost];
  }
  return best;
}

function chartTable(chart, settings, announce) {
  return dataTable({
    caption: chart.charge === 0 ? "Ground configurations and levels of the elements" : `Ground configurations and levels of ions of charge ${chart.charge}`,
    rows: chart.cells, context: { settings: settings ?? {}, announce, choice: { get: () => null, set() {}, subscribe() {} } }, file: `elements charge ${chart.charge}`,
    columns: [
      { name: "Z", type: "number", value: (cell) => cell.Z },
      { name: "symbol", type: "text", value: (cell) => cell.symbol },
      { name: "name", type: "text", value: (cell) => cell.name },
      { name: "configuration", type: "text", value: (cell) => cell.configuration ?? null, rich: (cell) => cell.rich, reason: "no electron is left" },
      { name: "ground level", type: "text", value: (cell) => (cell.ground ? richPlain(cell.ground) : null), rich: (cell) => cell.ground, reason: "no electron is left" },
      { name: "source", type: "text", value: (cell) => cell.source ?? null, reason: "no electron is left" },
    ],
  });
}
