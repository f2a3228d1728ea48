// One multiplet: the levels of both terms as rungs in columns of J, allowed lines as links whose
// thickness is their strength, refused pairs dotted on request.

import { halfText, halfValue } from "../digits.js";
import { LABEL } from "./pen.js";

const LEFT = 96;
const RIGHT = 16;
const RUNG = 28;
const UPPER = 84;
const THICKEST = 9;

/**
 * The layout for `picture`. `title` is runs; `upper` and `lower` are {rich (runs), levels: [{J, label, runs}]}; `links`
 * [{upperJ, lowerJ, strength, multipole, id, ids, reading}]; `refused` [{upperJ, lowerJ, id, reading}].
 * `known`: whether energies are known elsewhere.
 */
export function multipletLayout({ title, upper, lower, links, refused, known }) {
  const values = [...new Set([...upper.levels, ...lower.levels].map((level) => halfValue(level.J)))].sort((a, b) => a - b);
  const strongest = Math.max(...links.map((link) => link.strength ?? 0), 0) || 1;
  return (width) => {
    const height = Math.round(Math.min(Math.max((width * 7) / 16, 300), 400));
    const low = height - 84;
    const step = (width - LEFT - RIGHT) / values.length;
    const x = (J) => LEFT + (values.indexOf(halfValue(J)) + 0.5) * step;
    const rung = Math.min(RUNG, step * 0.8);
    // Links of several multipoles between the same levels run side by side.
    const beside = spreadOf([...links, ...refused]);
    const ends = (link) => {
      const shift = beside(link);
      return [x(link.lowerJ) + shift, low, x(link.upperJ) + shift, UPPER];
    };
    const drawn = [...links.map((link) => ({ ...link, refused: false })), ...refused.map((link) => ({ ...link, refused: true }))];
    return {
      height,
      marks: drawn.map((link) => {
        const [x1, y1, x2, y2] = ends(link);
        const [mx, my] = along(x1, y1, x2, y2, link.refused);
        return { x: mx - 8, y: my - 8, w: 16, h: 16, id: link.id, ids: link.ids, reading: link.reading };
      }),
      draw(pen) {
        pen.text(8, 20, title, { fill: "quiet" });
        for (const link of drawn) {
          const [x1, y1, x2, y2] = ends(link);
          if (link.refused) pen.line(x1, y1, x2, y2, { stroke: "quiet", width: 1.5, dash: "2 5" });
          else {
            const dash = { E1: null, M1: "10 4", E2: "10 4 2 4" }[link.multipole] ?? null;
            pen.line(x1, y1, x2, y2, { stroke: { E1: "s1", M1: "s2", E2: "s3" }[link.multipole] ?? "s1", width: Math.max(1, (THICKEST * (link.strength ?? 0)) / strongest), dash });
          }
        }
        for (const link of drawn.filter((one) => !one.refused)) {
          const [x1, y1, x2, y2] = ends(link);
          pen.circle(...along(x1, y1, x2, y2, false), 3.5, { fill: "sheet", stroke: "ink" });
        }
        for (const [side, y] of [[upper, UPPER], [lower, low]]) {
          pen.text(8, y + 5, side.runs, { weight: 600 });
          for (const level of side.levels) {
            const at = x(level.J);
            // Odd parity is hollow.
            if (side.odd) pen.rect(at - rung / 2, y - 3, rung, 6, { fill: "sheet", stroke: "ink", width: 1.5 });
            else pen.rect(at - rung / 2, y - 2, rung, 4, { fill: "ink" });
            pen.text(at, side === upper ? y - 10 : y + 20, level.runs, { anchor: "middle" });
          }
        }
        const axis = height - 42;
        pen.line(LEFT, axis, width - RIGHT, axis, { stroke: "edge" });
        for (const value of values) {
          const at = LEFT + (values.indexOf(value) + 0.5) * step;
          pen.line(at, axis, at, axis + 5, { stroke: "edge" });
          pen.text(at, axis + 5 + LABEL, halfText(value), { anchor: "middle", fill: "quiet" });
        }
        pen.text((LEFT + width - RIGHT) / 2, height - 6, axisWords(known, width < 420), { anchor: "middle", fill: "quiet" });
      },
    };
  };
}

function axisWords(known, narrow) {
  if (known) return narrow ? "J (not to scale)" : "J; levels are ordered by J, not by their energies";
  return narrow ? "J (energies are not known yet)" : "J; levels are ordered by J, their energies are not known yet";
}

// Where a link's mark sits: off the middle, where links cross, and refused ones apart from allowed.
function along(x1, y1, x2, y2, refused) {
  const part = refused ? 0.6 : 1 / 3;
  return [x1 + (x2 - x1) * part, y1 + (y2 - y1) * part];
}

function spreadOf(links) {
  const groups = new Map();
  for (const link of links) {
    const key = `${link.lowerJ}|${link.upperJ}`;
    groups.set(key, [...(groups.get(key) ?? []), link]);
  }
  const shifts = new Map();
  for (const group of groups.values()) group.forEach((link, i) => shifts.set(link.id, (i - (group.length - 1) / 2) * 8));
  return (link) => shifts.get(link.id) ?? 0;
}
