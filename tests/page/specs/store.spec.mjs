// The store, the pointers and the address, without a browser.

import assert from "node:assert/strict";
import { test } from "node:test";
import { MAX_ADDRESS, fromAddress, toAddress } from "../../../www/js/address.js";
import { valueAt, withKeyRenamed, withValue } from "../../../www/js/pointer.js";
import { MAX_STEPS, SheetStore } from "../../../www/js/sheet.js";

function timed() {
  let now = 0;
  const store = new SheetStore(() => now);
  return { store, wait: (ms) => { now += ms; } };
}

test("undo and redo walk over every step and back", () => {
  const { store, wait } = timed();
  for (let n = 0; n < 300; n += 1) {
    store.type("/title", `title ${n}`, "Typing in Title");
    wait(1000);
  }
  for (let n = 298; n >= 0; n -= 1) {
    store.undo();
    assert.equal(store.text("/title"), `title ${n}`);
  }
  store.undo();
  assert.deepEqual(store.sheet, { rungline: 1 });
  assert.equal(store.undo(), null);
  for (let n = 0; n < 300; n += 1) store.redo();
  assert.equal(store.text("/title"), "title 299");
  assert.ok(MAX_STEPS >= 200);
});

test("keystrokes close together are one step, another field or a rest begins a new one", () => {
  const { store, wait } = timed();
  for (const text of ["F", "Fe", "Fe ", "Fe I"]) {
    store.type("/species", text, "a");
    wait(100);
  }
  store.type("/configurations/0", "3d", "b");
  wait(100);
  store.rest();
  store.type("/configurations/0", "3d6", "b");
  store.undo();
  assert.equal(store.text("/configurations/0"), "3d");
  store.undo();
  assert.deepEqual(store.sheet, { rungline: 1, species: "Fe I" });
  store.undo();
  assert.deepEqual(store.sheet, { rungline: 1 });
});

test("typing that comes back to where it began leaves an honest history", () => {
  const { store } = timed();
  store.type("/species", "F", "a");
  store.type("/species", "", "a");
  assert.deepEqual(store.sheet, { rungline: 1 });
  store.undo();
  assert.deepEqual(store.sheet, { rungline: 1 });
});

test("a new step after undo drops what could have been redone", () => {
  const { store, wait } = timed();
  store.put([["/species", "Fe"]], "one");
  wait(1000);
  store.undo();
  store.put([["/species", "Na"]], "two");
  assert.equal(store.redoLabel, null);
  store.undo();
  assert.deepEqual(store.sheet, { rungline: 1 });
});

test("a snapshot brings sheet and history back", () => {
  const { store } = timed();
  store.put([["/species", "Fe"]], "one");
  store.replace({ rungline: 1, species: "Na", configurations: ["3s", "3p"] }, "two");
  store.put([["/configurations/1", undefined]], "three");
  store.undo();
  const again = new SheetStore();
  again.load(JSON.parse(JSON.stringify(store.snapshot())));
  assert.deepEqual(again.sheet, store.sheet);
  again.redo();
  assert.deepEqual(again.sheet.configurations, ["3s"]);
  again.undo();
  again.undo();
  assert.deepEqual(again.sheet, { rungline: 1, species: "Fe" });
});

test("a broken snapshot loses its history, not the page", () => {
  for (const broken of [{}, { sheet: [] }, { sheet: { rungline: 1 }, steps: [7], position: 3 }, { sheet: null, steps: "x" }]) {
    const store = new SheetStore();
    store.load(broken);
    assert.equal(store.undo(), null);
    assert.deepEqual(store.sheet, { rungline: 1 });
  }
});

test("an emptied configuration keeps the others in their places", () => {
  const { store } = timed();
  store.put([["/configurations/0", "3s"], ["/configurations/1", "3p"]], "one");
  store.type("/configurations/0", "", "a");
  assert.deepEqual(store.sheet.configurations, ["", "3p"]);
  store.type("/configurations/1", "", "a");
  assert.equal(store.sheet.configurations, undefined);
});

test("pointers escape and never touch the old sheet", () => {
  const sheet = Object.freeze({ measured: Object.freeze({ "3p 2P1/2": "16956 cm-1" }) });
  assert.equal(valueAt(sheet, "/measured/3p 2P1~12"), "16956 cm-1");
  assert.deepEqual(withValue(sheet, "/measured/3p 2P1~12", undefined), {});
  assert.deepEqual(withValue({}, "/field/flux_density", "1 T"), { field: { flux_density: "1 T" } });
  assert.deepEqual(Object.keys(withKeyRenamed({ a: 1, specie: "Fe", z: 2 }, "/specie", "species")), ["a", "species", "z"]);
  assert.equal(valueAt({}, "/__proto__/x"), undefined);
  assert.equal({}.polluted, undefined);
  withValue({}, "/__proto__/polluted", "yes");
  assert.equal({}.polluted, undefined);
});

const SHEETS = [
  { rungline: 1 },
  { rungline: 1, species: "Fe I", configurations: ["3d6 4s2", "3d7 4s"] },
  { rungline: 1, title: "a&b=c#d+e%f", note: "~ tilde, 🙂, א, 3d⁶\nline" },
  { rungline: 1, structure: { relativity: true, scale: { F: 0.85 } }, measured: { "3p 2P1/2": "16956.17 cm-1" } },
  { rungline: 1, species: "", configurations: [], given: { "a.b": null } },
  { rungline: 1, configurations: ["", "3p"], "~odd": "~~" },
];

test("every sheet comes back from its address", () => {
  for (const sheet of SHEETS) {
    const address = toAddress(sheet);
    assert.match(address, /^#v=1/);
    assert.deepEqual(fromAddress(address).sheet, sheet, address);
  }
});

test("addresses are readable and bounded", () => {
  assert.equal(toAddress(SHEETS[1]), "#v=1&species=Fe+I&configurations.0=3d6+4s2&configurations.1=3d7+4s");
  assert.equal(toAddress({ rungline: 1, note: "x".repeat(MAX_ADDRESS) }), null);
});

test("half a character does not keep the rest from the address", () => {
  assert.equal(fromAddress(toAddress({ rungline: 1, species: "a\uD83D", title: "\uDE42 🙂" })).sheet.title, "\uFFFD 🙂");
});

test("an address that cannot be read is a plain fault", () => {
  for (const bad of ["#v=2&species=Fe", "#v=1&species", "#v=1&species=%E0%A4%A", "#v=1&=x", "#v=1&a=~{", "#v=1&a=1&a=2", "#v=1&a=1&a.b=2", `#v=1&${"a.".repeat(20)}a=1`, `#v=1&a=${"x".repeat(5000)}`]) {
    const { fault } = fromAddress(bad);
    assert.ok(fault?.message && fault.bound, bad.slice(0, 40));
  }
  for (const other of ["", "#", "#states", "#record"]) assert.ok(fromAddress(other).nothing);
});
