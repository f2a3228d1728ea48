// The chart of the elements: touch, keyboard, table; what it picks.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

async function openChart(door) {
  await door.evaluate(() => {
    const atom = document.getElementById("atom");
    if (atom.getAttribute("aria-expanded") !== "true") atom.click();
    document.querySelector(".chart-box").closest("details").open = true;
  });
  await door.until(() => document.querySelector(".chart .cell"));
}

everyDoor("a pressed element becomes the atom", async (door) => {
  await openChart(door);
  await door.page.click('.chart-columns [data-symbol="Mn"]');
  await door.until(() => /Mn/.test(document.getElementById("atom").textContent));
  assert.match(await door.sentence("states"), /\S/);
  assert.deepEqual(door.troubles, []);
}, { fragment: "v=1&species=Fe" });

everyDoor("the chart is one tab stop, walked by arrows, and every cell has a word", async (door) => {
  await openChart(door);
  const stops = await door.evaluate(() => document.querySelectorAll('.chart-columns .cell[tabindex="0"]').length);
  assert.equal(stops, 1);
  await door.page.focus('.chart-columns [data-symbol="Fe"]');
  await door.press("ArrowRight");
  assert.equal(await door.evaluate(() => document.activeElement.dataset.symbol), "Co");
  await door.press("ArrowDown");
  assert.equal(await door.evaluate(() => document.activeElement.dataset.symbol), "Rh");
  assert.ok(await door.evaluate(() => [...document.querySelectorAll(".chart-columns .cell")].every((cell) => cell.querySelector(".cell-words").textContent.trim() !== "")));
}, { fragment: "v=1&species=Fe" });

everyDoor("on a phone the filling ladder has at most 14 cells a row, none under 24 px", async (door) => {
  await openChart(door);
  const cells = await door.evaluate(() => [...document.querySelectorAll(".ladder-cells")].map((row) => [...row.children].map((cell) => cell.getBoundingClientRect().width)));
  assert.ok(cells.every((row) => row.length <= 14));
  assert.equal(cells.flat().length, 118);
  assert.ok(Math.min(...cells.flat()) >= 24, String(Math.min(...cells.flat())));
  assert.equal(await door.scrollsSideways(), false);
  assert.deepEqual(await door.axe(), []);
}, { width: 360, fragment: "v=1&species=Fe" });

everyDoor("the chart's data are in a table too", async (door) => {
  await openChart(door);
  await door.evaluate(() => [...document.querySelectorAll(".chart .word")].find((each) => each.textContent === "Show as table").click());
  const iron = await door.until(() => [...document.querySelectorAll(".chart table tbody tr")].find((row) => row.cells[1].textContent === "Fe")?.textContent);
  assert.match(iron, /26Feiron/);
  assert.equal(await door.evaluate(() => document.querySelectorAll(".chart table tbody tr").length), 118);
}, { fragment: "v=1&species=Fe" });

everyDoor("at 320 px the ladder still fits the page", async (door) => {
  await openChart(door);
  assert.equal(await door.scrollsSideways(), false);
  assert.ok(await door.evaluate(() => [...document.querySelectorAll(".ladder-cells .cell")].every((cell) => cell.getBoundingClientRect().width >= 24)));
}, { width: 320, fragment: "v=1&species=Fe" });

everyDoor("the sheet's own element is marked, and moves with the sheet; every ground term has an edge", async (door) => {
  await openChart(door);
  const present = () => door.evaluate(() => [...document.querySelectorAll('.chart-columns .cell[aria-current="true"]')].map((cell) => cell.dataset.symbol).join());
  assert.equal(await present(), "Fe");
  await door.page.click('.chart-columns [data-symbol="Mn"]');
  await door.until(() => document.querySelector('.chart-columns .cell[aria-current="true"]')?.dataset.symbol === "Mn");
  await door.evaluate(() => {
    const box = document.querySelector('.chart select');
    box.value = "term";
    box.dispatchEvent(new Event("change"));
  });
  assert.equal(await present(), "Mn");
  assert.deepEqual(await door.evaluate(() => [...document.querySelectorAll(".chart-columns .cell")].filter((cell) => parseFloat(getComputedStyle(cell).borderTopWidth) < 4).map((cell) => cell.className)), []);
  assert.ok(await door.evaluate(() => [...document.querySelectorAll(".chart-columns .cell")].every((cell) => !/ground level a level/.test(cell.textContent))));
}, { fragment: "v=1&species=Fe" });
