// Numbers as they are shown: rounded to the setting, with a true minus; never used for copying.

/** The setting that means "all digits". */
export const ALL_DIGITS = 17;
// A column whose smallest entry would need more decimals than this is shown with powers of ten.
const MOST_SPAN = 1e8;
const MAX_DECIMALS = 12;
// No column is shown with more decimals, so it does not matter how many more there are.
const MOST_NEEDED = 20;

/** A hyphen before a digit becomes U+2212. */
export function trueMinus(text) {
  return String(text).replace(/-(?=[\d.])/g, "\u2212");
}

/** The value of a half-integer's text: 1.5 for "3/2". */
export function halfValue(text) {
  const [whole, two] = String(text).split("/");
  return Number(whole) / (two ? Number(two) : 1);
}

/** The text of a half-integer: "3/2" for 1.5. */
export function halfText(value) {
  return Number.isInteger(value) ? String(value) : `${2 * value}/2`;
}

/** Every digit of a number, with a point and an ASCII minus: what is copied. */
export function fullDigits(value) {
  return typeof value === "number" ? String(value) : String(value ?? "");
}

/** A single number for reading: `digits` significant ones, as runs (see rich.js). */
export function numberRuns(value, digits) {
  const number = Number(value);
  const full = fullDigits(value);
  if (!Number.isFinite(number) || full.trim() === "") return [{ text: full }];
  if (number === 0 || Number.isInteger(number) && Math.abs(number) < 1e9) return [{ text: trueMinus(plainDecimal(full) ? full : String(number)) }];
  const size = Math.abs(number);
  if (size < 1e-4 || size >= 1e9) return powerRuns(number, digits >= ALL_DIGITS ? null : digits - 1);
  if (digits >= ALL_DIGITS) return [{ text: trueMinus(plainDecimal(full) ? full : String(number)) }];
  const places = Math.max(0, digits - 1 - Math.floor(Math.log10(size)));
  const shown = number.toFixed(Math.min(places, 20));
  // Fewer digits than the setting are never filled up: that would claim what nobody said.
  return [{ text: trueMinus(plainDecimal(full) && full.length <= shown.length ? full : shown) }];
}

/**
 * How a column of numbers is shown: {decimals} or {power: decimals}. The largest entry gets
 * `digits` significant digits, the smallest at least two, and none more decimals than it has. `usual`: digits before
 * the point of a value that gets `digits` instead of the largest one; or "power".
 */
export function columnFormat(values, digits, usual = null) {
  let largest = 0;
  let smallest = Infinity;
  let needed = 0;
  for (const value of values) {
    const size = Math.abs(value);
    if (!Number.isFinite(size) || size === 0) continue;
    largest = Math.max(largest, size);
    smallest = Math.min(smallest, size);
    if (needed < MOST_NEEDED) needed = Math.max(needed, decimalsOf(value));
  }
  if (largest === 0) return { decimals: 0 };
  if (usual === "power") return { power: Math.max(digits >= ALL_DIGITS ? 15 : digits - 1, 1) };
  if (usual !== null) return { decimals: digits >= ALL_DIGITS ? Math.min(needed, 20) : Math.min(Math.max(digits - usual, 0), needed) };
  if (largest >= 1e9) return { power: Math.min(needed, digits - 1) };
  const byLargest = digits >= ALL_DIGITS ? needed : Math.max(0, digits - 1 - Math.floor(Math.log10(largest)));
  // Over many powers of ten equal decimals would be mostly zeros.
  if (largest / smallest > MOST_SPAN && digits < ALL_DIGITS) return { power: Math.max(digits - 1, 1) };
  const bySmallest = 1 - Math.floor(Math.log10(smallest));
  const decimals = Math.min(Math.max(byLargest, bySmallest), needed);
  return decimals > MAX_DECIMALS && digits < ALL_DIGITS ? { power: Math.max(digits - 1, 1) } : { decimals: Math.min(decimals, 20) };
}

/** One number of a column, as runs. */
export function columnRuns(value, format) {
  if (format.power !== undefined) return value === 0 ? [{ text: "0" }] : powerRuns(value, format.power);
  const shown = value.toFixed(format.decimals);
  // A zero that came from rounding has no sign.
  return [{ text: trueMinus(Number(shown) === 0 ? shown.replace("-", "") : shown) }];
}

function powerRuns(number, decimals) {
  const [mantissa, exponent] = (decimals === null ? number.toExponential() : number.toExponential(Math.min(Math.max(decimals, 0), 20))).split("e");
  return [{ text: `${trueMinus(mantissa)}\u00a0×\u00a010` }, { up: trueMinus(exponent.replace("+", "")) }];
}

function plainDecimal(text) {
  return /^[-\u2212]?\d+(\.\d+)?$/.test(text);
}

function decimalsOf(value) {
  const [mantissa, exponent] = String(value).split("e");
  const point = mantissa.indexOf(".");
  const own = point < 0 ? 0 : mantissa.length - point - 1;
  return Math.max(0, own - Number(exponent ?? 0));
}
