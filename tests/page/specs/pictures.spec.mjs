// The pictures of the README, taken from the real page. RUNGLINE_PICTURES=docs renews the ones in docs/.

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { copyFile, mkdir, readFile } from "node:fs/promises";
import { join } from "node:path";
import { toAddress } from "../../../www/js/address.js";
import { everyDoor, ROOT } from "../driver/door.mjs";

const ONE = { browsers: ["chromium"], doors: ["file"] };
const MAGNET = JSON.parse(readFileSync(new URL("../../examples/16-magnet-by-sodium.json", import.meta.url), "utf8"));
const STATES = async (door) => assert.match(await door.sentence("states"), /210\s+states/);
const FIELD = async (door) => {
  await door.unfold("splitting");
  assert.match(await door.sentence("splitting"), /10 components/);
  await door.until(() => document.querySelector("#splitting .reading-rule:not([hidden])"));
  await door.evaluate(() => {
    document.querySelector("#splitting .evidence-body").scrollIntoView();
    scrollBy(0, -document.querySelector("header").offsetHeight - 16);
  });
};
const VIEWS = [
  { name: "desk-light", width: 1400, height: 1180 },
  { name: "tablet-dark", width: 820, height: 1180, dark: true },
  { name: "phone-light", width: 360, height: 780 },
  { name: "field-light", width: 1400, height: 820, fragment: toAddress(MAGNET), show: FIELD },
];

for (const { name, show = STATES, ...view } of VIEWS) {
  everyDoor(`the README's picture ${name}`, async (door) => {
    await show(door);
    const path = await door.screenshot(name);
    const picture = await readFile(path);
    // Width and height stand in a PNG's first chunk.
    assert.deepEqual([picture.readUInt32BE(16), picture.readUInt32BE(20)], [view.width, view.height]);
    assert.deepEqual(door.troubles, []);
    if (process.env.RUNGLINE_PICTURES === "docs") {
      await mkdir(join(ROOT, "docs"), { recursive: true });
      await copyFile(path, join(ROOT, "docs", `${name}.png`));
    }
  }, { ...ONE, ...view });
}
