// What the fold "Orbitals" shows once it is answered: the picture of the radial functions, their
// tables, the shape of the angular part.

import { element } from "../dom.js";
import { wayButton } from "../fields.js";
import { ALONG, HEIGHTS, MARKERS, radialLayout, radialWalk } from "../plot/radial.js";
import { picture } from "../plot/picture.js";
import { richNode, richPlain } from "../rich.js";
import { tableAndPicture } from "./beside.js";
import { fold, pointerWords, select } from "./fold.js";
import { shapeNode } from "./orbital-shape.js";
import { betweenTables, convergenceTables, curvesTable, diracTable, energiesTable, historyTable, integralsTable, orbitalId, polarisationTable } from "./orbital-tables.js";
import { workingNode } from "./working.js";

/** Where the core polarisation stands in the sheet. */
export const POLARISATION = "/structure/polarisation";

// Every configuration of either atom, in the order in which they are compared; `short` is the name
// that tells them apart.
function setsOf(own, beside) {
  const of = ({ answer }) => [answer, ...answer.configurations].map((block) => {
    const { configuration, orbitals } = block;
    const outer = configuration ? [{ configuration: { core: null, subshells: configuration.subshells } }] : [`n = ${orbitals[0]?.n}`];
    return { species: answer.species, outer, name: [...answer.species, " ", ...(configuration?.rich ?? outer)], block, kinds: answer.kinds };
  });
  const all = [...of(own), ...(beside ? of(beside) : [])];
  const one = all.every(({ species }) => richPlain(species) === richPlain(all[0].species));
  return all.map(({ species, outer, ...set }, index) => ({ ...set, index, plain: richPlain(set.name), short: one ? outer : [...species, " ", ...outer] }));
}

// The curves of the picture door come in the order of the configurations, subshell by subshell.
function curvesOf(sets, own, beside) {
  const all = [...own.curves, ...(beside?.curves ?? [])];
  let at = 0;
  return sets.flatMap((set) => set.block.orbitals.map((orbital) => {
    const curve = all[at];
    at += 1;
    return { ...curve, id: orbitalId(set, orbital.label), set: set.index, outer: isOuter(set, orbital), name: [`${curve.label} of `, ...set.short], plain: `${curve.label} of ${set.plain}`, kind: set.kinds["orbitals.r"] };
  }));
}

function isOuter({ block: { configuration } }, { label }) {
  return configuration === null || configuration.subshells.some((subshell) => subshell.label === label);
}

/** The nodes for the sheet's own atom and, if any, the one beside it. */
export function evidence(own, beside, context) {
  const { answer } = own;
  const sets = setsOf(own, beside);
  const part = (name, title, make) => fold(context, `orbitals:${name}`, [title], make);
  const integrals = sets.reduce((sum, { block }) => sum + block.integrals.length, 0);
  return [
    element("p", { class: "orbitals-say" }, richNode(answer.say, context.settings)),
    ...(answer.cautions ?? []).map((text) => element("p", { class: "caution" }, element("strong", { text: "Caution: " }), text)),
    offerNode(answer.polarisation_offer, context),
    ...radialParts(sets, curvesOf(sets, own, beside), context),
    element("div", { class: "parts" },
      part("shape", "Shape of the angular part", () => shapeNode([...new Set(sets.flatMap(({ block }) => block.orbitals.map(({ l }) => l)))].sort((a, b) => b - a), context.sections, context)),
      integrals > 0 ? part("integrals", `Slater integrals outside the core (${integrals})`, () => integralsTable(sets, context)) : null,
      answer.between.length > 0 ? part("between", `Integrals between the configurations (${answer.between.length})`, () => betweenTables(answer, context)) : null,
      part("convergence", "Energy, convergence and nucleus", () => [...convergenceTables(sets, context), sets.some(({ block }) => block.history.length > 0) ? historyTable(sets, context) : null]),
      sets.some(({ block }) => block.polarisation) ? part("polarisation", "What core polarisation changed", () => polarisationTable(sets, context)) : null,
      sets.some(({ block }) => block.dirac) ? part("dirac", "Levels by Dirac’s equation", () => diracTable(sets, context)) : null,
      part("working", "Working of the orbitals", () => workingNode(answer, context.settings)),
      part("limits", "Limits of the orbitals", () => element("div", { class: "limits" }, element("ul", {}, ...answer.limits.map((text) => element("li", { text }))))),
    ),
  ];
}

// A polarisability that has a source, for the sheet's own first configuration.
function offerNode(offer, { setField }) {
  if (!offer) return "";
  const { alpha, radius, core, source } = offer;
  return element("div", { class: "ways offer" },
    wayButton({ label: `Put in core polarisation: ${alpha}, ${radius}` }, () => setField(POLARISATION, { alpha, radius }, "Put in the core polarisation")),
    element("span", { class: "note", text: `Core ${core}: ${source}; the radius is the mean one of its outermost orbital.` }));
}

const WHICH = { outer: "outside the filled core", core: "of the filled core", all: "all" };

function radialParts(sets, curves, context) {
  const others = sets.slice(1);
  const last = others.at(-1);
  const along = select(context, "orbitals:along", "Distance along", Object.entries(ALONG), redraw);
  const height = select(context, "orbitals:height", "Height", Object.entries(HEIGHTS), redraw);
  const which = select(context, "orbitals:which", "Subshells", Object.entries(WHICH), redraw);
  const noCore = curves.every(({ outer }) => outer);
  const few = others.length < MARKERS.length;
  const versus = others.length === 0 ? null : select(context, "orbitals:versus", "Beside the first", [
    ...(few && others.length > 1 ? [["all", "all others"]] : []), ...others.map((set) => [set.plain, set.plain]), ["none", "none"],
  ].sort(([one], [other]) => (other === last.plain) - (one === last.plain)), redraw);
  // Signs go by the place in the picture, not in the sheet.
  const shownSets = () => [sets[0], ...others.filter((set) => versus.value() === "all" || versus.value() === set.plain)];
  const shownCurves = () => {
    const places = new Map(shownSets().map((set, place) => [set.index, place]));
    const chosen = context.choice.get();
    return curves.filter((curve) => places.has(curve.set) && (noCore || which.value() === "all" || (which.value() === "outer") === curve.outer || curve.id === chosen))
      .map((curve) => ({ ...curve, set: places.get(curve.set) }));
  };
  const key = element("p", { class: "note set-list" });
  const changes = () => {
    const now = shownCurves();
    const shown = now.length > 0 ? now : curves.filter(({ set }) => set === 0);
    return { curves: shown, layout: radialLayout({ curves: shown, along: along.value(), height: height.value(), chosen: context.choice.get }) };
  };
  const name = () => ["Radial distributions of ", ...shownSets().flatMap((set, i) => [...(i > 0 ? [" and "] : []), ...set.name])];
  const list = () => {
    key.replaceChildren(...shownSets().flatMap((set, i) => [i > 0 ? "; " : "", richNode(set.name, context.settings), `: ${MARKERS[i].words}${MARKERS[i].sign ? ` ${MARKERS[i].sign}` : ""}`]));
    key.hidden = others.length === 0;
  };
  let now = changes();
  const pointsBox = element("div", {});
  const shown = picture({
    context, name: name(), layout: now.layout, walk: radialWalk,
    rest: ["Filled tick: most probable radius; hollow tick: mean radius. Left and right go along a curve, up and down to the next; ", pointerWords("a tap", "Enter"), " chooses it."],
    table: () => {
      pointsBox.replaceChildren(curvesTable(now.curves, context));
      return pointsBox;
    },
  });
  function redraw() {
    now = changes();
    list();
    shown.redraw({ layout: now.layout, name: name() });
    if (pointsBox.childElementCount > 0) pointsBox.replaceChildren(curvesTable(now.curves, context));
  }
  context.choice.subscribe(() => {
    now = changes();
    shown.redraw({ layout: now.layout });
  });
  list();
  return [
    element("div", { class: "choices" }, noCore ? null : which.node, versus?.node ?? null, along.node, height.node),
    key,
    tableAndPicture(energiesTable(sets, context), shown.node),
  ];
}
