// The static site after one visit: without a network, beside a newer version, after a bad download.

import assert from "node:assert/strict";
import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { SITE, everyDoor } from "../driver/door.mjs";
import { serve } from "../driver/server.mjs";

const integrity = (bytes) => `sha256-${createHash("sha256").update(bytes).digest("base64")}`;
const read = (name) => readFileSync(join(SITE, name));

/** Another version of the site: its start page says so, and the list of files agrees with it. */
function newVersion(mark) {
  const start = Buffer.from(read("index.html").toString().replace("<html ", `<html data-version="${mark}" `));
  const keeper = read("sw.js").toString();
  const cache = /rungline-[0-9a-f]{64}/.exec(keeper)[0];
  const other = keeper
    .replaceAll(cache, `rungline-${createHash("sha256").update(mark).digest("hex")}`)
    .replace(integrity(read("index.html")), integrity(start));
  assert.notEqual(other, keeper);
  return [["index.html", start], ["sw.js", Buffer.from(other)]];
}

/** One test for each browser, with a server of its own. */
function everySite(name, body) {
  everyDoor(name, async (door) => {
    const site = await serve(SITE);
    try {
      await body(door, site);
    } finally {
      await site.close();
    }
  }, { doors: ["site"], start: false });
}

async function open(door, site) {
  await door.openTab({ ...door.options, address: site.url });
  return door.page;
}

/** Resolves once the site is kept and no newer version is on its way. */
async function kept(page) {
  await page.evaluate(() => navigator.serviceWorker.ready.then((registration) => registration.active.state));
}

async function update(page) {
  await page.evaluate(async () => {
    const registration = await navigator.serviceWorker.getRegistration();
    try {
      await registration.update();
    } catch {
      // A failed installation is what some tests are about.
    }
  });
}

const versionOf = (page) => page.evaluate(() => document.documentElement.dataset.version ?? "first");
const works = (page) => page.evaluate(() => document.getElementById("cannot-start") === null);

everySite("once visited, the site opens without a network", async (door, site) => {
  const page = await open(door, site);
  await kept(page);
  site.down = true;
  for (const turn of [1, 2]) {
    await page.reload({ waitUntil: "domcontentloaded" });
    await door.started();
    assert.ok(await works(page), `reload ${turn}`);
  }
  await open(door, site);
  await door.started();
  assert.ok(await works(door.page), "a new tab");
});

everySite("every file that the list names is kept, and no other is asked for", async (door, site) => {
  const page = await open(door, site);
  await kept(page);
  const names = await page.evaluate(async () => {
    const [name] = await caches.keys();
    const requests = await (await caches.open(name)).keys();
    return { caches: await caches.keys(), files: requests.map((request) => new URL(request.url).pathname.slice(1)).sort() };
  });
  assert.equal(names.caches.length, 1);
  assert.match(names.caches[0], /^rungline-[0-9a-f]{64}$/);
  for (const wanted of [/^index\.html$/, /^app\.\w+\.js$/, /^style\.\w+\.css$/, /^core\.\w+\.wasm$/, /^manifest\.webmanifest$/]) {
    assert.equal(names.files.filter((name) => wanted.test(name)).length, 1, String(wanted));
  }
});

everySite("a newer version waits while tabs are open, and says so", async (door, site) => {
  const first = await open(door, site);
  await door.started();
  await kept(first);
  await first.reload({ waitUntil: "domcontentloaded" });
  await door.started();
  const second = await open(door, site);
  await door.started();
  for (const [name, bytes] of newVersion("two")) site.replaced.set(name, bytes);
  await update(second);
  for (const page of [first, second]) {
    door.page = page;
    assert.match(await door.until(() => document.querySelector('[data-note="version"]')?.textContent), /newer version/i);
  }
  // Neither reloading nor a third tab mixes the two.
  await second.reload({ waitUntil: "domcontentloaded" });
  assert.equal(await versionOf(second), "first");
  const third = await open(door, site);
  assert.equal(await versionOf(third), "first");
  // Taking it starts it in this tab; the others go on until they are loaded again.
  door.page = third;
  await door.until(() => document.querySelector('[data-note="version"] button'));
  await door.evaluate(() => document.querySelector('[data-note="version"] button').click());
  await door.until(() => document.documentElement.dataset.version === "two");
  await door.started();
  assert.ok(await works(first), "the first tab still works");
});

everySite("without tabs, the newer version has taken over at the next visit", async (door, site) => {
  const page = await open(door, site);
  await door.started();
  await kept(page);
  for (const [name, bytes] of newVersion("two")) site.replaced.set(name, bytes);
  await update(page);
  await door.until(() => document.querySelector('[data-note="version"]'));
  const blank = await door.context.newPage();
  for (const tab of await door.context.pages()) if (tab !== blank) await tab.close();
  // Activation follows the closing of the last tab, a moment later.
  let seen = "first";
  for (let turn = 0; turn < 20 && seen === "first"; turn += 1) {
    await new Promise((resolve) => setTimeout(resolve, 150));
    const next = await open(door, site);
    seen = await versionOf(next);
    if (seen === "first") await next.close();
  }
  assert.equal(seen, "two");
  site.down = true;
  await door.page.reload({ waitUntil: "domcontentloaded" });
  await door.started();
  assert.equal(await versionOf(door.page), "two");
});

for (const [what, spoil] of [
  ["that fails", (site) => site.replaced.set("manifest.webmanifest", 500)],
  ["with a file of another version", (site) => site.replaced.set("manifest.webmanifest", Buffer.from("{}"))],
]) {
  everySite(`a download ${what} leaves the old version whole`, async (door, site) => {
    const page = await open(door, site);
    await door.started();
    await kept(page);
    await page.reload({ waitUntil: "domcontentloaded" });
    await door.started();
    for (const [name, bytes] of newVersion("bad")) site.replaced.set(name, bytes);
    spoil(site);
    await update(page);
    await door.until(async () => {
      const registration = await navigator.serviceWorker.getRegistration();
      return registration.active && !registration.installing && !registration.waiting;
    });
    assert.equal(await page.evaluate(async () => (await caches.keys()).length), 1);
    await page.reload({ waitUntil: "domcontentloaded" });
    await door.started();
    assert.equal(await versionOf(page), "first");
    assert.equal(await door.text('[data-note="version"]'), null);
    site.down = true;
    await page.reload({ waitUntil: "domcontentloaded" });
    await door.started();
  });
}
