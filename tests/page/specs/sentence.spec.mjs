// The answer's sentence: spoken once typing has rested, copied as plain text, rounded to the setting.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const spoken = (door) => door.text("#announcements");

everyDoor("the new sentence is spoken politely, and only after typing has rested", async (door) => {
  assert.equal(await door.evaluate(() => document.getElementById("announcements").getAttribute("aria-live")), "polite");
  await door.type("Configuration", "3d7 4s");
  await door.sentence("states");
  const early = await spoken(door);
  const words = await door.until(() => document.getElementById("announcements").textContent);
  assert.equal(early, "");
  // Lowest term of d7 s by Hund's rules: 5F5 (largest spin, then largest L, inverted).
  assert.match(words, /quintet F 5/);
}, { browsers: ["chromium"] });

everyDoor("a fault is spoken with its field", async (door) => {
  await door.type("Configuration", "2p7");
  const words = await door.until(() => /Fault/.test(document.getElementById("announcements").textContent) && document.getElementById("announcements").textContent);
  assert.match(words, /Fault in Configuration: .*7/);
});

everyDoor("the focused sentence copies as plain text", async (door) => {
  await door.sentence("states");
  const copied = await door.evaluate(() => {
    const say = document.querySelector("#states .say");
    say.focus();
    document.getSelection().removeAllRanges();
    const carried = new DataTransfer();
    say.dispatchEvent(new ClipboardEvent("copy", { clipboardData: carried, bubbles: true, cancelable: true }));
    return carried.getData("text/plain");
  });
  assert.match(copied, /^Fe I in .*210 states .*5D4/);
  assert.equal(await door.evaluate(() => document.activeElement.className), "say");
  // Firefox lets no script fill the clipboard of a copy that no person made.
}, { browsers: ["chromium"] });

everyDoor("shown digits follow the setting at once", async (door) => {
  const before = await door.sentence("splitting");
  await door.click("Settings");
  await door.evaluate(() => {
    const select = [...document.querySelectorAll("select")].find((node) => [...node.options].some((option) => option.value === "17"));
    select.value = "3";
    select.dispatchEvent(new Event("change"));
  });
  const after = await door.sentence("splitting");
  assert.notEqual(after, before);
  assert.ok(after.length < before.length, `${before} became ${after}`);
}, { fragment: "v=1&species=Na&configurations.0=3s&configurations.1=3p&field.flux_density=0.5+T&line.upper=3p+2P1/2&line.lower=3s+2S1/2" });
