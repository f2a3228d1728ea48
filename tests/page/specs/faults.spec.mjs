// Faults at their field: when they appear, what they mark, how one gets out.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const ATOM = "Atom or ion";
const CONFIGURATION = "Configuration";

/** What the page shows at a field once it has rested. */
const faultAt = (door, path) => door.until((wanted) => {
  const input = document.querySelector(`[data-path="${wanted}"]`);
  if (input.getAttribute("aria-invalid") !== "true") return null;
  const field = input.closest(".field");
  return {
    marked: field.querySelector(".place")?.textContent ?? null,
    raw: field.querySelector(".raw")?.textContent ?? null,
    sentence: field.querySelector(".sentence").textContent,
    bound: field.querySelector(".bound")?.textContent ?? "",
    ways: [...field.querySelectorAll(".way")].map((way) => way.textContent),
    described: input.getAttribute("aria-describedby").split(" ").some((id) => document.getElementById(id)?.querySelector(".sentence")),
  };
}, path);

everyDoor("a fault marks its characters, also after an emoji, a superscript and right-to-left text", async (door) => {
  // Any atom, so that mending the characters alone leads out.
  await door.type(ATOM, "*");
  for (const before of ["", "3d⁶ "]) {
    await door.type(CONFIGURATION, `${before}2p7`);
    const fault = await faultAt(door, "/configurations/0");
    assert.match(fault.marked, /^(2p)?7$/, before);
    assert.ok(fault.raw.endsWith("2p7"));
    assert.ok(fault.sentence && fault.bound && fault.described);
    assert.ok(fault.ways.some((way) => /2p6|2p⁶/.test(way)), fault.ways.join());
  }
  for (const odd of ["🙂", "אבג"]) {
    await door.type(CONFIGURATION, `3s2 ${odd}`);
    const fault = await faultAt(door, "/configurations/0");
    assert.ok(odd.startsWith(fault.marked) && fault.marked !== "" || fault.marked.includes(odd), `${fault.marked} marks ${odd}`);
    assert.ok(!/\uFFFD|[\uD800-\uDBFF](?![\uDC00-\uDFFF])/.test(fault.raw));
  }
});

everyDoor("a fault waits until typing has rested, and a way out can be undone", async (door) => {
  await door.type(ATOM, "");
  await door.type(CONFIGURATION, "2p7");
  // Asked at once: the rest of 400 ms is not over.
  const early = await door.evaluate(() => document.querySelector('[data-path="/configurations/0"]').getAttribute("aria-invalid"));
  const { ways } = await faultAt(door, "/configurations/0");
  assert.equal(early, null);
  assert.equal(await door.state("states"), "fault");
  assert.match(await door.text("#states .words"), /1 fault/);
  await door.click(ways[0]);
  await door.sentence("states");
  await door.press("Control+z");
  assert.equal(await door.evaluate(() => document.querySelector('[data-path="/configurations/0"]').value), "2p7");
}, { browsers: ["chromium"] });

everyDoor("leaving the field shows its fault at once", async (door) => {
  await door.type(CONFIGURATION, "2p7");
  await door.press("Tab");
  await faultAt(door, "/configurations/0");
});

everyDoor("the last good answer stays, marked out of date", async (door) => {
  const before = await door.sentence("states");
  await door.type(CONFIGURATION, "2p7");
  await faultAt(door, "/configurations/0");
  assert.equal(await door.text("#states .say"), before);
  assert.match(await door.text("#states .old-note"), /before your change/);
});

// Each of these is typed into the field it belongs to and must be one plain fault there.
const BAD_CONFIGURATIONS = ["2p7", "2d", "1p", "3d6 3d2", "3j2", "4f15", "אבג", "🙂", "3d-1", "3d6.5", "1e9s2"];
const BAD_SPECIES = ["Fe 30+", "Xx", "🙂", "אבג", "1".repeat(50)];

everyDoor("every bad input is a plain fault, nothing is lost, nothing hangs", async (door) => {
  await door.type(ATOM, "*");
  for (const text of BAD_CONFIGURATIONS) {
    await door.type(CONFIGURATION, text);
    const fault = await faultAt(door, "/configurations/0");
    assert.ok(fault.sentence.length > 8, text);
    assert.equal(await door.evaluate(() => document.querySelector('[data-path="/configurations/0"]').value), text);
  }
  await door.type(CONFIGURATION, "");
  for (const text of BAD_SPECIES) {
    await door.type(ATOM, text);
    const fault = await faultAt(door, "/species");
    assert.ok(fault.sentence.length > 8, text);
  }
  await door.type(ATOM, "Ne");
  await door.sentence("states");
  await door.evaluate(() => {
    const input = document.querySelector('[data-path="/configurations/0"]');
    input.focus();
    input.value = "3d6 ".repeat(2500);
    input.dispatchEvent(new Event("input", { bubbles: true }));
  });
  const long = await faultAt(door, "/configurations/0");
  assert.ok(long.raw === null || long.raw.length < 400);
  await door.press("Control+z");
  await door.sentence("states");
  assert.deepEqual(door.troubles, []);
});

everyDoor("what is lacking is named, with a button that puts a usable value there", async (door) => {
  assert.equal(await door.state("splitting"), "lacks");
  // A sheet that names a line opens on its splitting.
  assert.equal(await door.evaluate(() => document.querySelector("#splitting .rung-button").getAttribute("aria-expanded")), "true");
  assert.match(await door.text("#splitting .words"), /^needs a field/);
  await door.click("Put in 0.5 T");
  await door.sentence("splitting");
  assert.match(await door.text("#splitting .say"), /\d/);
}, { fragment: "v=1&species=Na&configurations.0=3s&configurations.1=3p&line.upper=3p+2P1/2&line.lower=3s+2S1/2" });

everyDoor("an empty sheet asks for an atom", async (door) => {
  await door.click("Open");
  await door.click("Empty sheet");
  await door.until(() => document.getElementById("states").dataset.state === "lacks");
  assert.match(await door.text("#states .words"), /needs an atom/);
  await door.click("Undo");
  await door.sentence("states");
});

const SPLIT = "v=1&species=Na&configurations.0=3s&configurations.1=3p&field.flux_density=0.5+T&line.upper=3p+2P1/2&line.lower=3s+2S1/2";

everyDoor("a fault in the field is one of the splitting alone, and an emptied field keeps the last answer", async (door) => {
  await door.unfold("splitting");
  const before = await door.sentence("splitting");
  await door.sentence("lines");
  await door.type("Field", "strong");
  await door.until(() => document.querySelector('[data-path="/field/flux_density"]').getAttribute("aria-invalid") === "true");
  await door.until(() => document.getElementById("splitting").dataset.state === "fault");
  assert.match(await door.text("#splitting .words"), /1 fault/);
  for (const name of ["states", "lines"]) await door.sentence(name);
  await door.type("Field", "");
  await door.until(() => document.getElementById("splitting").dataset.state === "lacks" && document.querySelector("#splitting .needs button"));
  assert.equal(await door.text("#splitting .say"), before);
  assert.match(await door.text("#splitting .old-note"), /before your change/);
  assert.ok(await door.evaluate(() => document.querySelector("#splitting .pattern-part svg[role=img]").checkVisibility()));
  await door.click("Put in 0.5 T");
  assert.equal(await door.sentence("splitting"), before);
  assert.deepEqual(door.troubles, []);
}, { fragment: SPLIT, browsers: ["chromium", "firefox"] });
