// Builds nodes. The page's policy refuses markup made from text, so every node is made here.

/**
 * One element. `properties` are attributes, except `text` (its text), `on` (listeners) and values
 * that are true, false or null, which set an empty attribute or none.
 */
export function element(name, properties = {}, ...children) {
  const node = document.createElement(name);
  for (const [key, value] of Object.entries(properties)) {
    if (value === null || value === undefined || value === false) continue;
    if (key === "text") node.textContent = value;
    else if (key === "on") {
      for (const [event, listener] of Object.entries(value)) node.addEventListener(event, listener);
    } else node.setAttribute(key, value === true ? "" : String(value));
  }
  node.append(...children.filter((child) => child !== null && child !== undefined && child !== false));
  return node;
}

/** A button that reads as a word. */
export function wordButton(text, act, properties = {}) {
  return element("button", { type: "button", class: "word", text, on: { click: act }, ...properties });
}

let last = 0;
/** An id that no other element has. */
export function freshId(stem) {
  last += 1;
  return `${stem}-${last}`;
}

/** Replaces the children only where they differ in text, so that a reader's place survives. */
export function setText(node, text) {
  if (node.textContent !== text) node.textContent = text;
}
