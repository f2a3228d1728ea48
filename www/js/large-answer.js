// Reads a large answer piece by piece: a list of a hundred thousand lines would hold up the page.

/** A text up to so many characters is read at once. */
const AT_ONCE = 2_000_000;
/** Characters read without a rest. */
const PIECE = 500_000;
const BEGINNING = '"lines":[';
const END = '}],"refused":';

/** The value of JSON text; its rows of lines are read in pieces, with rests between. */
export async function parseLarge(text) {
  const from = text.length > AT_ONCE ? text.indexOf(BEGINNING) + BEGINNING.length : 0;
  const to = text.indexOf(END, from) + 1;
  if (from < BEGINNING.length || to < 1) return JSON.parse(text);
  const rows = [];
  for (let at = from; at < to;) {
    // Rows hold no groups, so this stands only between two of them.
    const next = text.indexOf("},{", at + PIECE);
    const end = next < 0 || next >= to ? to : next + 1;
    rows.push(...JSON.parse(`[${text.slice(at, end)}]`));
    at = end + 1;
    await new Promise((resolve) => setTimeout(resolve, 0));
  }
  const rest = JSON.parse(text.slice(0, from) + text.slice(to));
  rest.answer.lines = rows;
  return rest;
}
