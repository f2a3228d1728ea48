// Between the fields of a computed map: the cubic that has its values and slopes at both neighbours.

/** The place of `tesla` in a map's uniform fields: {i, t, h} with t from 0 to 1 between i and i + 1. */
export function placeIn(fields, tesla) {
  const last = fields.length - 1;
  if (last < 1) return { i: 0, t: 0, h: 0 };
  const step = (fields[last] - fields[0]) / last;
  const i = Math.min(Math.max(Math.floor((tesla - fields[0]) / step), 0), last - 1);
  const h = fields[i + 1] - fields[i];
  return { i, h, t: Math.min(Math.max((tesla - fields[i]) / h, 0), 1) };
}

/** Cubic Hermite interpolation of values with slopes per tesla. */
export function cubicAt(values, slopes, { i, t, h }) {
  if (values.length < 2) return values[0];
  const s = 1 - t;
  return values[i] * s * s * (1 + 2 * t) + values[i + 1] * t * t * (3 - 2 * t) + h * t * s * (slopes[i] * s - slopes[i + 1] * t);
}

/** The slope of that cubic. */
export function cubicSlopeAt(values, slopes, { i, t, h }) {
  if (values.length < 2 || h === 0) return slopes[0];
  const s = 1 - t;
  return (6 * t * s * (values[i + 1] - values[i])) / h + slopes[i] * s * (1 - 3 * t) + slopes[i + 1] * t * (3 * t - 2);
}

/** Straight between both neighbours: for strengths, which have no slopes. */
export function straightAt(values, { i, t }) {
  return values.length < 2 ? values[0] : values[i] * (1 - t) + values[i + 1] * t;
}
