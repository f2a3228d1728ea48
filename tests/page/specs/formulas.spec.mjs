// Formulas on the page, and selected text as it is copied.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const CARBON = "v=1&species=C&configurations.0=2p2&configurations.1=2p+3d";

async function openWorking(door, question) {
  await door.unfold(question);
  await door.evaluate((name) => { document.querySelector(`#${name} .working`).open = true; }, question);
  await door.until((name) => document.querySelector(`#${name} .formula math`), question);
}

everyDoor("a 6j symbol is a table of two rows in brackets that stretch; no other bracket does", async (door) => {
  await openWorking(door, "lines");
  const found = await door.evaluate(() => {
    const table = document.querySelector("#lines .formula mtable");
    const brackets = [...document.querySelectorAll("#lines .formula mo")].filter((mo) => /^[()[\]{}]$/.test(mo.textContent));
    const around = new Set([...document.querySelectorAll("#lines .formula mtable")].flatMap((one) => [one.previousElementSibling, one.nextElementSibling]));
    return {
      rows: table.children.length, cells: table.children[0].children.length,
      namespace: table.namespaceURI, opening: table.previousElementSibling.textContent,
      stretching: brackets.filter((mo) => mo.getAttribute("stretchy") !== "false").every((mo) => around.has(mo)),
      flat: brackets.filter((mo) => mo.getAttribute("stretchy") === "false").length,
    };
  });
  assert.deepEqual({ ...found, flat: found.flat > 0 }, { rows: 2, cells: 3, namespace: "http://www.w3.org/1998/Math/MathML", opening: "{", stretching: true, flat: true });
}, { fragment: CARBON });

everyDoor("a formula can be reached by keyboard, is named in plain text, and scrolls in its own box", async (door) => {
  await openWorking(door, "lines");
  const boxes = await door.evaluate(() => [...document.querySelectorAll("#lines .formula")].map((box) => ({
    name: box.getAttribute("aria-label"), stop: box.tabIndex, overflow: getComputedStyle(box).overflowX, plain: box.dataset.plain,
  })));
  for (const box of boxes) {
    assert.equal(box.name, `Formula: ${box.plain}`);
    assert.equal(box.stop, 0);
    assert.equal(box.overflow, "auto");
  }
  assert.equal(await door.scrollsSideways(), false);
}, { fragment: CARBON, width: 360 });

everyDoor("selected terms are copied in the sheet's own spelling", async (door) => {
  await door.unfold("states");
  const copied = await door.evaluate(() => {
    document.activeElement.blur();
    document.getSelection().selectAllChildren(document.querySelector("#states .table-and-picture tbody"));
    const event = new ClipboardEvent("copy", { clipboardData: new DataTransfer(), bubbles: true, cancelable: true });
    document.dispatchEvent(event);
    return event.clipboardData.getData("text/plain");
  });
  const lines = copied.trim().split("\n");
  assert.equal(lines.length, 3);
  assert.match(lines[0], /^3P\t0, 1, 2\t1/);
}, { fragment: "v=1&species=C&configurations.0=2p2" });

everyDoor("shown digits follow the setting, copied digits do not", async (door) => {
  await door.unfold("states");
  await door.evaluate(() => { for (const part of document.querySelectorAll("#states .part")) part.open = true; });
  const shown = () => door.until(() => [...document.querySelectorAll("#states tbody .number-column .digits")].map((each) => each.textContent).find((text) => /^1\.501/.test(text)));
  assert.equal(await shown(), "1.50116");
  await door.click("Settings");
  await door.evaluate(() => {
    const box = [...document.querySelectorAll("#settings-panel label")].find((label) => label.textContent === "Shown digits").control;
    box.value = "10";
    box.dispatchEvent(new Event("change"));
  });
  await door.until(() => [...document.querySelectorAll("#states tbody .number-column .digits")].some((each) => each.textContent === "1.501159652"));
}, { fragment: "v=1&species=C&configurations.0=2p2" });
