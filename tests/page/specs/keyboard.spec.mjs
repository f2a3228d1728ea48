// The main job by keyboard alone.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

/** Presses Tab until the focused element fits. */
async function tabTo(door, description, fits, limit = 200) {
  for (let count = 0; count < limit; count += 1) {
    if (await door.evaluate(fits)) return;
    await door.press("Tab");
  }
  throw new Error(`Tab does not reach ${description}`);
}

everyDoor("keyboard only: type Fe, read the ground level, copy the table, make a fault and undo it", async (door) => {
  await tabTo(door, "the field for the atom", () => document.activeElement.dataset.path === "/species");
  await door.press("Control+a");
  await door.page.keyboard.type("Fe");
  await door.press("Tab");
  await tabTo(door, "the first configuration", () => document.activeElement.dataset.path === "/configurations/0");
  await door.press("Control+a", "Backspace");
  // Empty stands for the ground configuration: 3d6 4s2 5D4 (NIST Atomic Spectra Database).
  assert.match(await door.sentence("states"), /5\s*D\s*4/);

  await tabTo(door, "the answer's sentence", () => document.activeElement.matches("#states .say"));
  await tabTo(door, "a copy button of the evidence", () => document.activeElement.closest("#states .evidence") !== null && /copy/i.test(document.activeElement.textContent));
  await door.press("Enter");

  await door.evaluate(() => window.scrollTo(0, 0));
  await door.evaluate(() => document.getElementById("atom").focus());
  await tabTo(door, "the first configuration", () => document.activeElement.dataset.path === "/configurations/0");
  await door.page.keyboard.type("2p7");
  await door.until(() => document.querySelector('[data-path="/configurations/0"]').getAttribute("aria-invalid") === "true");
  assert.equal(await door.state("states"), "fault");
  assert.equal(await door.text("#fault-count"), "1 fault");
  await door.press("Control+z");
  await door.until(() => document.querySelector('[data-path="/configurations/0"]').getAttribute("aria-invalid") === null);
  assert.match(await door.sentence("states"), /5\s*D\s*4/);
  assert.deepEqual(door.troubles, []);
});

everyDoor("the head leads to the first fault, and focus is never under the head", async (door) => {
  await door.type("Configuration", "3d6 4s2");
  await door.type("Atom or ion", "Xx");
  await door.until(() => !document.getElementById("fault-count").hidden);
  await door.evaluate(() => window.scrollTo(0, document.body.scrollHeight));
  await door.evaluate(() => document.getElementById("fault-count").focus());
  await door.press("Enter");
  assert.equal(await door.evaluate(() => document.activeElement.dataset.path), "/species");
  // The page may still be growing above the field when the focus arrives: where it comes to rest counts.
  await door.until(() => {
    const head = document.getElementById("head").getBoundingClientRect();
    const covered = document.activeElement.getBoundingClientRect().top < head.bottom - 1 && head.top <= 0;
    return !covered && document.activeElement.dataset.path === "/species";
  });
});

everyDoor("Esc folds the open panel in and gives focus back", async (door) => {
  await door.click("Settings");
  assert.equal(await door.evaluate(() => document.getElementById("settings-panel").hidden), false);
  await door.press("Escape");
  assert.equal(await door.evaluate(() => document.getElementById("settings-panel").hidden), true);
  assert.equal(await door.evaluate(() => document.activeElement.textContent), "Settings");
});

everyDoor("the columns of the list of keys start level", async (door) => {
  await door.click("Settings");
  const tops = await door.evaluate(() => {
    const heads = [...document.querySelectorAll(".keys h4")].map((head) => head.getBoundingClientRect());
    const columns = [...new Set(heads.map(({ left }) => Math.round(left)))];
    return columns.map((column) => Math.min(...heads.filter(({ left }) => Math.round(left) === column).map(({ top }) => top)));
  });
  assert.ok(tops.length > 1);
  assert.ok(Math.max(...tops) - Math.min(...tops) < 1, String(tops));
}, { width: 1400 });
