// Which lines? Levels as rungs, the lines between them, where they stand and how strong they are.

import { element } from "../dom.js";
import { picture } from "../plot/picture.js";
import { rungLayout, walkRungs } from "../plot/rung-diagram.js";
import { stickLayout } from "../plot/sticks.js";
import { richRuns } from "../rich.js";
import { unitOf } from "../spoken.js";
import { correlationNode, levelParts } from "./levels.js";
import { chosenBlock } from "./chosen.js";
import { check, fold, pointerWords, select } from "./fold.js";
import { LineFilters } from "./line-filters.js";
import { lineList, lineReading } from "./line-list.js";
import { MEDIA, mediumOf } from "./line-units.js";
import { Multiplets, idsOf, levelsOf, lineId } from "./multiplets.js";
import { kindOf, workingNode } from "./working.js";

/** Links that are drawn at once: more would be a hatching. */
const LINKS = 14;
const LINKS_OF_LEVEL = 60;
/** Part of the strongest line's height that can be seen. */
const SEEN = 1e-3;
const COLUMNS = { configuration: "configuration", term: "term", J: "J" };
const LEAST_COLUMN = { configuration: 112, term: 96, J: 112 };

/** Evidence and working of an answer to "lines"; `answer.beside.levels` has the levels, where there are energies. */
export function render(answer, context) {
  const levels = answer.beside?.levels ?? null;
  const working = element("div", {}, ...[levels, answer].filter(Boolean).map((each) => workingNode(each, context.settings)));
  if (levels === null) return { evidence: new Multiplets(answer, context).node, working };
  return { evidence: new Lines(answer, levels, context).node, working };
}

const STICK_WORDS = () => pointerWords("Tap a stick; two fingers enlarge.", "Walk from stick to stick with the arrow keys, + enlarges.");

class Lines {
  #answer;
  #whole;
  #context;
  #levels;
  #filters;
  #columns;
  #refused;
  #endsOf;
  #logarithmic;
  #diagram;
  #spectrum;
  #list = element("div", { class: "lines-table" });

  constructor(answer, whole, context) {
    this.#answer = answer;
    this.#whole = whole;
    this.#context = context;
    this.#levels = mergedLevels(answer, whole);
    this.#endsOf = lineEnds(answer.lines);
    this.#filters = new LineFilters(answer, this.#levels, context, () => this.#changed());
    this.#columns = select(context, "lines:columns", "Columns by", Object.entries(COLUMNS), () => this.#drawDiagram());
    this.#refused = answer.refused?.length ? check(context, "lines:refused", "Refused pairs of the chosen level, dotted", () => this.#drawDiagram()) : null;
    this.#logarithmic = check(context, "lines:log", "Heights by powers of ten", () => this.#drawSpectrum());
    const nearList = () => this.#list.querySelector(".table-region")?.focus();
    this.#diagram = picture({
      context, vertical: true, walk: walkRungs, tableNear: () => this.#openLevels(),
      name: "", layout: () => ({ height: 0, marks: [], draw() {} }),
      rest: pointerWords("Tap a level or a line; two fingers enlarge.", "Walk with the arrow keys, + enlarges; draw a band with the mouse to enlarge a part."),
    });
    this.#spectrum = picture({
      context, tableNear: nearList, name: "", layout: () => ({ height: 0, marks: [], draw() {} }),
      rest: STICK_WORDS(),
    });
    this.#changed();
    const details = levelParts(whole, this.#levels, this.#endsOf, context);
    this.#levelsFold = details[0];
    this.node = element("div", { class: "evidence-parts" },
      this.#filters.node,
      element("div", { class: "picture-with-choices" },
        element("div", { class: "choices" }, this.#columns.node, this.#refused?.node), this.#diagram.node),
      correlationNode(whole, context),
      answer.lines.length === 0 ? null : element("div", { class: "picture-with-choices" },
        element("div", { class: "choices" }, this.#logarithmic.node), this.#spectrum.node),
      this.#list,
      chosenBlock({ answer, levels: this.#levels, context }),
      element("div", { class: "parts" }, ...details,
        answer.multiplets?.length || answer.refused?.length
          ? fold(context, "lines:multiplets", ["Multiplets: relative strengths, refused pairs, sum rules"], () => new Multiplets(answer, context).node) : null));
    context.choice.subscribe(() => this.#drawDiagram());
  }

  #levelsFold = null;

  #openLevels() {
    this.#levelsFold.open = true;
    this.#levelsFold.querySelector("summary").focus();
  }

  #changed() {
    this.#drawDiagram();
    this.#drawSpectrum();
    const { rows } = this.#filters;
    this.#list.replaceChildren(rows.length === 0 && this.#answer.lines.length > 0
      ? element("p", { text: `No line passes these choices; ${this.#answer.lines.length} stand outside them.` })
      : lineList(rows, { answer: this.#answer, levels: this.#levels, filters: this.#filters, context: this.#context }));
  }

  #reading(line) {
    return lineReading(line, { answer: this.#answer, levels: this.#levels, filters: this.#filters, medium: mediumOf(this.#context) });
  }

  #drawDiagram() {
    const links = this.#links();
    const by = this.#columns.value();
    this.#diagram.redraw({
      name: ["Levels of ", ...(this.#whole.species ?? []), ", columns by ", by],
      layout: rungLayout({ columns: this.#columnsBy(by), least: LEAST_COLUMN[by], links, axis: [{ text: "Energy above the lowest level (" }, ...unitOf("cm-1").runs, { text: ")" }] }),
    });
  }

  // The chosen line, the lines of the chosen level, or the strongest that are listed.
  #links() {
    const { measure, rows } = this.#filters;
    const chosen = this.#context.choice.get();
    const own = chosen?.startsWith("line:") ? this.#answer.lines.filter((line) => lineId(line) === chosen)
      : chosen === null ? [] : strongest(this.#touching(this.#answer.lines, chosen), measure, LINKS_OF_LEVEL);
    const lines = own.length > 0 ? own : strongest(rows, measure, LINKS);
    const refused = chosen === null || !this.#refused?.value() ? [] : this.#touching(this.#answer.refused, chosen).slice(0, LINKS_OF_LEVEL);
    const link = (line, more) => ({ id: lineId(line), ids: idsOf(this.#levels, line), upper: `level:${line.upper}`, lower: `level:${line.lower}`, multipole: line.multipole, ...more });
    return [
      ...lines.map((line) => link(line, { strength: line[measure], refused: false, reading: this.#reading(line) })),
      ...refused.map((pair) => link(pair, { strength: null, refused: true, reading: [...this.#levels.get(pair.lower).rich, " – ", ...this.#levels.get(pair.upper).rich, `, ${pair.multipole}, refused: ${pair.rule}`] })),
    ];
  }

  // Those of a chosen level or term.
  #touching(lines, chosen) {
    const labels = new Set([...this.#levels.values()].filter(({ label, termId }) => chosen === termId || chosen === `level:${label}`).map(({ label }) => label));
    return lines.filter(({ upper, lower }) => labels.has(upper) || labels.has(lower));
  }

  #columnsBy(by) {
    const groups = new Map();
    for (const level of this.#levels.values()) {
      const odd = level.parity === "odd";
      const key = `${odd ? 1 : 0} ${{ configuration: level.configuration, term: level.termName, J: level.J }[by]}`;
      if (!groups.has(key)) groups.set(key, { key, odd, head: headOf(by, level), levels: [] });
      groups.get(key).levels.push(this.#rung(by, level));
    }
    const lowest = ({ levels }) => Math.min(...levels.map(({ energy }) => energy));
    const order = by === "J" ? (a, b) => a.odd - b.odd || a.key.localeCompare(b.key, "en", { numeric: true }) : (a, b) => a.odd - b.odd || lowest(a) - lowest(b);
    return [...groups.values()].sort(order);
  }

  #rung(by, level) {
    const { term } = level;
    const chosen = this.#context.choice.get() ?? "";
    return {
      id: `level:${level.label}`, ids: [level.termId, ...(this.#endsOf(chosen).includes(level.label) ? [chosen] : [])], energy: level.above_lowest, group: level.termId,
      runs: by === "term" ? [{ text: level.J }] : richRuns([{ term }]), groupRuns: richRuns([{ term: { ...term, J: null } }]),
      reading: [...level.rich, ", above the lowest level ", { number: { text: String(level.above_lowest), unit: "cm-1", kind: level.energy_kind ?? kindOf(this.#whole, "levels.above_lowest") } },
        ...(level.leading ? [`, ${Math.round(level.leading)} % ${level.composition?.[0]?.name ?? ""}`] : [])],
    };
  }

  // A window that narrows the list is the axis; where it is open, the lines in it are.
  #windowEnds(value, medium, sticks) {
    const { window } = this.#answer;
    if (!this.#filters.inWindow?.value() || window.medium !== medium) return null;
    const ends = [window.from, window.to].map((nm) => (nm === null ? null : value({ vacuum_nm: nm, air_nm: nm, medium_nm: nm }, medium)));
    if (!ends.includes(null)) return ends;
    if (sticks.length === 0) return null;
    const [from, to] = [ends[0] ?? extent(sticks)[0], ends[1] ?? extent(sticks)[1]];
    return from < to ? [from, to] : null;
  }

  #drawSpectrum() {
    const { units, unit, measure, rows } = this.#filters;
    const medium = mediumOf(this.#context);
    const { value, title, wave, unit: name } = units[unit.value()];
    const absorbs = measure === "absorption" || measure === "intensity";
    const sticks = rows.map((line) => ({
      x: value(line, medium), up: measure === "absorption" ? 0 : line[measure] ?? 0, down: (absorbs && line.absorption) || 0,
      multipole: line.multipole, weak: line.weak === true, id: lineId(line), ids: idsOf(this.#levels, line), reading: () => this.#reading(line),
    })).filter(({ x }) => typeof x === "number").sort((a, b) => a.x - b.x);
    const [from, to] = (wave && this.#windowEnds(value, medium, sticks)) || extent(sticks);
    const inside = sticks.filter(({ x }) => x >= from && x <= to);
    const beyond = sticks.length - inside.length;
    const words = wave ? `${title} ${MEDIA[medium].words} (` : `${title} (`;
    this.#spectrum.redraw({
      name: ["Stick spectrum of ", ...(this.#whole.species ?? []), `, ${inside.length} lines`],
      rest: `${STICK_WORDS()}${beyond > 0 ? ` Beyond both ends stand ${beyond} lines, each below a thousandth of the strongest.` : ""}`,
      layout: stickLayout({
        sticks: inside, from, to, logarithmic: this.#logarithmic.value(),
        title: [{ text: words }, ...unitOf(name).runs, { text: ")" }], height: [{ text: `${this.#filters.measureBox.words()}, strongest = 1` }],
      }),
    });
  }
}

// Tens of thousands of lines are not sorted to find a few.
function strongest(lines, measure, count) {
  const found = [];
  for (const line of lines) {
    const value = line[measure] ?? 0;
    if (found.length === count && value <= (found.at(-1)[measure] ?? 0)) continue;
    const at = found.findIndex((other) => (other[measure] ?? 0) < value);
    found.splice(at < 0 ? found.length : at, 0, line);
    if (found.length > count) found.pop();
  }
  return found;
}

// Labels of the chosen line's levels, looked for once for each choice.
function lineEnds(lines) {
  let last = { chosen: null, ends: [] };
  return (chosen) => {
    if (last.chosen !== chosen) {
      const line = chosen.startsWith("line:") ? lines.find((each) => lineId(each) === chosen) : undefined;
      last = { chosen, ends: line ? [line.upper, line.lower] : [] };
    }
    return last.ends;
  };
}

// Lines that nobody would see do not stretch the axis.
function extent(sticks) {
  const height = ({ up, down }) => Math.max(up, down);
  const strongest = sticks.reduce((most, stick) => Math.max(most, height(stick)), 0);
  const seen = sticks.filter((stick) => height(stick) >= SEEN * strongest);
  if (seen.length === 0) return [0, 1];
  const [first, last] = [seen[0].x, seen.at(-1).x];
  const margin = (last - first || Math.abs(first) * 0.01 || 1) * 0.03;
  return [first - margin, last + margin];
}

function headOf(by, level) {
  if (by === "configuration") return richRuns(level.rich.filter((item) => item.configuration));
  return by === "J" ? [{ text: `J ${level.J}` }] : richRuns([{ term: { ...level.term, J: null, index: null } }]);
}

// What both answers say of a level, by its label.
function mergedLevels(answer, whole) {
  const named = levelsOf(whole);
  const more = new Map(answer.levels.map((level) => [level.label, level]));
  return new Map(whole.levels.map((level) => [level.label, { ...more.get(level.label), ...level, ...named.get(level.label), termName: level.term }]));
}
