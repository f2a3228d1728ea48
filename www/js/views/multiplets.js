// Every pair of levels, allowed or refused, by which multipole and by which rule; relative strengths.

import { element } from "../dom.js";
import { multipletLayout } from "../plot/multiplet.js";
import { picture } from "../plot/picture.js";
import { richRuns, runNodes } from "../rich.js";
import { dataTable } from "../table.js";
import { tableAndPicture } from "./beside.js";
import { check, fold, select } from "./fold.js";
import { kindOf } from "./working.js";

/** Above this many multiplets the list is cut, and says so; the table still has every line. */
const LISTED = 2000;
const ARROW = " – ";
/** The order of the multipoles: the strongest lines come first. */
const MULTIPOLES = ["E1", "M1", "E2"];

/** The shared-choice id of a line or of a refused pair. */
export function lineId({ lower, upper, multipole }) {
  return `line:${lower}/${upper}/${multipole}`;
}

/** Multiplets as a table, a picture of one, and the rules: `node`. */
export class Multiplets {
  #answer;
  #ordered;
  #context;
  #levels;
  #tableBox = element("div", { class: "lines-table" });
  #pictureNote = element("p", { class: "note", hidden: true });
  #shown = null;

  constructor(answer, context) {
    this.#answer = answer;
    this.#levels = levelsOf(answer);
    this.#context = context;
    const { lines, refused, multiplets } = answer;
    this.#ordered = [...lines].sort((a, b) => rank(a) - rank(b));
    const multipoles = [...new Set(this.#ordered.map((line) => line.multipole))];
    const listed = (multiplets ?? []).filter((one) => one.lines !== 0).slice(0, LISTED);
    this.multipole = select(context, "multiplets:multipole", "Multipole", [["", "all"], ...multipoles.map((name) => [name, name])], () => this.#fill());
    this.multiplet = select(context, "multiplets:multiplet", "Multiplet", [["", "all"], ...listed.map((one) => [`${one.name}|${one.multipole}`, `${dashed(one.name)}, ${one.multipole}`])], () => {
      this.#fill();
      this.#redraw();
    });
    this.dotted = check(context, "multiplets:refused", "Show refused pairs, dotted", () => this.#redraw());
    this.#fill();
    this.node = element("div", { class: "evidence-parts" },
      element("div", { class: "choices" }, this.multipole.node, this.multiplet.node, this.dotted.node),
      Math.max(multiplets?.length ?? 0, answer.multiplets_total ?? 0) > listed.length ? element("p", { class: "note", text: `The list has the first ${listed.length} multiplets with lines.` }) : null,
      tableAndPicture(this.#tableBox, this.#picture(), "picture-stays"),
      element("div", { class: "parts" },
        refused?.length ? fold(context, "lines:refused-table", [`Refused pairs and the rules that refuse them (${refused.length}${answer.refused_total > refused.length ? ` of ${answer.refused_total}` : ""})`], () => this.#refusedTable()) : null,
        multiplets?.length ? fold(context, "lines:sums", ["Sum rules of each multiplet"], () => this.#sums()) : null));
    context.choice.subscribe(() => this.#redraw());
  }

  #fill() {
    const wanted = this.multipole.value();
    const [name, multipole] = this.multiplet.value().split("|");
    const rows = this.#ordered.filter((line) => (wanted === "" || line.multipole === wanted)
      && (name === "" || (line.multiplet === name && line.multipole === multipole)));
    this.#tableBox.replaceChildren(rows.length === 0 && this.#answer.lines.length > 0
      ? element("p", { text: `No line passes both choices; ${this.#answer.lines.length} stand outside them.` })
      : linesTable(rows, this.#answer, this.#levels, this.#context));
  }

  #picture() {
    const first = this.#pictured();
    if (first === null) return null;
    this.#shown = picture({
      context: this.#context, zoomable: false, name: first.name, layout: multipletLayout(first), rest: this.#legend(),
      tableNear: () => this.#tableBox.querySelector(".table-region")?.focus(),
    });
    this.#sayWhich(first);
    return element("div", { class: "picture picture-box" }, this.#pictureNote, this.#shown.node);
  }

  #redraw() {
    if (this.#shown === null) return;
    const now = this.#pictured();
    this.#shown.redraw({ layout: multipletLayout(now), name: now.name, rest: this.#legend() });
    this.#sayWhich(now);
  }

  #legend() {
    return `Links are allowed lines, thicker when stronger: E1 whole, M1 dashed, E2 dash and dot.${this.dotted.value() ? " Refused pairs are dotted." : ""}`;
  }

  // The table may have every multiplet while the picture has room for one.
  #sayWhich({ title }) {
    const pairs = new Set(this.#answer.lines.map((line) => line.multiplet)).size;
    this.#pictureNote.hidden = this.multiplet.value() !== "" || pairs < 2;
    this.#pictureNote.replaceChildren("The picture shows one multiplet of ", String(pairs), ", ", ...runNodes(title), "; choose a line or a multiplet for another.");
  }

  /** The term pair to draw: that of the chosen line, else of the chosen multiplet, else the fullest. */
  #pictured() {
    const { lines, refused = [], multiplets = [] } = this.#answer;
    const chosen = this.#context.choice.get();
    const picked = chosen?.startsWith("line:") ? [...lines, ...refused].find((one) => lineId(one) === chosen) : this.#concerned(chosen);
    const [name, multipole] = this.multiplet.value().split("|");
    const listed = multiplets.find((one) => one.name === name && one.multipole === multipole)
      ?? multiplets.reduce((best, one) => (best === null || weightOf(one) > weightOf(best) ? one : best), null);
    const sample = picked ?? lines.find((line) => line.multiplet === listed?.name && line.multipole === listed?.multipole) ?? lines[0] ?? refused[0];
    return sample === undefined ? null : this.#pair(this.#levels.get(sample.upper), this.#levels.get(sample.lower));
  }

  // A line of the chosen level or term, of the multiplet on show if that has one.
  #concerned(chosen) {
    if (chosen === null) return null;
    const own = this.#ordered.filter((line) => isOf(this.#levels, line, chosen));
    return own.find((line) => line.multiplet === this.multiplet.value().split("|")[0]) ?? own[0] ?? null;
  }

  #pair(upper, lower) {
    const { lines, refused = [] } = this.#answer;
    const within = (one) => this.#levels.get(one.upper).key === upper.key && this.#levels.get(one.lower).key === lower.key;
    const [allowed, forbidden] = [lines.filter(within), refused.filter(within)];
    const side = (which, sample) => {
      const labels = new Set([...allowed, ...forbidden].map((one) => one[which]));
      const runs = (term) => richRuns([{ term }]);
      return {
        odd: sample.term.odd,
        runs: runs({ ...sample.term, J: null }),
        levels: [...labels].map((label) => this.#levels.get(label)).map(({ J, label, term }) => ({ J, label, runs: runs({ ...term, index: null }) })),
      };
    };
    const kind = kindOf(this.#answer, "lines.relative");
    const names = (one) => [...this.#levels.get(one.upper).rich, ARROW, ...this.#levels.get(one.lower).rich, `, ${one.multipole}`];
    const links = allowed.map((line) => ({
      upperJ: line.upper_J, lowerJ: line.lower_J, strength: line.relative, multipole: line.multipole, id: lineId(line), ids: idsOf(this.#levels, line),
      reading: [...names(line), ": relative strength ", { number: { text: String(line.relative), unit: null, kind } }],
    }));
    const dots = this.dotted.value() ? forbidden.map((pair) => ({
      upperJ: pair.upper_J, lowerJ: pair.lower_J, id: lineId(pair), reading: [...names(pair), `, refused: ${pair.rule}`],
    })) : [];
    const name = [...lower.termRich, ARROW, ...upper.termRich];
    return { known: lines.some((line) => typeof line.wavenumber === "number"), upper: side("upper", upper), lower: side("lower", lower), links, refused: dots, title: richRuns(name), name: ["Multiplet ", ...name] };
  }

  #refusedTable() {
    const { refused } = this.#answer;
    return dataTable({
      caption: "Refused pairs", rows: refused, context: this.#context, file: "refused pairs",
      columns: [
        ...levelColumns(this.#levels),
        { name: "multipole", type: "text", value: (row) => row.multipole },
        { name: "standing", type: "text", value: (row) => (row.rigorous ? "rigorous" : "approximate") },
        { name: "rule", type: "text", long: true, value: (row) => row.rule },
      ],
      identify: lineId, concerns: (row, chosen) => isOf(this.#levels, row, chosen),
    });
  }

  #sums() {
    const names = multipletNames(this.#answer);
    const rows = this.#answer.multiplets.flatMap((one) => ["lower", "upper"].flatMap((side) => (one[`${side}_sums`] ?? []).map((sum) => ({ ...sum, side, one }))));
    return dataTable({
      caption: "Strengths summed over the lines that share a level, and what the sum rule expects", rows, context: this.#context, file: "sum rules",
      columns: [
        { name: "multiplet", type: "text", value: (row) => `${dashed(row.one.name)}, ${row.one.multipole}`, rich: (row) => [...(names.get(row.one.name) ?? [row.one.name]), `, ${row.one.multipole}`] },
        { name: "level", type: "text", value: (row) => row.side },
        { name: "J", type: "half", value: (row) => row.J },
        { name: "sum", type: "number", kind: kindOf(this.#answer, "multiplets.sum"), value: (row) => row.sum },
        { name: "expected", type: "number", kind: "exact", value: (row) => row.expected },
      ],
    });
  }
}

function linesTable(rows, answer, levels, context) {
  const names = multipletNames(answer);
  const missing = "needs energies, which are not computed yet";
  const known = (key) => rows.some((row) => row[key] !== null && row[key] !== undefined);
  const number = (key, name, unit) => known(key) && { name, unit, type: "number", kind: kindOf(answer, `lines.${key}`), value: (row) => row[key], reason: missing };
  return dataTable({
    caption: `${rows.length} ${rows.length === 1 ? "line" : "lines"} allowed`, rows, context, file: "lines",
    columns: [
      ...levelColumns(levels),
      { name: "relative strength", type: "number", kind: kindOf(answer, "lines.relative"), value: (row) => row.relative, reason: "only lines of one multiplet are compared" },
      { name: "multipole", type: "text", value: (row) => row.multipole },
      { name: "multiplet", type: "text", value: (row) => row.multiplet && dashed(row.multiplet), rich: (row) => names.get(row.multiplet) ?? row.multiplet, reason: "it belongs to no one multiplet" },
      number("wavenumber", "wavenumber", "cm-1"), number("vacuum_nm", "in vacuum", "nm"), number("air_nm", "in air", "nm"), number("S", "S"), number("gf", "gf"), number("A", "A"),
    ].filter(Boolean),
    identify: lineId, concerns: (row, chosen) => isOf(levels, row, chosen),
  });
}

/** The shared-choice ids of a line's levels and of their terms. */
export function idsOf(levels, { upper, lower }) {
  return [upper, lower].flatMap((label) => [`level:${label}`, levels.get(label).termId]);
}

/** Whether what is chosen is one of the line's levels or terms. */
export function isOf(levels, line, chosen) {
  return (chosen.startsWith("level:") || chosen.startsWith("term:")) && idsOf(levels, line).includes(chosen);
}

function rank({ multipole }) {
  const place = MULTIPOLES.indexOf(multipole);
  return place < 0 ? MULTIPOLES.length : place;
}

// Between two terms stands a dash, not a minus.
function dashed(name) {
  return name.replace(" - ", ARROW);
}

/** Each multiplet's name as rich text. */
function multipletNames({ multiplets = [] }) {
  return new Map(multiplets.filter((one) => one.lower_rich?.length).map((one) => [one.name, [...one.lower_rich, ARROW, ...one.upper_rich]]));
}

// The multiplet shown first: an E1 one if there is any, and the fullest.
function weightOf({ multipole, lines }) {
  return lines + (multipole === "E1" ? 1e9 : 0);
}

/** Each level of the answer: label → {label, rich, J, term, termRich, termId, key}; `key` is the same for all levels of one term. */
export function levelsOf({ levels }) {
  return new Map(levels.map(({ label, rich, J, configuration, term: name }) => {
    const { term } = rich.findLast((item) => item.term);
    const termRich = rich.map((item) => (item.term ? { term: { ...item.term, J: null } } : item));
    return [label, { label, rich, J, term, termRich, termId: `term:${configuration}/${name}#${term.index ?? 1}`, key: `${configuration} ${name} ${term.index ?? ""}` }];
  }));
}

/** Upper and lower level of a row. */
export function levelColumns(levels) {
  return ["upper", "lower"].map((side) => ({ name: side, type: "text", value: (row) => row[side], rich: (row) => levels.get(row[side]).rich }));
}
