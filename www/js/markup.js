// Builds the nodes of pictures and formulas; `dom.js` builds those of text.

const SVG = "http://www.w3.org/2000/svg";
const MATHML = "http://www.w3.org/1998/Math/MathML";

function build(namespace, name, attributes, children) {
  const node = document.createElementNS(namespace, name);
  for (const [key, value] of Object.entries(attributes)) {
    if (value !== null && value !== undefined) node.setAttribute(key, String(value));
  }
  node.append(...children);
  return node;
}

/** One SVG element with its attributes and children. */
export function svgElement(name, attributes = {}, ...children) {
  return build(SVG, name, attributes, children);
}

/** One MathML element with its attributes and children. */
export function mathElement(name, attributes = {}, ...children) {
  return build(MATHML, name, attributes, children);
}
