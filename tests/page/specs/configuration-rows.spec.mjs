// The rows of configurations: an emptied one stays under the caret.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const TWO = "v=1&species=C&configurations.0=2p2&configurations.1=2p+3d";

everyDoor("a configuration cleared by keyboard stays while it has the focus, and takes what is typed next", async (door) => {
  await door.sentence("states");
  await door.evaluate(() => document.querySelector('#atom[aria-expanded="false"]')?.click());
  await door.page.focus('[data-path="/configurations/1"]');
  await door.press("Control+a", "Backspace");
  await door.until(() => document.querySelector('[data-path="/configurations/1"]').value === "");
  assert.equal(await door.evaluate(() => document.activeElement.dataset.path), "/configurations/1");
  await door.page.keyboard.type("2p 3p");
  assert.equal(await door.evaluate(() => document.querySelector('[data-path="/configurations/1"]').value), "2p 3p");
  await door.press("Control+a", "Backspace", "Shift+Tab");
  await door.until(() => document.querySelector('[data-path="/configurations/1"]') === null);
  assert.deepEqual(door.troubles, []);
}, { fragment: TWO, width: 1400 });

everyDoor("an added row goes when it is left empty, and by Remove", async (door) => {
  await door.sentence("states");
  await door.click("Add a configuration");
  assert.equal(await door.evaluate(() => document.activeElement.dataset.path), "/configurations/2");
  await door.click("Add a configuration");
  assert.equal(await door.evaluate(() => document.querySelectorAll(".configuration-row").length), 3);
  await door.page.focus('[data-path="/species"]');
  await door.until(() => document.querySelectorAll(".configuration-row").length === 2);
  await door.evaluate(() => document.querySelector('[aria-label="Remove configuration 2"]').click());
  await door.until(() => document.querySelectorAll(".configuration-row").length === 1);
}, { fragment: TWO, width: 1400 });

everyDoor("an atom with one electron is not offered to lose it", async (door) => {
  await door.sentence("states");
  await door.until(() => document.querySelector(".ion").textContent === "One electron more");
  await door.type("Atom or ion", "He");
  await door.until(() => document.querySelector(".ion").textContent === "One electron less");
}, { fragment: "v=1&species=He+1%2B", width: 1400 });
