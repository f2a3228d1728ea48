// The evidence of How does it split?: map and pattern side by side, what is chosen, the tables.

import { scopedChoice } from "../choice.js";
import { trueMinus } from "../digits.js";
import { element } from "../dom.js";
import { fanLayout } from "../plot/fan.js";
import { placeIn } from "../plot/hermite.js";
import { OFFSET_UNITS, SIGNS, VIEWS, patternLayout } from "../plot/pattern.js";
import { picture } from "../plot/picture.js";
import { richNode, richPlain, richRuns, richSpeech } from "../rich.js";
import { facts } from "./chosen.js";
import { FieldMapView } from "./field-map.js";
import { crossingId, kindWords, mapChoices } from "./field-panels.js";
import { fold, pointerWords, select } from "./fold.js";
import { offerNode } from "./levels.js";
import { componentId, idsOfComponent, stateId, stateRich } from "./splitting-names.js";
import {
  componentCrossingsTable, componentsTable, constantsTable, crossingsTable, fieldWords, isotopesTable, lineName, resonancesTable, richOfLevels, seenWords, stateNames, statesTable,
} from "./splitting-tables.js";
import { componentsAt, offsetFactors, viewFactors } from "./sweep-values.js";
import { kindOf } from "./working.js";

/** More states than these make no fan that could be read. */
const FAN = 40;

export class SplittingEvidence {
  #context;
  #sweep;
  #answer = null;
  #settings = {};
  #frame = 0;
  #tables = null;
  #choices = element("div", { class: "choices" });
  #unit = null;
  #view = null;
  #show = null;
  #map;
  #pattern;
  #patternBox = element("div", { class: "pattern-part" });
  #none = element("div", { class: "map-status" });
  #facts = element("div", { class: "splitting-facts" });
  #chosen = element("div", { class: "chosen-one", role: "status" });
  #components = element("div", { class: "components-table" });
  #parts = element("div", { class: "parts" });
  #ruleBox;
  #pairOf = null;
  #levelsOf = null;

  constructor(context) {
    this.#context = context;
    this.#sweep = context.sweep;
    this.#map = new FieldMapView({ sweep: context.sweep, context, toTable: () => this.#toStates() });
    this.#pattern = picture({
      context, name: "", layout: () => ({ height: 0, marks: [], draw() {} }),
      rest: pointerWords("Tap a component; two fingers enlarge.", "Walk over the components with the arrow keys or point at them."),
      tableNear: () => this.#components.querySelector(".table-region")?.focus(),
    });
    this.#patternBox.append(this.#none, this.#pattern.node);
    this.#ruleBox = this.#ruleField();
    this.node = element("div", { class: "evidence-parts splitting-evidence" }, this.#choices,
      element("div", { class: "map-and-pattern" }, this.#map.node, this.#patternBox), this.#facts, this.#chosen, this.#components, this.#parts);
    context.choice.subscribe(() => this.#showChosen());
    context.sweep.subscribe((what) => this.#swept(what));
  }

  /** Another answer: `settings` and `sheet` as they are now. */
  update(answer, { settings, sheet }) {
    this.#answer = answer;
    this.#settings = settings;
    // The pictures keep this very object.
    this.#context.settings = settings;
    this.#makeChoices();
    this.#sweep.answered(answer, sheet);
    this.#drawMap();
    this.#drawPattern();
    this.#fillTables();
    this.#showChosen();
  }

  // Tables are made anew with each answer, and so is what listens for them.
  get #tableContext() {
    return { ...this.#context, settings: this.#settings, choice: this.#tables };
  }

  #swept(what) {
    if (this.#answer === null) return;
    if (what === "run") this.#map.showRun();
    else if (what === "map") {
      this.#makeChoices();
      this.#drawMap();
    } else if (this.#frame === 0) {
      // One frame shows the last of all the steps that came before it.
      this.#frame = requestAnimationFrame(() => {
        this.#frame = 0;
        this.#map.moved();
        this.#drawPattern();
        this.#showRule();
      });
    }
  }

  #makeChoices() {
    const { components, field, nucleus = null, line = null } = this.#answer;
    const known = (key) => components.some((component) => component[key] !== null && component[key] !== undefined);
    const units = Object.entries(OFFSET_UNITS).filter(([key]) => known(key)).map(([key, { label }]) => [key, label]);
    const views = Object.entries(VIEWS).filter(([key]) => known(key)).map(([key, text]) => [key, key === "seen" ? `as in the sheet (${seenWords(field)})` : text]);
    const shows = this.#sweep.map === null ? [] : mapChoices(this.#sweep.map);
    const key = JSON.stringify([units, views, shows]);
    if (this.#choices.dataset.shown === key) return;
    this.#choices.dataset.shown = key;
    // Whoever enters a wavelength asks for shifts of it.
    const usual = line?.wavelength_kind === "entered" ? "pm" : nucleus !== null ? "ghz" : line !== null && line.of && line.of !== "level" ? "offset" : null;
    this.#unit = select(this.#context, "splitting:unit", "Offsets in", units, () => this.#chose(), usual);
    this.#view = select(this.#context, "splitting:view", "Strength seen", views, () => this.#chose());
    this.#show = shows.length > 1 ? select(this.#context, "splitting:map", "Map of", shows, () => this.#drawMap()) : null;
    this.#choices.replaceChildren(...[
      components.length > 0 ? this.#unit.node : null, components.length > 0 ? this.#view.node : null, this.#show?.node, this.#ruleBox.node,
    ].filter(Boolean));
  }

  #chose() {
    this.#drawMap();
    this.#drawPattern();
    this.#fillComponents();
  }

  // The rule by hand: whatever the field of the sheet would take, it takes too.
  #ruleField() {
    const box = element("input", { type: "text", class: "key", autocomplete: "off", autocapitalize: "off", autocorrect: "off", spellcheck: "false", enterkeyhint: "done", "aria-label": "Rule at" });
    const put = () => {
      const text = box.value.trim();
      if (text !== "" && text !== this.#context.store.text("/field/flux_density")) this.#context.setField("/field/flux_density", text, `Field ${text}`);
    };
    box.addEventListener("change", put);
    return { node: element("label", { class: "choose rule-field" }, element("span", { text: "Rule at" }), box), box };
  }

  #showRule() {
    const { box, node } = this.#ruleBox;
    node.hidden = !(this.#sweep.end > 0);
    if (document.activeElement === box) return;
    const text = this.#sweep.at === null ? this.#context.store.text("/field/flux_density") : `~${this.#sweep.textOf(this.#sweep.at)}`;
    if (box.value !== text) box.value = text;
  }

  #drawMap() {
    this.#showRule();
    const { line = null, linear = null, field } = this.#answer;
    const unit = this.#unit?.value() === "ghz" ? "ghz" : "offset";
    const factor = offsetFactors(this.#answer)[unit] ?? 1;
    this.#map.set({
      unit: { name: OFFSET_UNITS[unit].unit, energyFactor: factor, offsetFactor: factor },
      choice: this.#show?.value() ?? "", multipole: line?.multipole ?? null, linearTo: linear?.departs_at ?? null, found: this.#answer, settings: this.#settings,
      name: ["Field map", ...lineName(this.#answer), ` from 0 to ${trueMinus(this.#sweep.textOf(this.#sweep.end))}${field ? "" : ", without field"}`],
    });
  }

  #drawPattern() {
    const { components, field } = this.#answer;
    const empty = components.length === 0;
    this.#pattern.node.hidden = empty;
    this.#none.replaceChildren(...(empty ? this.#noPattern() : []));
    if (empty) return;
    const rough = this.#sweep.at !== null && this.#sweep.map !== null;
    const { unit, view } = { unit: this.#unit.value(), view: this.#view.value() };
    const words = view === "seen" ? seenWords(field) : VIEWS[view];
    this.#pattern.redraw({
      name: ["Pattern", ...lineName(this.#answer), rough ? ` in about ${this.#sweep.textOf(this.#sweep.at)}, ${words}` : ` ${fieldWords(this.#answer)}, ${words}`],
      layout: patternLayout({
        components: rough ? this.#roughComponents() : components, unit, view, viewWords: words, rough,
        levelOf: (label) => this.#levels().get(label) ?? [label], origin: this.#origin(),
        kindOf: (key) => kindOf(this.#answer, `components.${key}`), idsOf: (row) => idsOfComponent(row, this.#answer.line?.multipole ?? "E1"),
      }),
    });
  }

  #levels() {
    if (this.#levelsOf?.answer !== this.#answer) this.#levelsOf = { answer: this.#answer, levels: richOfLevels(this.#answer) };
    return this.#levelsOf.levels;
  }

  // Where offsets count from, by the wavelength that turns them into pm.
  #origin() {
    const nm = this.#answer.line?.wavelength_nm;
    return typeof nm === "number" ? [{ text: "the line without field, " }, ...richRuns([{ number: { text: String(nm), unit: "nm" } }], this.#settings)] : [];
  }

  #noPattern() {
    const alone = this.#answer.states.every(({ configuration }) => configuration === null);
    if (alone) return [element("p", { text: "A level alone has no line; its states and resonance frequencies are in the tables below." })];
    return [element("p", { text: this.#answer.no_components ?? "A line has a pattern; all states of these levels are in the table below." }),
      element("button", { type: "button", class: "action", text: "Choose a line", on: { click: () => this.#context.toField("/line/upper") } })];
  }

  #roughComponents() {
    const { map, at } = this.#sweep;
    if (this.#pairOf?.answer !== this.#answer) this.#pairOf = { answer: this.#answer, factors: offsetFactors(this.#answer), views: viewFactors(this.#answer.components) };
    return componentsAt(map, placeIn(map.tesla, at), at, this.#pairOf.factors, this.#pairOf.views);
  }

  #fillTables() {
    this.#tables?.release();
    this.#tables = scopedChoice(this.#context.choice);
    this.#fillComponents();
    this.#fillFacts();
    const answer = this.#answer;
    const { states = [], crossings = [], component_crossings: meetings = [], resonances = [], isotopes = [], nucleus = null, line = null, field } = answer;
    const upTo = field?.up_to ? ` up to ${this.#sweep.textOf(field.up_to)}` : "";
    const part = (key, title, make) => fold(this.#context, `splitting:${key}`, [title], make);
    this.#parts.replaceChildren(...[
      states.length > 0 && part("states", line === null || line.of !== "level" ? `States, ${states.length}` : "Both levels in the field", () => [this.#fan(), statesTable(answer, this.#tableContext)]),
      part("crossings", `Crossings of levels and clock points${upTo}`, () => (crossings.length === 0
        ? element("p", { text: upTo === "" ? "Without a field nothing crosses." : `No two of these states cross or come near each other${upTo}, and none has a clock point. A higher end of the map looks further.` })
        : [crossingsTable(crossings, answer, this.#tableContext, `Crossings of levels and clock points${upTo}`), leftOut(answer.crossings_left_out)])),
      meetings.length > 0 && part("meetings", "Where components meet", () => [componentCrossingsTable(meetings, answer, this.#tableContext), leftOut(answer.component_crossings_left_out)]),
      resonances.length > 0 && part("resonances", "Resonance frequencies", () => [resonancesTable(answer, this.#tableContext), leftOut(answer.resonances_left_out)]),
      isotopes.length > 0 && part("isotopes", "Isotopes", () => isotopesTable(answer, this.#tableContext)),
      (nucleus?.levels ?? isotopes.flatMap(({ levels }) => levels)).length > 0 && part("nucleus", "Hyperfine constants", () => constantsTable(answer, this.#tableContext)),
    ].filter(Boolean));
  }

  #fillComponents() {
    if (this.#answer.components.length === 0) this.#components.replaceChildren();
    else {
      this.#components.replaceChildren(componentsTable(this.#answer, this.#tableContext, this.#unit.value(), this.#view.value()),
        element("p", { class: "note of-screen", text: "Copies have the offsets in every unit." }));
    }
  }

  #fillFacts() {
    const { line = null, linear = null, diamagnetic = null, estimate = null } = this.#answer;
    const kind = (key) => kindOf(this.#answer, key);
    this.#facts.replaceChildren(...[offerNode(estimate, this.#context.setField)].filter(Boolean), facts({ settings: this.#settings }, [
      ["line without field, in vacuum", line?.wavelength_nm, "nm", kind("line.wavelength_nm")],
      ["g, upper", line?.g_upper, null, kind("line.g_upper")], ["g, lower", line?.g_lower, null, kind("line.g_lower")],
      ["g of the line", line?.g_effective, null, kind("line.g_effective") ?? "computed"],
      ["the linear pattern holds up to", linear?.departs_at, "T", kind("linear.departs_at") ?? "computed"],
      ["largest difference from it here", linear?.largest_difference, "cm-1", kind("linear.largest_difference") ?? "computed"],
      [diamagnetic?.included ? "diamagnetic shift, included" : "diamagnetic shift, left out", diamagnetic?.largest, "cm-1", kind("diamagnetic.largest") ?? "computed"],
    ]));
  }

  #fan() {
    const { line = null, states, components, field } = this.#answer;
    if (line === null || (line.of && line.of !== "level") || states.length > FAN || states.some(({ F }) => F !== null && F !== undefined)) return null;
    const side = (label, rich) => ({ runs: richRuns(rich), plain: richPlain(rich), speech: richSpeech(rich), states: states.filter((state) => state.level === label) });
    const [upper, lower] = [side(line.upper, line.upper_rich), side(line.lower, line.lower_rich)];
    if (upper.states.length === 0 || lower.states.length === 0) return null;
    return picture({
      context: this.#tableContext, zoomable: false, name: ["States", ...lineName(this.#answer), ` ${fieldWords(this.#answer)}`],
      rest: "Each level fans out from its place without field; links are the components.",
      layout: fanLayout({ upper, lower, components, fieldText: field?.text ?? "0", kind: kindOf(this.#answer, "states.shift") }),
      table: () => statesTable(this.#answer, this.#tableContext),
    }).node;
  }

  #toStates() {
    const part = this.#parts.querySelector("details");
    if (part === null) return;
    part.open = true;
    part.querySelector("summary").focus();
  }

  #showChosen() {
    const id = this.#context.choice.get() ?? "";
    const answer = this.#answer;
    if (answer === null) return;
    const state = id.startsWith("state:") ? answer.states?.find((row) => stateId(row) === id) : null;
    const component = id.startsWith("component:") ? answer.components.find((row) => componentId(row) === id) : null;
    const crossing = id.startsWith("crossing:") ? [...(answer.crossings ?? []), ...(answer.component_crossings ?? [])].find((row) => crossingId(row) === id) : null;
    this.#chosen.replaceChildren(...(state ? this.#ofState(state) : component ? this.#ofComponent(component) : crossing ? this.#ofCrossing(crossing) : []));
  }

  #head(rich) {
    return element("p", { class: "chosen-name" }, "▸ ", richNode(rich, this.#settings));
  }

  #ofState(state) {
    const kind = (key) => kindOf(this.#answer, `states.${key}`);
    return [this.#head([...stateRich(state), ` ${fieldWords(this.#answer)}`]), facts({ settings: this.#settings }, [
      ["energy", state.energy, "cm-1", kind("energy")], ["from the level", state.shift, "cm-1", kind("shift")], ["slope", state.slope, "cm-1 T-1", kind("slope")],
    ])];
  }

  #ofComponent(row) {
    const kind = (key) => kindOf(this.#answer, `components.${key}`);
    const end = stateNames(this.#answer);
    return [this.#head([{ sign: SIGNS[row.polarisation] }, ", ", ...end(row.lower), " – ", ...end(row.upper), ` ${fieldWords(this.#answer)}`]), facts({ settings: this.#settings }, [
      ["offset", row.offset, "cm-1", kind("offset")], ["", row.ghz, "GHz", kind("ghz")], ["by the linear pattern", row.linear, "cm-1", kind("linear")],
      ["strength", row.strength, null, kind("strength")], ["seen", row.seen, null, kind("seen")],
    ])];
  }

  #ofCrossing(row) {
    const name = stateNames(this.#answer);
    return [this.#head([`${kindWords(row.kind)}: `, ...name(row.first), ...(row.second ? [" and ", ...name(row.second)] : [])]), facts({ settings: this.#settings }, [
      ["field", row.tesla, "T", "computed"], ["energy", row.energy, "cm-1", "computed"], ["gap", row.gap, "cm-1", "computed"], ["frequency", row.mhz, "MHz", "computed"],
    ]), element("button", { type: "button", class: "action", text: "Put the rule there", on: { click: () => {
      this.#sweep.move(row.tesla);
      this.#sweep.release();
    } } })];
  }
}

// What a bounded table left out, or nothing.
function leftOut(count) {
  return count > 0 ? element("p", { class: "note", text: `${count} more are left out. A line between two levels, or a lower end of the map, has fewer.` }) : null;
}

