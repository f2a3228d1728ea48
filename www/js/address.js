// The sheet in the address: "#v=1&species=Fe+I&configurations.0=3d6+4s2".
//
// One entry for each text of the sheet, its place written with points. A value that is not a text
// is JSON behind a tilde; a text that begins with a tilde has it doubled.

/** The longest address; beyond it the sheet is shared as a file. */
export const MAX_ADDRESS = 4000;
/** What comes first in an address and what last, so that the atom can be read at its start. */
const FIRST = ["species", "configurations"];
const LAST = ["title", "note"];
/** No sheet of version 1 is deeper. */
const MAX_DEPTH = 8;

/** The fragment for a sheet, or null when it would be too long. */
export function toAddress(sheet) {
  const parts = [];
  const add = (path, value) => {
    if (value !== null && typeof value === "object" && Object.keys(value).length > 0 && path.length < MAX_DEPTH) {
      for (const [key, item] of path.length === 0 ? inOrder(value) : Object.entries(value)) add([...path, key], item);
    } else if (path.length > 0) {
      const text = typeof value === "string" ? value.replace(/^~/, "~~") : `~${JSON.stringify(value)}`;
      parts.push(`${path.map(escapeKey).join(".")}=${escapeText(text)}`);
    }
  };
  add([], sheet);
  const version = typeof sheet.rungline === "number" ? sheet.rungline : 1;
  const address = `#${[`v=${version}`, ...parts].join("&")}`;
  return address.length <= MAX_ADDRESS ? address : null;
}

/**
 * The sheet in a fragment: {sheet}, {nothing: true} when the fragment holds none, or
 * {fault: {message, bound}}.
 */
export function fromAddress(fragment) {
  if (!/^#v=/.test(fragment)) return { nothing: true };
  if (fragment.length > MAX_ADDRESS) {
    return { fault: {
      message: `The address has ${fragment.length} characters.`,
      bound: `An address holds a sheet of at most ${MAX_ADDRESS} characters; longer sheets travel as files.`,
    } };
  }
  const [version, ...parts] = fragment.slice(1).split("&");
  if (version !== "v=1") {
    return { fault: {
      message: `The address says version ${version.slice(2, 22)}.`,
      bound: "This program reads version 1.",
    } };
  }
  const sheet = { rungline: 1 };
  for (const part of parts) {
    if (part === "") continue;
    const at = part.indexOf("=");
    const keys = at < 0 ? null : part.slice(0, at).split(".").map(unescape);
    let value = at < 0 ? null : unescape(part.slice(at + 1));
    if (keys === null || value === null || keys.includes(null) || keys.includes("") || keys.length > MAX_DEPTH) {
      return { fault: unreadable(part) };
    }
    if (value.startsWith("~~")) value = value.slice(1);
    else if (value.startsWith("~")) {
      try {
        value = JSON.parse(value.slice(1));
      } catch {
        return { fault: unreadable(part) };
      }
    }
    if (!place(sheet, keys, value)) return { fault: unreadable(part) };
  }
  return { sheet: listed(sheet) };
}

/** Whether two sheets have the same address, or failing that the same text. */
export function sameSheet(one, other) {
  const address = toAddress(one);
  return address !== null ? address === toAddress(other) : JSON.stringify(one) === JSON.stringify(other);
}

function inOrder(sheet) {
  const middle = Object.keys(sheet).filter((key) => key !== "rungline" && !FIRST.includes(key) && !LAST.includes(key));
  return [...FIRST, ...middle, ...LAST].filter((key) => Object.hasOwn(sheet, key)).map((key) => [key, sheet[key]]);
}

function unreadable(part) {
  return {
    message: `The address has a part that cannot be read: "${part.slice(0, 60)}".`,
    bound: "Each part is a place in the sheet, an equals sign and its text, as in species=Fe+I.",
  };
}

function escapeText(text) {
  // Half a character, as an interrupted input method may leave it, has no place in an address.
  return encodeURIComponent(text.replace(/\p{Surrogate}/gu, "\uFFFD")).replace(/%20/g, "+").replace(/%2C/g, ",").replace(/%2F/g, "/")
    .replace(/%3A/g, ":").replace(/%5B/g, "[").replace(/%5D/g, "]").replace(/%3D/g, "=").replace(/%40/g, "@");
}

function escapeKey(key) {
  return escapeText(key).replace(/=/g, "%3D").replace(/\./g, "%2E");
}

function unescape(text) {
  try {
    return decodeURIComponent(text.replace(/\+/g, " "));
  } catch {
    return null;
  }
}

function place(sheet, keys, value) {
  let group = sheet;
  for (const key of keys.slice(0, -1)) {
    if (!Object.hasOwn(group, key)) define(group, key, {});
    group = group[key];
    if (group === null || typeof group !== "object") return false;
  }
  const name = keys.at(-1);
  if (Object.hasOwn(group, name)) return false;
  define(group, name, value);
  return true;
}

function define(group, key, value) {
  Object.defineProperty(group, key, { value, writable: true, enumerable: true, configurable: true });
}

// Groups whose keys are 0, 1, 2 … are lists.
function listed(value) {
  if (value === null || typeof value !== "object" || Array.isArray(value)) return value;
  const keys = Object.keys(value);
  if (keys.length > 0 && keys.every((key, index) => key === String(index))) {
    return keys.map((key) => listed(value[key]));
  }
  const group = {};
  for (const key of keys) define(group, key, listed(value[key]));
  return group;
}
