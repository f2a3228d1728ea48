// The shape of the angular part, in section, for a chosen ℓ and |m|.

import { element } from "../dom.js";
import { angularLayout } from "../plot/angular.js";
import { picture } from "../plot/picture.js";
import { tips, turningLayout } from "../plot/turning.js";
import { dataTable } from "../table.js";
import { fold, select } from "./fold.js";

const LETTERS = "spdfghiklmnoqrtuv";

/** A node with the section; `sections(l)` asks the core for those of one ℓ. */
export function shapeNode(found, sections, context) {
  const box = element("div", {});
  const l = select(context, "orbitals:l", "Subshell", found.map((each) => [String(each), LETTERS[each] ?? `ℓ = ${each}`]), fill);
  const place = element("span", {});
  fill();
  return element("div", {}, element("div", { class: "choices" }, l.node, place), box);

  async function fill() {
    const wanted = Number(l.value());
    const answer = await sections(wanted);
    if (answer === null || wanted !== Number(l.value())) return;
    const m = select(context, `orbitals:m-${wanted}`, "|m|", answer.sections.map((section) => [String(section.m), String(section.m)]), draw);
    place.replaceChildren(m.node);
    draw();
    function draw() {
      const section = answer.sections[Number(m.value())];
      const name = `Angular part of ${LETTERS[wanted] ?? `ℓ = ${wanted}`} with |m| = ${section.m}, in section through the axis`;
      box.replaceChildren(picture({
        context, name: [name], zoomable: false, layout: angularLayout({ section, kind: answer.kind }),
        rest: "Distance from the middle is the size of the real spherical harmonic; solid lobes are positive, hatched ones negative.",
        table: () => dataTable({
          caption: [name], context, file: name, rows: section.theta.map((theta, i) => ({ theta, value: section.value[i] })),
          columns: [
            { name: "angle from the axis, once around", unit: "°", type: "number", value: (row) => row.theta },
            { name: "Y", type: "number", kind: answer.kind, value: (row) => row.value },
          ],
        }),
      }).node, fold(context, "orbitals:turning", ["Turning view"], () => turning(section, answer.kind, wanted, context)));
    }
  }
}

// The same in space. It is still until somebody turns it, and on paper it stands as it was left.
function turning(section, kind, l, context) {
  const name = `Angular part of ${LETTERS[l] ?? `ℓ = ${l}`} with |m| = ${section.m}, in space`;
  const turn = slider(context, "orbitals:turn", "Turned about the axis (°)", 355, 30, draw);
  const tip = slider(context, "orbitals:tip", "Axis tipped towards you (°)", 90, 20, draw);
  const layout = () => turningLayout({ section, kind, turn: turn.value(), tip: tip.value() });
  const shown = picture({
    context, name: [name], zoomable: false, layout: layout(),
    table: () => dataTable({
      caption: [name], context, file: name, rows: tips(section),
      columns: [
        { name: "lobe: angle from the axis", unit: "°", type: "number", value: (row) => row.theta },
        { name: "angle around the axis", unit: "°", type: "number", value: (row) => row.phi },
        { name: "Y", type: "number", kind, value: (row) => row.value },
      ],
    }),
    rest: "Distance from the middle is the size of the real spherical harmonic; solid lobes are positive, those drawn in lines negative. The arrow keys go from lobe to lobe.",
  });
  const going = element("button", { type: "button", class: "word", text: "Turn it" });
  let frame = 0;
  let before = 0;
  going.addEventListener("click", () => (frame === 0 ? start() : hold()));
  const still = window.matchMedia("(prefers-reduced-motion: reduce)").matches;
  return [element("div", { class: "choices" }, turn.node, tip.node, still ? null : going), shown.node];

  function draw() {
    shown.redraw({ layout: layout() });
  }
  function start() {
    going.textContent = "Hold it";
    before = performance.now();
    frame = requestAnimationFrame(step);
  }
  function hold() {
    cancelAnimationFrame(frame);
    frame = 0;
    going.textContent = "Turn it";
  }
  function step(now) {
    if (!shown.node.isConnected || shown.node.offsetParent === null) return hold();
    // Once around in twelve seconds; a shape that is round about its axis is tipped instead.
    const degrees = ((now - before) * 30) / 1000;
    if (degrees >= 1) {
      before = now;
      if (section.m === 0) tip.set((tip.value() + degrees) % 90);
      else turn.set((turn.value() + degrees) % 360);
      draw();
    }
    frame = requestAnimationFrame(step);
  }
}

// An angle that is drawn along a line, remembered like a fold.
function slider(context, key, label, most, usual, act) {
  const box = element("input", { type: "range", min: "0", max: String(most), step: "5", value: String(context.view?.get(key) ?? usual) });
  let exact = Number(box.value);
  box.addEventListener("input", () => {
    exact = Number(box.value);
    context.view?.set(key, box.value);
    act();
  });
  return {
    node: element("label", { class: "choose" }, element("span", { text: label }), box),
    value: () => exact,
    set(value) {
      exact = value;
      box.value = String(value);
    },
  };
}
