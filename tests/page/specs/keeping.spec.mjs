// What is kept: over a reload, in the address, between tabs, and when the storage is refused.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const ATOM = "Atom or ion";
const value = (door, path) => door.evaluate((wanted) => document.querySelector(`[data-path="${wanted}"]`).value, path);
const notes = (door) => door.evaluate(() => document.getElementById("notes").innerText);

/** The sheet is kept within a second. */
const kept = () => new Promise((resolve) => setTimeout(resolve, 1000));

async function reload(door) {
  await door.page.reload({ waitUntil: "domcontentloaded" });
  await door.until(() => !document.getElementById("cannot-start") && document.querySelector(".rung"));
}

everyDoor("undo reaches back over a reload, over typing, ways out and opened examples", async (door) => {
  await door.type(ATOM, "Na");
  await door.press("Tab");
  await door.type("Configuration", "3p7");
  await door.until(() => document.querySelector("#editor .way"));
  await door.evaluate(() => document.querySelector("#editor .way").click());
  const mended = await value(door, "/configurations/0");
  assert.notEqual(mended, "3p7");
  await door.click("Open");
  await door.click("Afterglow of oxygen");
  await door.until(() => document.querySelector('[data-path="/species"]').value === "O I");
  await kept();
  await reload(door);
  assert.equal(await value(door, "/species"), "O I");
  await door.click("Undo");
  assert.equal(await value(door, "/species"), "Na");
  assert.equal(await value(door, "/configurations/0"), mended);
  await door.click("Undo");
  assert.equal(await value(door, "/configurations/0"), "3p7");
  await door.press("Control+z");
  await door.press("Control+z");
  assert.equal(await value(door, "/species"), "Fe I");
  await door.press("Control+Shift+z");
  assert.equal(await value(door, "/species"), "Na");
});

everyDoor("two hundred steps and more survive a reload", async (door) => {
  await door.evaluate(() => {
    const input = document.querySelector('[data-path="/title"]');
    for (let n = 0; n < 230; n += 1) {
      input.value = `title ${n}`;
      input.dispatchEvent(new Event("input", { bubbles: true }));
      input.dispatchEvent(new Event("blur"));
    }
  });
  await kept();
  await reload(door);
  await door.evaluate(() => {
    const undo = [...document.querySelectorAll("#words button")].find((button) => button.textContent === "Undo");
    for (let n = 0; n < 220; n += 1) undo.click();
  });
  assert.equal(await value(door, "/title"), "title 9");
});

everyDoor("the address holds the sheet, readable", async (door) => {
  await door.type(ATOM, "Na I");
  await door.type("Configuration", "3s");
  await kept();
  assert.match(await door.evaluate(() => location.hash), /^#v=1&.*species=Na\+I&configurations\.0=3s/);
});

everyDoor("a sheet that comes with an address opens at its question, whatever was folded before, and stays folded after", async (door) => {
  const isOpen = (name) => door.evaluate((id) => document.querySelector(`#${id} .rung-button`).getAttribute("aria-expanded") === "true", name);
  const fold = (name) => door.evaluate((id) => document.querySelector(`#${id} .rung-button`).click(), name);
  assert.ok(await isOpen("states"));
  await fold("states");
  await fold("splitting");
  await fold("splitting");
  assert.ok(!(await isOpen("splitting")));
  await kept();
  await door.evaluate(() => { location.hash = "#v=1&species=Na+I&configurations.0=3s&configurations.1=3p&field.flux_density=0.2+T"; });
  await door.until(() => document.querySelector('[data-path="/species"]').value === "Na I");
  assert.ok(await isOpen("splitting"));
  assert.ok(!(await isOpen("states")));
  await fold("splitting");
  await kept();
  await reload(door);
  assert.equal(await value(door, "/species"), "Na I");
  assert.ok(!(await isOpen("splitting")));
});

everyDoor("an address never overwrites the stored sheet", async (door) => {
  await door.type(ATOM, "Ne");
  await kept();
  await door.openTab({ ...door.options, fragment: "v=1&species=Ti%2B" });
  assert.equal(await value(door, "/species"), "Ti+");
  assert.match(await notes(door), /Your own sheet is untouched/);
  await door.type(ATOM, "V");
  await kept();
  await reload(door);
  assert.equal(await value(door, "/species"), "V");
  await door.click("Back to mine");
  assert.equal(await value(door, "/species"), "Ne");
  assert.doesNotMatch(await notes(door), /came with the address/);
});

everyDoor("a sheet kept from an address can be undone to the own one", async (door) => {
  await door.type(ATOM, "Ne");
  await kept();
  await door.openTab({ ...door.options, fragment: "v=1&species=Ti%2B" });
  await door.click("Keep this sheet");
  await kept();
  await reload(door);
  assert.equal(await value(door, "/species"), "Ti+");
  await door.click("Undo");
  assert.equal(await value(door, "/species"), "Ne");
});

everyDoor("two tabs do not overwrite each other", async (door) => {
  await door.type(ATOM, "Ne");
  await kept();
  const first = door.page;
  await door.openTab({ ...door.options, fragment: "" });
  const second = door.page;
  assert.equal(await value(door, "/species"), "Ne");
  await door.type(ATOM, "Ar");
  await kept();
  door.page = first;
  await first.bringToFront();
  await door.until(() => /Another tab/.test(document.getElementById("notes").innerText));
  await door.type(ATOM, "Kr");
  await kept();
  door.page = second;
  await second.bringToFront();
  await reload(door);
  assert.equal(await value(door, "/species"), "Ar");
  door.page = first;
  await first.bringToFront();
  assert.equal(await value(door, "/species"), "Kr");
});

everyDoor("storage refused is one line, and all else works", async (door) => {
  assert.match(await notes(door), /refuses its storage/);
  await door.type(ATOM, "Na");
  await door.type("Configuration", "");
  assert.match(await door.sentence("states"), /2\s*S\s*1\/2/);
  await kept();
  await reload(door);
  assert.equal(await value(door, "/species"), "Na");
  assert.deepEqual(door.troubles, []);
}, {
  before: () => {
    for (const name of ["localStorage", "sessionStorage"]) {
      Object.defineProperty(window, name, { get() { throw new DOMException("refused", "SecurityError"); } });
    }
  },
});

everyDoor("storage full is one line, and all else works", async (door) => {
  await door.type(ATOM, "Na");
  await door.type("Configuration", "");
  await door.until(() => /storage is full/.test(document.getElementById("notes").innerText));
  assert.match(await door.sentence("states"), /2\s*S\s*1\/2/);
  assert.deepEqual(door.troubles, []);
}, {
  before: () => {
    Storage.prototype.setItem = () => { throw new DOMException("full", "QuotaExceededError"); };
  },
});

everyDoor("an address of another version, or one that cannot be read, is a plain line", async (door) => {
  assert.match(await notes(door), /version 9.*reads version 1/s);
  assert.equal(await value(door, "/species"), "Fe I");
}, { fragment: "v=9&species=Na" });

everyDoor("a sheet too long for an address says so and is still kept", async (door) => {
  await door.evaluate(() => {
    const input = document.querySelector('[data-path="/note"]');
    input.value = "y".repeat(6000);
    input.dispatchEvent(new Event("input", { bubbles: true }));
  });
  await kept();
  assert.match(await notes(door), /too long for an address/);
  assert.equal(await door.evaluate(() => location.hash), "");
  await reload(door);
  assert.equal((await value(door, "/note")).length, 6000);
});
