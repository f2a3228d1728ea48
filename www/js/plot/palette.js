// Colours of pictures outside the page's style sheet.

/** Ink on white, for files: the light colours of tokens.css, which a test compares. */
export const PAPER = Object.freeze({
  sheet: "#FFFFFF", ink: "#1B2321", quiet: "#4C5753", edge: "#74807B", hair: "#D3D9D4", rung: "#0A5A4A",
  s1: "#1F4FA3", s2: "#A8430A", s3: "#7B2D86", s4: "#596600", "wash-chosen": "#E3EFE9",
});

/** The paint of a token in a file. */
export function paperColour(token) {
  return PAPER[token] ?? PAPER.ink;
}

/** Token → colour as the page shows it around `node`, for canvases. */
export function screenColour(node) {
  const style = getComputedStyle(node);
  // Asked for each of thousands of strokes.
  const found = {};
  return (token) => (found[token] ??= style.getPropertyValue(`--${token}`).trim() || PAPER[token] || PAPER.ink);
}
