// Levels as rungs on an energy rail, in columns; odd parity hollow. Crowded rungs fan out to their
// names with leaders, and share one name where even that has no room. Lines are links between rungs.

import { leftAxis, linearScale } from "./axis.js";
import { LABEL } from "./pen.js";

const LEFT = 74;
const RIGHT = 8;
const TOP = 58;
const BOTTOM = 18;
const RUNG = 28;
const LEADER = 14;
const APART = LABEL + 3;
const STRETCH = LABEL + 6;
/** A name this far from its rung is no longer its name. */
const FARTHEST = 44;
/** Rungs closer than this are drawn as lines. */
const CLOSE = 7;
const THICKEST = 5;
const SIGNS = { E1: { stroke: "s1", dash: null }, M1: { stroke: "s2", dash: "10 4" }, E2: { stroke: "s3", dash: "10 4 2 4" } };

/**
 * The layout for `picture`, zoomed upwards.
 * `columns`: [{head (runs), odd, levels: [{id, ids, energy, runs, group, groupRuns, reading}]}], `least`: pixels that a
 * column needs. Levels of one `group` can share the name `groupRuns`.
 * `links`: [{id, ids, upper, lower (ids of levels), multipole, strength, refused, reading}].
 * `axis`: runs of the axis' title.
 */
export function rungLayout({ columns, least, links, axis }) {
  const energies = columns.flatMap(({ levels }) => levels.map(({ energy }) => energy));
  const [lowest, highest] = [Math.min(...energies), Math.max(...energies)];
  const margin = (highest - lowest || 1) * 0.04;
  const [from, to] = [lowest - margin, highest + margin];
  const place = new Map(columns.flatMap((column, at) => column.levels.map((level) => [level.id, { level, at }])));
  const strongest = Math.max(...links.map((link) => link.strength ?? 0), 0) || 1;
  return (width, [a, b]) => {
    const height = Math.round(Math.min(Math.max((width * 9) / 16, 420), 600));
    const bottom = height - BOTTOM;
    const [low, high] = [from + a * (to - from), from + b * (to - from)];
    const y = linearScale(low, high, bottom, TOP);
    const step = Math.max(least, (width - LEFT - RIGHT) / columns.length);
    const x = (at) => LEFT + 12 + at * step;
    const part = (energy) => (energy - from) / (to - from);
    const inView = ({ energy }) => energy >= low && energy <= high;
    const drawn = links.map((link, i) => segment(link, i, place, x, y, bottom)).filter(Boolean);
    return {
      height,
      width: Math.max(width, Math.ceil(LEFT + RIGHT + columns.length * step)),
      marks: [
        ...columns.flatMap((column, at) => column.levels.map((level) => ({
          x: x(at), y: y(level.energy) - 4, w: RUNG, h: 8, part: part(level.energy), column: at, energy: level.energy,
          id: level.id, ids: level.ids, reading: level.reading,
        }))),
        ...drawn.map(({ link, middle, energy }) => ({
          x: middle[0] - 6, y: middle[1] - 6, w: 12, h: 12, part: part(energy), id: link.id, ids: link.ids, reading: link.reading,
        })),
      ],
      draw(pen) {
        pen.text(8, 16, axis, { fill: "quiet" });
        leftAxis(pen, { scale: y, from: low, to: high, x: LEFT, top: TOP, bottom });
        for (const { link, ends } of drawn) if (ends) drawLink(pen, link, ends, strongest);
        columns.forEach((column, at) => {
          const own = column.levels.filter(inView).map((level) => ({ ...level, y: y(level.energy) })).sort((p, q) => p.y - q.y);
          pen.text(x(at), 34, column.head, { weight: 600 });
          pen.text(x(at), 50, column.odd ? "odd" : "even", { fill: "quiet" });
          own.forEach((level, i) => rung(pen, x(at), level.y, column.odd, crowded(own, i)));
          names(pen, own, x(at) + RUNG, bottom);
        });
        for (const { link, middle, ends } of drawn) if (ends && !link.refused) pen.circle(...middle, 3, { fill: "sheet", stroke: "ink" });
      },
    };
  };
}

/** Up and down within a column, left and right to the nearest level of the next; links stand behind the levels. */
export function walkRungs(at, key, marks) {
  const from = marks[at];
  const step = key === "ArrowRight" || key === "ArrowUp" ? 1 : -1;
  const upright = key === "ArrowUp" || key === "ArrowDown";
  if (from.column === undefined) return at + step;
  let best = at;
  let least = Infinity;
  marks.forEach((mark, i) => {
    if (mark.column === undefined || i === at) return;
    const rise = mark.energy - from.energy;
    const ahead = upright ? mark.column === from.column && (rise === 0 ? i - at : rise) * step > 0 : mark.column === from.column + step;
    if (ahead && Math.abs(rise) < least) [best, least] = [i, Math.abs(rise)];
  });
  return best;
}

// Names that rungs in one stretch of the rail share: that of their term, or how many they are.
function shared(pen, own, x) {
  const stretches = new Map();
  for (const level of own) {
    const at = Math.floor(level.y / STRETCH);
    stretches.set(at, [...(stretches.get(at) ?? []), level]);
  }
  for (const [at, levels] of stretches) {
    const [first, last] = [levels[0].y, levels.at(-1).y];
    const middle = (at + 0.5) * STRETCH;
    if (levels.length === 1) pen.line(x, first, x + LEADER - 3, middle, { stroke: "edge" });
    else pen.polyline([[x + 2, first], [x + 6, first], [x + 6, last], [x + 2, last]], { stroke: "edge" });
    const term = levels.every((level) => level.group === levels[0].group) ? levels[0].groupRuns : null;
    const name = levels.length === 1 ? levels[0].runs : term ?? `${levels.length}\u00a0levels`;
    pen.text(x + LEADER, middle + LABEL / 3, name, { halo: "sheet", fill: term || levels.length === 1 ? "ink" : "quiet" });
  }
}

// From rung to rung, cut at the edges of what is shown.
function segment(link, i, place, x, y, bottom) {
  const [lower, upper] = [place.get(link.lower), place.get(link.upper)];
  if (lower === undefined || upper === undefined) return null;
  // Links that leave one rung, or stay in one column, do not lie on each other.
  const shift = 4 + ((i * 7) % (RUNG - 8));
  const [x1, x2] = [x(lower.at) + shift, x(upper.at) + shift];
  const [y1, y2] = [y(lower.level.energy), y(upper.level.energy)];
  const at = (height) => (y2 === y1 ? x1 : x1 + ((x2 - x1) * (height - y1)) / (y2 - y1));
  const [top, low] = [Math.max(y2, TOP), Math.min(y1, bottom)];
  const energy = (lower.level.energy + upper.level.energy) / 2;
  if (top > low) return { link, ends: null, middle: [(x1 + x2) / 2, (y1 + y2) / 2], energy };
  const middle = top + (low - top) * (link.refused ? 0.4 : 0.5);
  return { link, ends: [at(low), low, at(top), top], middle: [at(middle), middle], energy };
}

function drawLink(pen, link, ends, strongest) {
  if (link.refused) pen.line(...ends, { stroke: "quiet", width: 1.5, dash: "2 5" });
  else pen.line(...ends, { ...(SIGNS[link.multipole] ?? SIGNS.E1), width: Math.max(1, (THICKEST * (link.strength ?? 0)) / strongest) });
}

function crowded(own, i) {
  return own[i + 1]?.y - own[i].y < CLOSE || own[i].y - own[i - 1]?.y < CLOSE;
}

function rung(pen, x, y, odd, thin) {
  if (thin && odd) {
    pen.line(x, y, x + 10, y, { width: 1.5 });
    pen.line(x + RUNG - 10, y, x + RUNG, y, { width: 1.5 });
  } else if (thin) pen.line(x, y, x + RUNG, y, { width: 1.5 });
  else if (odd) pen.rect(x, y - 3, RUNG, 6, { fill: "sheet", stroke: "ink", width: 1.5 });
  else pen.rect(x, y - 2, RUNG, 4, { fill: "ink" });
}

/** Rungs from the top, in groups whose names would touch: [{from, to, top}] with the height of the first name. */
export function fanOut(heights, lowest) {
  const groups = [];
  heights.forEach((height, i) => {
    groups.push({ from: i, to: i, sum: height, top: height });
    // A group that touches the one above joins it, and their names stand around their common middle.
    while (groups.length > 1) {
      const [above, last] = groups.slice(-2);
      if (last.top - above.top >= (above.to - above.from + 1) * APART) break;
      groups.splice(-2, 2, { from: above.from, to: last.to, sum: above.sum + last.sum, top: 0 });
      centre(groups.at(-1), lowest);
    }
  });
  return groups;
}

function centre(group, lowest) {
  const count = group.to - group.from + 1;
  const top = group.sum / count - ((count - 1) * APART) / 2;
  group.top = Math.max(Math.min(top, lowest - (count - 1) * APART), TOP);
}

function names(pen, own, x, bottom) {
  for (const { from, to, top } of fanOut(own.map((level) => level.y), bottom)) {
    const count = to - from + 1;
    const far = own.slice(from, to + 1).some((level, i) => Math.abs(top + i * APART - level.y) > FARTHEST);
    if (far) {
      shared(pen, own.slice(from, to + 1), x);
      continue;
    }
    for (let i = 0; i < count; i += 1) {
      const level = own[from + i];
      const at = top + i * APART;
      pen.line(x, level.y, x + LEADER - 3, at, { stroke: "edge" });
      pen.text(x + LEADER, at + LABEL / 3, level.runs, { halo: "sheet" });
    }
  }
}
