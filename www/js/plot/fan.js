// How both levels of a line fan out in the field, and which components join their states.

import { trueMinus } from "../digits.js";
import { LABEL } from "./pen.js";
import { linearScale, tickText } from "./axis.js";
import { SIGNS } from "./pattern.js";

const LEFT = 16;
const LABELS = 52;
const TOP = 34;
const BOTTOM = 46;
const GAP = 48;

/**
 * The layout for `picture`. `upper`, `lower`: {runs, states: [{M, shift}]} with shifts from the
 * level in cm⁻¹; `components` as in the answer; `fieldText` "0.5 T"; `kind` of the energies.
 */
export function fanLayout({ upper, lower, components, fieldText, kind }) {
  const reach = Math.max(...[...upper.states, ...lower.states].map((state) => Math.abs(state.shift)), 0) || 1;
  const ordered = [...components].sort((a, b) => a.offset - b.offset);
  return (width) => {
    const height = Math.round(Math.min(Math.max((width * 9) / 16, 340), 460));
    const part = (height - TOP - BOTTOM - GAP) / 2;
    const bands = [{ ...upper, top: TOP }, { ...lower, top: TOP + part + GAP }];
    const y = bands.map((band) => linearScale(reach, -reach, band.top + 8, band.top + part - 8));
    // A third of the width for the fan, the rest for the components.
    const knee = LEFT + Math.max(70, (width - LEFT - LABELS) * 0.3);
    const right = width - LABELS;
    const slot = (right - knee) / (ordered.length + 1);
    const yOf = (side, M) => y[side](bands[side].states.find((state) => state.M === M)?.shift ?? 0);
    const stateMarks = bands.flatMap((band, side) => band.states.map((state) => ({
      x: right - 2, y: y[side](state.shift) - 6, w: LABELS - 4, h: 12, id: null,
      reading: [{ sign: { runs: band.runs, plain: band.plain, speech: band.speech } }, `, M ${trueMinus(state.M)}: `,
        { number: { text: String(state.shift), unit: "cm-1", kind } }, " from the level without field"],
    })));
    const linkMarks = ordered.map((component, i) => {
      const x = knee + (i + 1) * slot;
      const [y1, y2] = [yOf(1, component.M_lower), yOf(0, component.M_upper)];
      return {
        x: x - 4, w: 8, y: Math.min(y1, y2), h: Math.abs(y2 - y1), id: null,
        reading: [{ sign: SIGNS[component.polarisation] }, `, M ${trueMinus(component.M_lower)} to ${trueMinus(component.M_upper)}: offset `,
          { number: { text: String(component.offset), unit: "cm-1", kind } }],
      };
    });
    return {
      height,
      marks: [...linkMarks, ...stateMarks],
      draw(pen) {
        bands.forEach((band, side) => {
          const middle = y[side](0);
          pen.text(LEFT, band.top - 8, band.runs, { weight: 600 });
          pen.line(LEFT, middle, LEFT + 18, middle, { stroke: "ink", width: 2 });
          let last = -Infinity;
          for (const state of [...band.states].sort((a, b) => b.shift - a.shift)) {
            const level = y[side](state.shift);
            pen.line(LEFT + 18, middle, knee, level, { stroke: "edge" });
            pen.line(knee, level, right, level, { stroke: "ink", width: 1.5 });
            // States that lie too close share the room of one label.
            if (level - last >= LABEL) {
              pen.text(right + 6, level + 4, trueMinus(state.M), { fill: "quiet" });
              last = level;
            }
          }
          pen.text(right + 6, band.top - 8, "M", { fill: "quiet" });
        });
        ordered.forEach((component, i) => {
          const x = knee + (i + 1) * slot;
          const { colour, dash } = SIGNS[component.polarisation];
          const [y1, y2] = [yOf(1, component.M_lower), yOf(0, component.M_upper)];
          pen.line(x, y1, x, y2, { stroke: colour, width: 2, dash });
          pen.circle(x, y1, 3, { fill: colour });
          pen.circle(x, y2, 3, { fill: colour });
          if (slot >= 24) pen.text(x + 5, TOP + part + GAP / 2 + 5, SIGNS[component.polarisation].runs, { fill: colour });
        });
        const axis = height - 26;
        pen.line(LEFT + 18, axis, knee, axis, { stroke: "edge" });
        for (const [x, text] of [[LEFT + 18, "0"], [knee, fieldText]]) {
          pen.line(x, axis, x, axis + 5, { stroke: "edge" });
          pen.text(x, axis + 19, text, { anchor: "middle", fill: "quiet" });
        }
        pen.text(right, axis + 19, `each fan ±${tickText(reach, decimalsFor(reach))}\u00a0cm\u207b\u00b9`, { anchor: "end", fill: "quiet" });
      },
    };
  };
}

function decimalsFor(reach) {
  return Math.max(0, 2 - Math.floor(Math.log10(reach)));
}
