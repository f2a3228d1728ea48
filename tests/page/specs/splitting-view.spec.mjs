// How does it split?, read and worked on the page. D₁ has four components and D₂ six (standard; for
// instance Condon & Shortley 1935, Zeeman effect of the sodium D lines).

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const line = (upper) => `v=1&species=Na&configurations.0=3s&configurations.1=3p&field.flux_density=0.5+T&field.view=across&line.upper=3p+${upper}&line.lower=3s+2S1/2`;

/** Keeps what the page saves as files. */
function listen() {
  window.files = [];
  const make = URL.createObjectURL;
  URL.createObjectURL = (blob) => {
    blob.text().then((text) => window.files.push({ type: blob.type, size: blob.size, text: blob.type === "image/svg+xml" ? text : "" }));
    return make.call(URL, blob);
  };
}

for (const [upper, components] of [["2P1/2", 4], ["2P3/2", 6]]) {
  everyDoor(`3p–3s from ${upper} has ${components} components in table and picture`, async (door) => {
    await door.unfold("splitting");
    await door.until(() => document.querySelector("#splitting .pattern-part .stage svg"));
    assert.equal(await door.evaluate(() => document.querySelector("#splitting .components-table table").tBodies[0].rows.length), components);
    const bars = await door.evaluate(() => document.querySelectorAll('#splitting .pattern-part .stage svg[role=img] line[stroke-width="3"]').length);
    assert.equal(bars, components);
    // σ⁺ filled, σ⁻ hollow: as many of each.
    const fills = await door.evaluate(() => [...document.querySelectorAll("#splitting .pattern-part .stage polygon")].map((each) => each.getAttribute("fill") === "var(--sheet)"));
    assert.equal(fills.filter(Boolean).length, fills.length / 2);
    assert.deepEqual(door.troubles, []);
  }, { fragment: line(upper) });
}

everyDoor("the cursor tells value, unit and kind, in the unit that is chosen", async (door) => {
  await door.unfold("splitting");
  await door.until(() => document.querySelector("#splitting .pattern-part .stage svg"));
  await door.page.focus("#splitting .pattern-part .stage");
  await door.press("End");
  assert.match(await door.text("#splitting .pattern-part .reading"), /^σ\+, 3s 2S1\/2 M −1\/2 to 3p 2Po?1\/2 M 1\/2: offset 1\.\d+\sμB\sB\s(computed|exact); strength .+ 0\.\d+\s(computed|exact)/);
  await door.evaluate(() => {
    const box = document.querySelector('#splitting select[aria-label="Offsets in"]');
    box.value = "ghz";
    box.dispatchEvent(new Event("change"));
  });
  await door.page.focus("#splitting .pattern-part .stage");
  await door.press("Home", "End");
  // 4/3 μ_B B/h at 0.5 T is about 9.3 GHz for the outer component of D₁.
  assert.match(await door.text("#splitting .pattern-part .reading"), /offset 9\.3\d*\sGHz/);
}, { fragment: line("2P1/2") });

everyDoor("the plus key zooms, 0 shows all again", async (door) => {
  await door.unfold("splitting");
  await door.until(() => document.querySelector("#splitting .pattern-part .stage svg"));
  const bars = () => door.evaluate(() => document.querySelectorAll('#splitting .pattern-part .stage svg[role=img] line[stroke-width="3"]').length);
  await door.page.focus("#splitting .pattern-part .stage");
  await door.press("End");
  for (let turn = 0; turn < 3; turn += 1) await door.page.keyboard.press("+");
  assert.ok((await bars()) < 6);
  await door.press("0");
  assert.equal(await bars(), 6);
}, { fragment: line("2P3/2") });

everyDoor("the picture is saved as an SVG that stands by itself, and as PNG", async (door) => {
  await door.unfold("splitting");
  await door.until(() => document.querySelector("#splitting .pattern-part .stage svg"));
  await door.evaluate(() => [...document.querySelectorAll("#splitting .pattern-part .picture-tools button")].find((each) => each.textContent === "Save SVG").click());
  const svg = await door.until(() => window.files.find((file) => file.type === "image/svg+xml"));
  assert.match(svg.text, /^<\?xml version="1\.0" encoding="UTF-8"\?>\n<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg"/);
  assert.match(svg.text, /<title>Pattern of 3p 2P3\/2 to 3s 2S1\/2/);
  assert.equal(/style=|class=|var\(|href=|url\(/.test(svg.text), false);
  assert.equal(svg.text.match(/<polygon /g).length, 4);
  await door.evaluate(() => [...document.querySelectorAll("#splitting .pattern-part .picture-tools button")].find((each) => each.textContent === "Save PNG").click());
  const png = await door.until(() => window.files.find((file) => file.type === "image/png"));
  assert.ok(png.size > 2000);
  assert.deepEqual(door.troubles, []);
}, { fragment: line("2P3/2"), before: listen });

everyDoor("a stronger field moves the offsets in cm⁻¹", async (door) => {
  await door.unfold("splitting");
  const largest = () => door.evaluate(() => Math.max(...[...document.querySelector("#splitting .components-table table").tBodies[0].rows].map((row) => Number(row.cells[3].textContent.replace("\u2212", "-")))));
  await door.until(() => document.querySelector("#splitting .components-table table"));
  await door.evaluate(() => {
    const box = document.querySelector('#splitting select[aria-label="Offsets in"]');
    box.value = "offset";
    box.dispatchEvent(new Event("change"));
  });
  const before = await largest();
  await door.evaluate(() => document.querySelector("#splitting").scrollIntoView());
  await door.type("Field", "1 T");
  await door.until((old) => Math.max(...[...document.querySelector("#splitting .components-table table").tBodies[0].rows].map((row) => Number(row.cells[3].textContent.replace("\u2212", "-")))) > 1.9 * old, before);
}, { fragment: line("2P3/2") });

everyDoor("the table shows the offset in the chosen unit, and copies have it in every unit", async (door) => {
  await door.unfold("splitting");
  await door.until(() => document.querySelector("#splitting .components-table table"));
  assert.equal(await door.evaluate(() => [...document.querySelectorAll("#splitting .components-table thead th")].filter((head) => /^offset\s\(/.test(head.textContent)).length), 1);
  await door.evaluate(() => [...document.querySelectorAll("#splitting .components-table .copy-list button")].find((each) => each.textContent === "Copy as CSV").click());
  const [head] = (await door.until(() => window.clips.at(-1))).split("\r\n");
  for (const unit of ["mu_B B", "cm-1", "GHz", "pm"]) assert.ok(head.includes(`offset (${unit})`), head);
}, { fragment: line("2P3/2"), before: () => {
  window.clips = [];
  Object.defineProperty(navigator, "clipboard", { value: { writeText: async (text) => { window.clips.push(text); } } });
} });

everyDoor("the splitting is free of what axe finds", async (door) => {
  await door.unfold("splitting");
  await door.evaluate(() => { for (const part of document.querySelectorAll("#splitting .part")) part.open = true; });
  assert.deepEqual(await door.axe(), []);
  assert.equal(await door.scrollsSideways(), false);
}, { width: 360, dark: true, fragment: line("2P3/2"), doors: ["file"] });

everyDoor("two fingers enlarge the picture, one finger scrolls the page, a drag of the mouse enlarges a part [Chromium's protocol sends touches]", async (door) => {
  await door.unfold("splitting");
  await door.until(() => document.querySelector("#splitting .pattern-part .stage svg"));
  const bars = () => door.evaluate(() => document.querySelectorAll('#splitting .pattern-part .stage svg[role=img] line[stroke-width="3"]').length);
  const middle = async () => {
    await door.evaluate(() => document.querySelector("#splitting .pattern-part .stage").scrollIntoView({ block: "center" }));
    const { x, y, width, height } = await (await door.page.$("#splitting .pattern-part .stage")).boundingBox();
    return [x + width / 2, y + height / 2];
  };
  const session = await door.page.createCDPSession();
  const touch = (type, points) => session.send("Input.dispatchTouchEvent", { type, touchPoints: points.map(([x, y], id) => ({ x, y, id })) });
  let [x, y] = await middle();
  await touch("touchStart", [[x - 40, y], [x + 40, y]]);
  for (let step = 1; step <= 8; step += 1) await touch("touchMove", [[x - 40 - 15 * step, y], [x + 40 + 15 * step, y]]);
  await touch("touchEnd", []);
  assert.ok((await bars()) < 6);
  assert.equal(await door.evaluate(() => window.visualViewport.scale), 1);

  const before = await door.evaluate(() => window.scrollY);
  await touch("touchStart", [[x, y]]);
  for (let step = 1; step <= 8; step += 1) await touch("touchMove", [[x, y - 20 * step]]);
  await touch("touchEnd", []);
  await door.until((old) => window.scrollY > old + 40, before);

  await door.click("Whole picture");
  assert.equal(await bars(), 6);
  [x, y] = await middle();
  await door.page.mouse.move(x + 30, y - 20);
  await door.page.mouse.down();
  await door.page.mouse.move(x + 200, y - 20, { steps: 6 });
  await door.page.mouse.up();
  assert.ok((await bars()) < 6);
}, { fragment: line("2P3/2"), width: 820, browsers: ["chromium"] });
