// The stick spectrum: a stick for each line, its height its strength; emission up, absorption down.
// A wedge marks a weak line that rests on cancellation.

import { BOTTOM_AXIS, bottomAxis, linearScale, tickText } from "./axis.js";

const LEFT = 62;
const RIGHT = 24;
const TOP = 34;
/** Powers of ten that a logarithmic height spans. */
export const DECADES = 6;
/** Names of sticks stand at least so far apart. */
const APART = 76;
/** More wedges than this wait until the picture is enlarged. */
const MOST_WEDGES = 60;
const COLOURS = { E1: "s1", M1: "s2", E2: "s3" };
const DASHES = { E1: null, M1: "8 3", E2: "2 3" };

/**
 * The layout for `picture`. `sticks`: [{x, up, down, multipole, weak, id, ids, reading()}] by x, heights from 0;
 * `from`, `to`: ends of the axis; `title`, `height`: runs of the axes' titles; `logarithmic`.
 */
export function stickLayout({ sticks, from, to, title, height: heightTitle, logarithmic }) {
  const most = (side) => sticks.reduce((strongest, stick) => Math.max(strongest, stick[side]), 0);
  const [emitted, absorbed] = [most("up") || 1, most("down")];
  const absorbs = absorbed > 0;
  const part = (value, strongest) => (logarithmic ? Math.max(0, 1 + Math.log10(value / strongest) / DECADES) : value / strongest) || 0;
  return (width, [a, b]) => {
    const tall = Math.round(Math.min(Math.max((width * 6) / 16, 260), 400));
    const bottom = tall - BOTTOM_AXIS;
    const axis = absorbs ? Math.round(TOP + (bottom - TOP) * 0.55) : bottom - 4;
    const [low, high] = [from + a * (to - from), from + b * (to - from)];
    const scale = linearScale(low, high, LEFT, width - RIGHT);
    const up = (stick) => axis - Math.max(part(stick.up, emitted) * (axis - TOP), stick.up > 0 ? 2 : 0);
    const down = (stick) => axis + (absorbs ? part(stick.down, absorbed) : 0) * (bottom - axis - 8);
    return {
      height: tall,
      marks: sticks.map((stick) => {
        const [top, low] = [up(stick), Math.max(down(stick), axis)];
        return {
          x: scale(stick.x) - 3, y: top, w: 6, h: low - top, part: (stick.x - from) / (to - from), id: stick.id, ids: stick.ids,
          // Tens of thousands of readings are not made before somebody walks there.
          get reading() { return stick.reading(); },
        };
      }),
      draw(pen) {
        const shown = sticks.filter(({ x }) => x >= low && x <= high);
        pen.text(8, 16, heightTitle, { fill: "quiet" });
        pen.line(LEFT, TOP, LEFT, absorbs ? bottom - 8 : axis, { stroke: "edge" });
        for (const [share, text] of heights(logarithmic)) {
          pen.line(LEFT - 5, axis - share * (axis - TOP), LEFT, axis - share * (axis - TOP), { stroke: "edge" });
          pen.text(LEFT - 9, axis - share * (axis - TOP) + 4, text, { anchor: "end", fill: "quiet" });
        }
        if (absorbs) pen.line(LEFT, axis, width - RIGHT, axis, { stroke: "edge" });
        const wedges = shown.filter(({ weak }) => weak).length <= MOST_WEDGES;
        for (const stick of shown) {
          const x = scale(stick.x);
          const style = { stroke: COLOURS[stick.multipole] ?? "s1", width: 2, dash: DASHES[stick.multipole] ?? null };
          pen.line(x, axis, x, up(stick), style);
          if (stick.down > 0) pen.line(x, axis, x, down(stick), style);
          if (stick.weak && wedges) pen.polygon([[x - 5, up(stick) - 10], [x + 5, up(stick) - 10], [x, up(stick) - 2]], { fill: "sheet", stroke: "ink", width: 1.5 });
        }
        const decimals = Math.max(0, 2 - Math.floor(Math.log10((high - low) / 10)));
        for (const stick of named(shown, scale, width)) pen.text(scale(stick.x), up(stick) - (stick.weak ? 13 : 5), tickText(stick.x, decimals), { anchor: anchorAt(scale(stick.x), width) });
        if (absorbs) pen.text(LEFT + 6, bottom - 12, "absorbed, strongest = 1", { fill: "quiet", halo: "sheet" });
        bottomAxis(pen, { scale, from: low, to: high, left: LEFT, right: width - RIGHT, y: bottom, title });
      },
    };
  };
}

function heights(logarithmic) {
  return logarithmic ? [1, 2 / 3, 1 / 3, 0].map((share) => [share, [{ text: "10" }, { up: `\u2212${Math.round((1 - share) * DECADES)}`.replace("\u22120", "0") }]]) : [[1, "1"], [0.5, "0.5"], [0, "0"]];
}

function anchorAt(x, width) {
  return x < LEFT + 24 ? "start" : x > width - RIGHT - 24 ? "end" : "middle";
}

// The strongest sticks that have room for a name.
function named(shown, scale, width) {
  const chosen = [];
  const most = Math.floor(width / APART);
  for (const stick of [...shown].sort((a, b) => b.up - a.up)) {
    if (chosen.length >= most || stick.up <= 0) break;
    const x = scale(stick.x);
    if (chosen.every((other) => Math.abs(scale(other.x) - x) >= APART)) chosen.push(stick);
  }
  return chosen;
}
