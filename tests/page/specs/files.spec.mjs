// Files dropped on the page, good and bad, and files saved from it.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const value = (door, path) => door.evaluate((wanted) => document.querySelector(`[data-path="${wanted}"]`).value, path);

/** Drops a file; `size` makes one of so many zero bytes instead of the text. */
async function drop(door, name, text, size = 0) {
  await door.evaluate((fileName, content, bytes) => {
    const carried = new DataTransfer();
    carried.items.add(new File([bytes ? new Uint8Array(bytes) : content], fileName));
    document.body.dispatchEvent(new DragEvent("drop", { dataTransfer: carried, bubbles: true, cancelable: true }));
  }, name, text, size);
}

const noteThat = (door, pattern) => door.until((source) => {
  const { innerText } = document.getElementById("notes");
  return new RegExp(source, "s").test(innerText) && innerText;
}, pattern.source);

everyDoor("a dropped sheet opens and can be undone", async (door) => {
  await drop(door, "sodium.json", JSON.stringify({ rungline: 1, species: "Na", configurations: ["3s"] }));
  await door.until(() => document.querySelector('[data-path="/species"]').value === "Na");
  assert.match(await door.sentence("states"), /2\s*S\s*1\/2/);
  await door.press("Control+z");
  assert.equal(await value(door, "/species"), "Fe I");
});

everyDoor("bad files are a plain fault each, and nothing is lost", async (door) => {
  await door.type("Atom or ion", "Ne");
  await drop(door, "large.json", "", 50_000_000);
  assert.match(await noteThat(door, /50\sMB/), /at most 5 MB/);
  const bad = [
    ["cut.json", '{"rungline": 1, "species": "Fe', /ends too early/],
    ["empty.json", "", /empty/],
    ["words.txt", "3d6 4s2", /not valid JSON/],
    ["deep.json", "[".repeat(100_000), /nesting goes too deep/],
    ["list.json", "[1, 2]", /not a sheet/],
    ["number.json", "42", /not a sheet/],
    ["other.json", '{"a": 1}', /no key "rungline"/],
    ["image.png", "\u0089PNG\r\n\u001a\n\u0000\u0000", /not valid JSON/],
  ];
  for (const [name, text, words] of bad) {
    await drop(door, name, text);
    await noteThat(door, new RegExp(`${name}.*${words.source}`));
    assert.equal(await value(door, "/species"), "Ne");
  }
  // A file that can be put right says how; taking the way out opens it.
  await drop(door, "comma.json", '{"rungline": 1, "species": "Na",}');
  await noteThat(door, /comma\.json/);
  await door.evaluate(() => document.querySelector(".file-faults .way").click());
  await door.until(() => document.querySelector('[data-path="/species"]').value === "Na");
  await door.press("Control+z");
  assert.equal(await value(door, "/species"), "Ne");
  await door.evaluate(() => {
    const carried = new DataTransfer();
    carried.items.add(new File(["{}"], "a.json"));
    carried.items.add(new File(["{}"], "b.json"));
    document.body.dispatchEvent(new DragEvent("drop", { dataTransfer: carried, bubbles: true, cancelable: true }));
  });
  await noteThat(door, /one file at a time/);
  assert.deepEqual(door.troubles, []);
});

everyDoor("a sheet with an unknown key or another version opens with its faults and ways out", async (door) => {
  await drop(door, "key.json", JSON.stringify({ rungline: 1, specie: "Na" }));
  await noteThat(door, /specie/);
  await door.evaluate(() => document.querySelector('[data-note="elsewhere"] .way').click());
  await door.until(() => document.querySelector('[data-path="/species"]').value === "Na");
  await door.sentence("states");
  await drop(door, "version.json", JSON.stringify({ rungline: 7, species: "Ne" }));
  await noteThat(door, /version 7/);
  await door.evaluate(() => document.querySelector('[data-note="elsewhere"] .way').click());
  await door.sentence("states");
  assert.equal(await value(door, "/species"), "Ne");
});

everyDoor("saving gives the sheet's text under the sheet's name, and a record reproduces", async (door) => {
  // What the page hands to the browser for saving.
  await door.evaluate(() => {
    globalThis.saved = [];
    HTMLAnchorElement.prototype.click = function click() {
      globalThis.saved.push([this.download, fetchless(this.href)]);
    };
    const blobs = new Map();
    const make = URL.createObjectURL.bind(URL);
    URL.createObjectURL = (blob) => {
      const url = make(blob);
      blobs.set(url, blob);
      return url;
    };
    function fetchless(url) {
      return blobs.get(url);
    }
  });
  const saved = async (count) => {
    await door.until((wanted) => globalThis.saved.length === wanted, count);
    return door.evaluate(async () => {
      const [name, blob] = globalThis.saved.at(-1);
      return [name, await blob.text()];
    });
  };
  await door.press("Control+s");
  const [name, sheet] = await saved(1);
  assert.equal(name, "Quench furnace 2, iron in the arc.rungline.json");
  assert.equal(JSON.parse(sheet).species, "Fe I");
  await door.evaluate(() => document.querySelector("#record .rung-button").click());
  await door.click("Save the record");
  const [, record] = await saved(2);
  assert.ok(JSON.parse(record).answers.states);
  await drop(door, "r.json", record);
  await door.until(() => /reproduces: every number/.test(document.getElementById("record").innerText));
  const changed = JSON.parse(record);
  changed.answers.states.n_terms += 1;
  await drop(door, "r.json", JSON.stringify(changed));
  await door.until(() => /no longer reproduces: 1 number moved/.test(document.getElementById("record").innerText));
  assert.match(await door.text("#record .verdict table"), /n_terms/);
});
