// JSON pointers (RFC 6901) into the sheet, read and set without changing the sheet in place.

/** The keys of a pointer: "/a~1b/0" → ["a/b", "0"]. */
export function keysOf(pointer) {
  if (pointer === "") return [];
  return pointer.slice(1).split("/").map((key) => key.replace(/~1/g, "/").replace(/~0/g, "~"));
}

/** The pointer of some keys. */
export function pointerOf(keys) {
  return keys.map((key) => `/${String(key).replace(/~/g, "~0").replace(/\//g, "~1")}`).join("");
}

/** What stands at a pointer, or undefined. */
export function valueAt(sheet, pointer) {
  let value = sheet;
  for (const key of keysOf(pointer)) {
    if (value === null || typeof value !== "object" || !Object.hasOwn(value, key)) return undefined;
    value = value[key];
  }
  return value;
}

/**
 * The sheet with `value` at the pointer; undefined takes the entry out, and groups or lists that
 * become empty go with it.
 */
export function withValue(sheet, pointer, value) {
  const keys = keysOf(pointer);
  if (keys.length === 0) return value;
  return set(sheet, keys, value) ?? {};
}

/** The sheet with the key at the pointer renamed, in its place. */
export function withKeyRenamed(sheet, pointer, name) {
  const keys = keysOf(pointer);
  const old = keys.pop();
  const group = valueAt(sheet, pointerOf(keys));
  if (group === null || typeof group !== "object" || Array.isArray(group) || !Object.hasOwn(group, old)) {
    return sheet;
  }
  const renamed = {};
  for (const [key, value] of Object.entries(group)) own(renamed, key === old ? name : key, value);
  return keys.length === 0 ? renamed : withValue(sheet, pointerOf(keys), renamed);
}

function set(container, keys, value) {
  const [key, ...rest] = keys;
  const isList = Array.isArray(container) || (container === undefined && /^\d+$/.test(key));
  const inside = container !== null && typeof container === "object" ? container : undefined;
  const old = inside && Object.hasOwn(inside, key) ? inside[key] : undefined;
  const now = rest.length === 0 ? value : set(old, rest, value);
  if (isList) {
    const list = inside ? [...inside] : [];
    const index = Math.min(Number(key), list.length);
    if (now === undefined) list.splice(index, 1);
    else list[index] = now;
    // Entries that were emptied before the one behind them went say nothing any more.
    while (now === undefined && list.at(-1) === "") list.pop();
    return list.length === 0 ? undefined : list;
  }
  const group = {};
  for (const [name, item] of Object.entries(inside ?? {})) {
    if (name !== key) own(group, name, item);
    else if (now !== undefined) own(group, name, now);
  }
  if (now !== undefined && !(inside && Object.hasOwn(inside, key))) own(group, key, now);
  return Object.keys(group).length === 0 ? undefined : group;
}

// An entry of the object itself, also under a name such as "__proto__".
function own(object, key, value) {
  Object.defineProperty(object, key, { value, writable: true, enumerable: true, configurable: true });
}
