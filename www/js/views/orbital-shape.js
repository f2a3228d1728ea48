// The shape of the angular part, in section, for a chosen ℓ and |m|.

import { element } from "../dom.js";
import { angularLayout } from "../plot/angular.js";
import { picture } from "../plot/picture.js";
import { dataTable } from "../table.js";
import { select } from "./fold.js";

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
      }).node);
    }
  }
}
