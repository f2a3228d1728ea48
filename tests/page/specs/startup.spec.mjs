// When the page cannot start, its own text says which part is missing and what to do.

import assert from "node:assert/strict";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { after } from "node:test";
import { pathToFileURL } from "node:url";
import { SITE, everyDoor } from "../driver/door.mjs";

/** The text that a person sees, once it says why. */
const certain = (door) => door.until(() => {
  const box = document.getElementById("cannot-start");
  return box?.checkVisibility() && box.classList.contains("certain") && box.innerText;
});

everyDoor("without WebAssembly the page says so", async (door) => {
  assert.match(await certain(door), /This browser has no WebAssembly\..*Use a browser/s);
}, { start: false, flags: ["--js-flags=--jitless"], preferences: { "javascript.options.wasm": false } });

everyDoor("without workers the page says so", async (door) => {
  assert.match(await certain(door), /does not let the page start a worker\..*try another browser/s);
}, { start: false, before: () => { delete globalThis.Worker; } });

everyDoor("a worker that is refused is told from one that is missing by its words", async (door) => {
  assert.match(await certain(door), /does not let the page start a worker\..*not here/s);
}, { start: false, before: () => { globalThis.Worker = class { constructor() { throw new Error("not here"); } }; } });

everyDoor("a core that is cut short is called broken", async (door) => {
  assert.match(await certain(door), /could not be started\..*Load it again or copy it again/s);
}, {
  start: false,
  before: () => {
    const cut = () => Promise.reject(new WebAssembly.CompileError("cut short"));
    WebAssembly.compile = cut;
    WebAssembly.compileStreaming = cut;
  },
});

// Only the one file is packed.
everyDoor("without what unpacks the file the page says so", async (door) => {
  assert.match(await certain(door), /could not be started\..*has no DecompressionStream/s);
}, { start: false, doors: ["file"], before: () => { delete globalThis.DecompressionStream; } });

const folder = mkdtempSync(join(tmpdir(), "rungline-cut-"));
after(() => rmSync(folder, { recursive: true, force: true }));
const whole = readFileSync(join(SITE, "rungline.html"));

for (const part of ["style", "worker", "core", "app"]) {
  // In the middle of the part's last piece: what stands before it is whole, the rest is missing.
  const tag = `data-part="${part}" data-last>`;
  const begin = whole.indexOf(tag) + tag.length;
  assert.ok(begin > tag.length, `no ${tag} in the one file`);
  const file = join(folder, `${part}.html`);
  writeFileSync(file, whole.subarray(0, Math.floor((begin + whole.indexOf("</script>", begin)) / 2)));
  everyDoor(`a file that is cut short in its ${part} is called broken`, async (door) => {
    assert.match(await certain(door), /could not be started\..*Load it again or copy it again/s);
    assert.equal(await door.evaluate(() => document.getElementById("states")?.dataset.state === "answered"), false);
  }, { start: false, doors: ["file"], address: pathToFileURL(file).href });
}

everyDoor("without scripts the page says so before anything else", async (door) => {
  const page = await door.context.newPage();
  await page.setJavaScriptEnabled(false);
  await page.goto(door.address, { waitUntil: "load" });
  door.page = page;
  // It shows itself after a moment, so that it does not flash up where the page does start.
  const text = await door.until(() => {
    const box = document.getElementById("cannot-start");
    return getComputedStyle(box).visibility === "visible" && box.innerText;
  });
  assert.match(text, /Scripts are switched off here\..*Allow scripts for this page/s);
}, { browsers: ["chromium"] });

everyDoor("once it has started, no such text is left", async (door) => {
  assert.equal(await door.text("#cannot-start"), null);
  assert.deepEqual(door.troubles, []);
});
