// One choice for all rungs, and tables that fit or say that they do not.

import assert from "node:assert/strict";
import { test } from "node:test";
import { everyDoor } from "../driver/door.mjs";
import { linePairs } from "../../../www/js/line-picker.js";

const SODIUM = "v=1&species=Na&configurations.0=3s&configurations.1=3p&field.flux_density=0.5+T&field.view=across&line.upper=3p+2P3/2&line.lower=3s+2S1/2&line.wavelength=589.158+nm";
const CARBON = "v=1&species=*&configurations.0=2p2&configurations.1=2p+3d";

test("each pair of levels is listed once, by its strongest multipole, E1 first", () => {
  const line = (lower, upper, multipole) => ({ lower, upper, multipole });
  assert.deepEqual(linePairs([line("a", "b", "E2"), line("a", "b", "M1"), line("a", "c", "E1"), line("b", "c", "E2")]),
    [line("a", "c", "E1"), line("a", "b", "M1"), line("b", "c", "E2")]);
});

everyDoor("a chosen term marks its lines; a chosen line marks its levels and itself where it is split", async (door) => {
  for (const name of ["states", "lines", "splitting"]) await door.unfold(name);
  await door.until(() => document.querySelector("#lines .stage svg") && document.querySelector("#splitting .components-table table"));
  const marked = (rung) => door.evaluate((id) => document.querySelectorAll(`#${id} tr[aria-current="true"]`).length, rung);
  await door.evaluate(() => [...document.querySelectorAll('#states tr[data-id^="term:"]')].find((row) => row.querySelector('[aria-label="doublet P, odd"]')).click());
  await door.until(() => document.querySelector('#lines tr[aria-current="true"]'));
  assert.equal(await marked("lines"), await door.evaluate(() => [...document.querySelectorAll('#lines tr[data-id^="line:"]')].filter((row) => row.dataset.id.includes("3p 2P")).length));
  assert.ok(await door.evaluate(() => document.querySelector("#lines .ring-chosen") !== null));
  assert.equal(await door.text(".line-choice"), "");
  await door.evaluate(() => document.querySelector('#lines tr[data-id="line:3s 2S1/2/3p 2P3/2/E1"]').click());
  await door.until(() => /chosen under/.test(document.querySelector(".line-choice").textContent));
  assert.equal(await marked("lines"), 1);
  assert.equal(await marked("states"), 2);
  assert.deepEqual(await door.axe(), []);
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM, width: 1400 });

everyDoor("E1 lines come first, and the picture says which multiplet it shows", async (door) => {
  await door.unfold("lines");
  await door.until(() => document.querySelector("#lines .stage svg"));
  const column = await door.evaluate(() => [...document.querySelector("#lines .lines-table table").tBodies[0].rows].map((row) => row.cells[3].textContent));
  assert.equal(column[0], "E1");
  assert.ok(column.lastIndexOf("E1") < column.indexOf("M1"));
  assert.match(await door.text("#lines .picture-box > .note"), /^The picture shows one multiplet of \d+, /);
  assert.doesNotMatch(await door.text("#lines .reading"), /dotted/);
  await door.click("Show refused pairs, dotted");
  assert.match(await door.text("#lines .reading"), /Refused pairs are dotted\./);
}, { fragment: CARBON, width: 1400 });

for (const width of [360, 820, 1400]) {
  everyDoor(`a table that goes on to the right says so, ${width} px`, async (door) => {
    for (const name of ["states", "lines", "splitting"]) await door.unfold(name);
    await door.until(() => document.querySelector("#lines .stage svg") && document.querySelector("#splitting .components-table table"));
    await door.evaluate(() => new Promise((done) => { setTimeout(done, 300); }));
    const tables = await door.evaluate(() => [...document.querySelectorAll(".table")].filter((table) => table.checkVisibility()).map((table) => {
      const region = table.querySelector(".table-region");
      return { caption: table.querySelector("caption").textContent, cut: region.scrollWidth > region.clientWidth + 2, told: table.querySelector(".table-more").checkVisibility() };
    }));
    for (const { caption, cut, told } of tables) assert.equal(told, cut, caption);
    if (width === 1400) assert.deepEqual(tables.filter(({ cut }) => cut), []);
    assert.equal(await door.scrollsSideways(), false);
    await door.screenshot(`wide-${width}`);
  }, { fragment: SODIUM, width });
}

everyDoor("the boxes for both levels of a line stand level", async (door) => {
  await door.unfold("splitting");
  const tops = await door.evaluate(() => ["/line/upper", "/line/lower"].map((path) => document.querySelector(`[data-path="${path}"]`).getBoundingClientRect().top));
  assert.ok(Math.abs(tops[0] - tops[1]) < 1, String(tops));
}, { fragment: SODIUM, width: 360 });
