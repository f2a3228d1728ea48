// Entries that a person names: a field for each, a way to take it out, and a row to add one.

import { element, freshId } from "./dom.js";
import { keysOf, pointerOf, valueAt } from "./pointer.js";

/** Fields on show; the others are in the sheet all the same. */
const SHOWN = 40;
const PLAIN = { type: "text", class: "key", autocomplete: "off", autocapitalize: "off", autocorrect: "off", spellcheck: "false" };

/**
 * The entries of the group at `path`. `words`: {name, value, hint, add, one, of}, `of` before the name in labels; `suggestions()`: names;
 * `usual(name)`: what the box for the value starts from.
 */
export function namedRows({ fields, store, path, words, suggestions, usual = () => "" }) {
  const rows = new Map();
  const list = element("div", { class: "field-row" });
  const more = element("p", { class: "note" });
  const pathOf = (name) => pointerOf([...keysOf(path), name]);
  const arrange = () => {
    const group = valueAt(store.sheet, path);
    const names = group !== null && typeof group === "object" ? Object.keys(group) : [];
    const wanted = new Set(names.slice(0, SHOWN));
    for (const [name, node] of rows) {
      // Whoever empties a field is about to type something else there.
      if (wanted.has(name) || node.querySelector("input") === document.activeElement) continue;
      fields.remove(pathOf(name));
      node.remove();
      rows.delete(name);
    }
    for (const name of wanted) {
      if (rows.has(name)) continue;
      const node = element("div", { class: "named-row" },
        fields.make(pathOf(name), { label: `${words.of ?? ""}${name}`, hint: words.hint }),
        element("button", {
          type: "button", class: "action", text: "Take it out", "aria-label": `Take it out: ${words.of ?? ""}${name}`,
          on: { click: () => {
            store.put([[pathOf(name), undefined]], `Take out ${name}`);
            box.focus();
          } },
        }));
      rows.set(name, node);
      list.append(node);
    }
    more.textContent = names.length > SHOWN ? `The first ${SHOWN} of ${names.length}.` : "";
  };
  const box = element("input", { ...PLAIN, id: freshId("name") });
  list.addEventListener("focusout", () => setTimeout(arrange, 0));
  store.subscribe(arrange);
  arrange();
  return element("div", { class: "named-rows" }, list, more, adder());

  function adder() {
    const name = box;
    const names = element("datalist", { id: `${name.id}-list` });
    const value = element("input", { ...PLAIN, id: freshId("value") });
    name.setAttribute("list", names.id);
    name.addEventListener("focus", () => names.replaceChildren(...suggestions().map((text) => element("option", { value: text }))));
    name.addEventListener("change", () => {
      if (value.value === "") value.value = usual(name.value.trim());
    });
    const add = () => {
      if (name.value.trim() === "") {
        name.focus();
        return;
      }
      store.put([[pathOf(name.value.trim()), value.value]], `${words.add} ${name.value.trim()}`);
      name.value = "";
      value.value = "";
      name.focus();
    };
    value.addEventListener("keydown", (event) => {
      if (event.key === "Enter") add();
    });
    return element("div", { class: "field-row" },
      element("div", { class: "field" }, element("label", { for: name.id, text: words.name }), element("span", { class: "hint", text: words.one }), name, names),
      element("div", { class: "field" }, element("label", { for: value.id, text: words.value }), element("span", { class: "hint", text: words.hint }), value),
      element("div", { class: "field adder" }, element("button", { type: "button", class: "action", text: words.add, on: { click: add } })));
  }
}
