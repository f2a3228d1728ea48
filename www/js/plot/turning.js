// The angular part of an orbital in space: distance from the middle is |Y|, positive lobes are solid,
// negative ones hatched by their lines. What the core gave for the plane of the greatest lobe is
// carried around the axis as cos mφ.

const EDGE = 30;
const RADIANS = Math.PI / 180;
const MOST_ROWS = 45;
const MOST_COLUMNS = 72;

/** The layout for `picture`. `section`: {m, theta (degrees), value}; `turn` and `tip` in degrees. */
export function turningLayout({ section, kind, turn, tip }) {
  const half = upper(section.theta, section.value);
  const skip = Math.ceil((half.length - 1) / MOST_ROWS);
  const rows = half.filter((_, i) => i % skip === 0 || i === half.length - 1);
  const columns = Math.min(MOST_COLUMNS, Math.max(36, 12 * section.m));
  const reach = Math.max(...half.map(([, value]) => Math.abs(value)));
  return (width) => {
    const height = Math.round(Math.min(Math.max(width * 0.7, 240), 360));
    const scale = (Math.min(width, height) / 2 - EDGE) / reach;
    const at = (size, theta, phi) => spot(size * scale, theta, phi, { turn, tip, middle: width / 2, centre: height / 2 });
    return {
      height,
      marks: tips(section).map(({ theta, phi, value }) => {
        const [x, y] = at(Math.abs(value), theta, phi);
        return { x, y, w: 0, h: 0, id: null, reading: [`${theta}° from the axis, ${Math.round(phi)}° around it: Y is `, { number: { text: String(value), unit: null, kind } }] };
      }),
      draw(pen) {
        const end = (theta) => at(reach * 1.12, theta, 0).slice(0, 2);
        pen.line(...end(0), ...end(180), { stroke: "edge" });
        for (const { corners, sign } of faces(rows, columns, section.m, at)) {
          pen.polygon(corners, sign > 0 ? { fill: "s1", stroke: "sheet", width: 0.5 } : { fill: "sheet", stroke: "s2", width: 0.75 });
        }
        // An axis that points at the reader has its end before the shape.
        if (tip < 60) pen.text(end(0)[0] + 8, end(0)[1] + 4, "axis", { fill: "quiet" });
      },
    };
  };
}

// From pole to pole.
function upper(theta, value) {
  return theta.flatMap((angle, i) => (angle <= 180 ? [[angle, value[i]]] : []));
}

// Where a point is seen, and how far behind the picture: turned about the axis, then the axis tipped.
function spot(size, theta, phi, { turn, tip, middle, centre }) {
  const around = (phi + turn) * RADIANS;
  const flat = size * Math.sin(theta * RADIANS);
  const up = size * Math.cos(theta * RADIANS);
  const back = flat * Math.sin(around);
  const [sin, cos] = [Math.sin(tip * RADIANS), Math.cos(tip * RADIANS)];
  return [middle + flat * Math.cos(around), centre - (up * cos + back * sin), back * cos - up * sin];
}

// The surface in small faces, those behind first.
function faces(rows, columns, m, at) {
  const step = 360 / columns;
  const around = Array.from({ length: columns + 1 }, (_, j) => j * step);
  const grid = rows.map(([theta, value]) => around.map((phi) => at(Math.abs(value * Math.cos(m * phi * RADIANS)), theta, phi)));
  const found = [];
  for (let i = 0; i + 1 < rows.length; i += 1) {
    for (let j = 0; j < columns; j += 1) {
      const corners = [grid[i][j], grid[i][j + 1], grid[i + 1][j + 1], grid[i + 1][j]];
      const sign = (rows[i][1] + rows[i + 1][1]) * Math.cos(m * (j + 0.5) * step * RADIANS);
      found.push({ corners: corners.map(([x, y]) => [x, y]), sign, behind: corners.reduce((sum, corner) => sum + corner[2], 0) });
    }
  }
  return found.sort((a, b) => b.behind - a.behind);
}

/** The tips of the lobes: greatest |Y| from pole to pole, at each φ where cos mφ is 1 or −1. */
export function tips({ m, theta, value }) {
  const half = upper(theta, value);
  const size = (i) => Math.abs(half[i]?.[1] ?? 0);
  const greatest = half.flatMap(([angle, height], i) => (size(i) > 0 && size(i) >= size(i - 1) && size(i) > size(i + 1) ? [{ theta: angle, value: height }] : []));
  const places = m === 0 ? [0] : Array.from({ length: 2 * m }, (_, k) => k);
  return greatest.flatMap((tip) => places.map((k) => ({ theta: tip.theta, phi: m === 0 ? 0 : (180 * k) / m, value: k % 2 === 0 ? tip.value : -tip.value })));
}
