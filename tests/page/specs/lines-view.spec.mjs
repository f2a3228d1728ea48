// Which lines?, read and worked on the page. Relative strengths of ³P–³D: White & Eliason 1933, as
// in Condon & Shortley 1935 (table of LS multiplet strengths), with the total made one.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const CARBON = "v=1&species=*&configurations.0=2p2&configurations.1=2p+3d";
const MANY = "v=1&species=*&configurations.0=4f3&configurations.1=4f2+5d";

everyDoor("the multiplet ³P–³D° has six lines with the published strengths", async (door) => {
  await door.sentence("lines");
  await door.unfold("lines");
  await door.until(() => document.querySelector("#lines .stage svg"));
  const found = await door.evaluate(() => {
    const table = document.querySelector("#lines .lines-table table");
    return [...table.tBodies[0].rows].map((row) => ({
      names: [...row.querySelectorAll(".term")].slice(0, 2).map((each) => each.getAttribute("aria-label")),
      cells: [...row.cells].map((cell) => cell.textContent),
    }));
  });
  const strength = (upper, lower) => Number(found.find(({ names, cells }) => names[0] === upper && names[1] === lower && cells.includes("E1"))?.cells[2]);
  for (const [upper, lower, part] of [["triplet D 3, odd", "triplet P 2", 84], ["triplet D 2, odd", "triplet P 1", 45], ["triplet D 2, odd", "triplet P 2", 15],
    ["triplet D 1, odd", "triplet P 0", 20], ["triplet D 1, odd", "triplet P 1", 15], ["triplet D 1, odd", "triplet P 2", 1]]) {
    assert.ok(Math.abs(strength(upper, lower) - part / 180) < 1e-5, `${upper} – ${lower}: ${strength(upper, lower)}`);
  }
  assert.deepEqual(door.troubles, []);
}, { fragment: CARBON });

everyDoor("a refused pair says its rule in the picture and in the table", async (door) => {
  await door.unfold("lines");
  await door.click("Show refused pairs, dotted");
  await door.page.focus("#lines .stage");
  await door.press("End");
  assert.match(await door.text("#lines .reading"), /refused: .+/);
  await door.press("Enter");
  await door.unfoldPart("lines", "Refused");
  await door.until(() => document.querySelector('#lines .part tr[aria-current="true"]'));
}, { fragment: CARBON });

everyDoor("only the visible rows of a long table are drawn; finding, End and copying reach all", async (door) => {
  await door.unfold("lines");
  await door.until(() => document.querySelector("#lines table.many"));
  const count = () => door.evaluate(() => Number(document.querySelector("#lines table.many").getAttribute("aria-rowcount")));
  const total = (await count()) - 1;
  assert.ok(total > 500);
  assert.ok(await door.evaluate(() => document.querySelectorAll("#lines table.many tbody:not(.spacer) tr").length) < 120);
  await door.page.focus("#lines .lines-table .table-region");
  await door.press("End");
  await door.until((last) => document.activeElement.getAttribute("aria-rowindex") === String(last), total + 1);
  await door.press("Home");
  await door.until(() => document.activeElement.getAttribute("aria-rowindex") === "2");
  await door.type(`Find in ${total} rows`, "M1");
  await door.until(() => document.querySelector("#lines tr.found") && /^1 of \d+/.test(document.querySelector("#lines .find .note").textContent));
  await door.evaluate(() => {
    document.querySelector("#lines .copy-menu").open = true;
    [...document.querySelectorAll("#lines .copy-list button")].find((each) => each.textContent === "Copy as CSV").click();
  });
  const csv = await door.until(() => window.clips.at(-1));
  assert.equal(csv.trim().split("\r\n").length, total + 1);
}, { fragment: MANY, before: () => {
  window.clips = [];
  Object.defineProperty(navigator, "clipboard", { value: { writeText: async (text) => { window.clips.push(text); } } });
} });

everyDoor("the lines are free of what axe finds", async (door) => {
  await door.unfold("lines");
  await door.evaluate(() => { for (const part of document.querySelectorAll("#lines .part")) part.open = true; });
  assert.deepEqual(await door.axe(), []);
  assert.equal(await door.scrollsSideways(), false);
}, { width: 360, fragment: CARBON, doors: ["file"] });
