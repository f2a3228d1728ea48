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
