// The page on paper: A4 with margins is about 670 px wide; 720 px are laid out here.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const SODIUM = "v=1&species=Na&configurations.0=3s&configurations.1=3p&field.flux_density=0.5+T&field.view=across&line.upper=3p+2P3/2&line.lower=3s+2S1/2&line.wavelength=589.158+nm";

for (const width of [720, 1400]) {
  everyDoor(`on paper questions stand on one line, tables fit and closed parts are gone, ${width} px`, async (door) => {
    for (const name of ["states", "lines", "splitting"]) await door.unfold(name);
    await door.until(() => document.querySelector("#splitting table"));
    await door.evaluate(() => { [...document.querySelectorAll("#states .part > summary")].find((each) => each.textContent.startsWith("Levels and")).click(); });
    await door.page.emulateMediaType("print");
    await door.page.setViewport({ width: 720, height: 1000 });
    const seen = await door.evaluate(() => ({
      questions: [...document.querySelectorAll(".rung.unfolded .question")].map((node) => [node.textContent, node.getBoundingClientRect().height < 2 * parseFloat(getComputedStyle(node).lineHeight) && node.getBoundingClientRect().height]),
      over: [...document.querySelectorAll("table.data")].filter((table) => table.checkVisibility() && table.getBoundingClientRect().right > document.documentElement.clientWidth + 1).map((table) => `${table.caption.textContent}: ${table.getBoundingClientRect().right}`),
      dead: [...document.querySelectorAll(".fold:not([open]) > summary")].filter((node) => node.checkVisibility()).map((node) => node.textContent),
      open: [...document.querySelectorAll(".fold[open] > summary")].filter((node) => node.checkVisibility()).map((node) => node.textContent),
    }));
    assert.ok(seen.questions.length >= 3);
    for (const [question, height] of seen.questions) assert.ok(height > 0, `${question}: ${height}`);
    assert.deepEqual(seen.over, []);
    assert.deepEqual(seen.dead, []);
    assert.ok(seen.open.some((text) => text.startsWith("Levels and")));
    assert.deepEqual(door.troubles, []);
    await door.screenshot(`print-${width}`);
  }, { fragment: SODIUM, width, browsers: ["chromium"] });
}

everyDoor("on paper stands what was entered, and nothing that only a screen can do", async (door) => {
  for (const name of ["lines", "splitting"]) await door.unfold(name);
  await door.until(() => document.querySelector("#splitting .map-part svg[role=img]"));
  await door.page.emulateMediaType("print");
  const entered = await door.until(() => document.querySelector(".entered").checkVisibility() && document.querySelector(".entered dt") && [...document.querySelectorAll(".entered > div")].map((row) => [...row.children].map((each) => each.textContent)));
  const value = (label) => entered.find(([name]) => name === label)?.[1];
  assert.deepEqual(["Atom or ion", "Configuration", "Configuration 2", "Field", "View", "Line starts on", "Line ends on", "Wavelength", "A of 3s 2S1/2"].map(value),
    ["Na", "3s", "3p", "0.5 T", "across", "3p 2P3/2", "3s 2S1/2", "589.158 nm", "885.8 MHz"]);
  // Folded parts say what stands in them all the same.
  assert.equal(value("Nuclear spin I"), "3/2");
  const page = await door.evaluate(() => document.body.innerText);
  assert.doesNotMatch(page, /drag|tap |arrow keys|copies have|type over|choose …|such as/i);
  assert.deepEqual(door.troubles, []);
}, { fragment: `${SODIUM}&nucleus.spin=3/2&nucleus.magnetic_dipole.3s+2S1/2=885.8+MHz`, browsers: ["chromium"] });
