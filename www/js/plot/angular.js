// The angular part of an orbital in section through its axis: distance from the middle is |Y|,
// positive lobes are solid, negative ones hatched.

const EDGE = 34;
const HATCH = 5;

/** The layout for `picture`. `section`: {theta (degrees), value} once around; `kind` of its values. */
export function angularLayout({ section: { theta, value }, kind }) {
  const reach = Math.max(...value.map(Math.abs));
  return (width) => {
    const height = Math.round(Math.min(Math.max(width * 0.7, 240), 360));
    const [middle, centre] = [width / 2, height / 2];
    const scale = (Math.min(width, height) / 2 - EDGE) / reach;
    const spots = theta.map((degrees, i) => {
      const size = Math.abs(value[i]) * scale;
      const angle = (degrees * Math.PI) / 180;
      return [middle + size * Math.sin(angle), centre - size * Math.cos(angle)];
    });
    return {
      height,
      // The last point is the first one again.
      marks: spots.slice(0, -1).map(([x, y], i) => ({
        x, y, w: 0, h: 0, id: null,
        reading: [theta[i] <= 180 ? `${theta[i]}° from the axis: Y is ` : `${360 - theta[i]}° from the axis on the other side: Y is `, { number: { text: String(value[i]), unit: null, kind } }],
      })),
      draw(pen) {
        pen.line(middle, 8, middle, height - 8, { stroke: "edge" });
        pen.text(middle + 24, 16, "axis", { fill: "quiet" });
        pen.line(middle - height / 2 + EDGE / 2, centre, middle + height / 2 - EDGE / 2, centre, { stroke: "hair" });
        const all = lobes(value, spots, [middle, centre]);
        const round = all.length === 1;
        for (const { sign, points } of all) {
          const stroke = sign > 0 ? "s1" : "s2";
          if (sign < 0) for (const line of hatching(points)) pen.line(...line, { stroke });
          pen.polygon(points, { stroke, width: 2, fill: sign > 0 ? stroke : null });
          // The sign stands outside the lobe, beyond its tip.
          const tip = round ? spots[spots.length >> 2] : points.reduce((best, point) => (away(point) > away(best) ? point : best));
          const far = (away(tip) + 14) / away(tip);
          pen.text(middle + (tip[0] - middle) * far + (Math.abs(tip[0] - middle) < 1 ? 10 : 0), centre + (tip[1] - centre) * far + 4, sign > 0 ? "+" : "\u2212", { anchor: "middle", weight: 600 });
        }
      },
    };

    function away([x, y]) {
      return Math.hypot(x - middle, y - centre);
    }
  };
}

// Runs of one sign, each closed through the middle; the first and the last are one where they meet.
function lobes(value, spots, centre) {
  const found = [];
  spots.forEach((spot, i) => {
    const sign = Math.sign(value[i]);
    if (sign === 0) found.push({ sign: 0, points: [] });
    else if (found.at(-1)?.sign === sign) found.at(-1).points.push(spot);
    else found.push({ sign, points: [spot] });
  });
  if (found.length > 1 && found[0].sign === found.at(-1).sign && found[0].sign !== 0) found[0].points.unshift(...found.pop().points);
  const whole = found.filter(({ sign }) => sign !== 0);
  return whole.length === 1 ? whole : whole.map(({ sign, points }) => ({ sign, points: [centre, ...points] }));
}

// Level lines through a polygon.
function hatching(points) {
  const ys = points.map(([, y]) => y);
  const lines = [];
  for (let y = Math.ceil(Math.min(...ys) / HATCH) * HATCH; y < Math.max(...ys); y += HATCH) {
    const crossings = points.flatMap(([x0, y0], i) => {
      const [x1, y1] = points[(i + 1) % points.length];
      return (y0 <= y) === (y1 <= y) ? [] : [x0 + ((y - y0) / (y1 - y0)) * (x1 - x0)];
    }).sort((a, b) => a - b);
    for (let i = 0; i + 1 < crossings.length; i += 2) lines.push([crossings[i], y, crossings[i + 1], y]);
  }
  return lines;
}
