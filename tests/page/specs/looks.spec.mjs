// The page at every width: accessibility rules, reflow, zoom, targets, forced colours, print.

import assert from "node:assert/strict";
import { readFileSync, readdirSync } from "node:fs";
import { toAddress } from "../../../www/js/address.js";
import { everyDoor } from "../driver/door.mjs";

const FOLDER = new URL("../../examples/", import.meta.url);
const EXAMPLES = readdirSync(FOLDER).filter((name) => name.endsWith(".json")).sort()
  .map((name) => JSON.parse(readFileSync(new URL(name, FOLDER), "utf8")));

/** Shows an example and unfolds every rung. */
async function show(door, example) {
  await door.evaluate((fragment) => { location.hash = fragment; }, toAddress(example));
  await door.until((title) => document.querySelector("#title-block .title")?.textContent === title, example.title);
  await door.evaluate(() => {
    for (const button of document.querySelectorAll('.rung-button[aria-expanded="false"], #atom[aria-expanded="false"]')) button.click();
  });
  await door.sentence(example.level ? "splitting" : "states");
  await door.until(() => [...document.querySelectorAll(".rung:not(#record)")].every((rung) => rung.dataset.state === "lacks"
    || (rung.dataset.state === "answered" && rung.querySelector(".evidence-body").childElementCount > 0)));
}

for (const width of [360, 820, 1400]) {
  for (const dark of [false, true]) {
    everyDoor(`axe finds nothing on any example, ${width} px, ${dark ? "dark" : "light"}`, async (door) => {
      for (const example of EXAMPLES) {
        await show(door, example);
        assert.deepEqual(await door.axe(), [], example.title);
        assert.equal(await door.scrollsSideways(), false, example.title);
      }
      assert.deepEqual(door.troubles, []);
    }, { width, dark, browsers: ["chromium"], doors: ["file"] });
  }
}

everyDoor("axe finds nothing with every panel open, at fault and lacking", async (door) => {
  await door.click("Settings");
  assert.deepEqual(await door.axe(), []);
  await door.click("Open");
  assert.deepEqual(await door.axe(), []);
  await door.click("Chart of the elements");
  await door.until(() => document.querySelector(".chart-box").childElementCount > 0);
  // The click has scrolled the page; what is half under the sticky head is no target of its own size there.
  await door.evaluate(() => scrollTo(0, 0));
  assert.deepEqual(await door.axe(), []);
  await door.type("Configuration", "2p7");
  await door.press("Tab");
  await door.until(() => document.querySelector(".way"));
  assert.deepEqual(await door.axe(), []);
}, { width: 820 });

for (const [what, options] of [
  ["320 px", { width: 320, height: 640 }],
  ["1280 px at 200 %", { width: 1280, height: 900, zoom: 2 }],
  ["1280 px at 400 %", { width: 1280, height: 1024, zoom: 4 }],
]) {
  everyDoor(`nothing scrolls sideways at ${what}, also with wide text spacing`, async (door) => {
    await show(door, EXAMPLES[1]);
    assert.equal(await door.scrollsSideways(), false);
    await door.evaluate(() => {
      // The override of WCAG 2.2, success criterion 1.4.12.
      const spacing = new CSSStyleSheet();
      spacing.replaceSync("* { line-height: 1.5 !important; letter-spacing: 0.12em !important; word-spacing: 0.16em !important } p { margin-bottom: 2em !important }");
      document.adoptedStyleSheets = [...document.adoptedStyleSheets, spacing];
    });
    assert.equal(await door.scrollsSideways(), false);
  }, options);
}

everyDoor("on a phone the first visit shows the answer's sentence on the first screen", async (door) => {
  await door.sentence("states");
  const bottom = await door.evaluate(() => document.querySelector("#states .say").getBoundingClientRect().bottom);
  assert.ok(bottom < 740 - 44, `${bottom} px`);
}, { width: 360, height: 740 });

for (const width of [360, 820, 1400]) {
  everyDoor(`the head stays and is at most 56 px once scrolled, ${width} px`, async (door) => {
    await show(door, EXAMPLES[1]);
    await door.evaluate(() => window.scrollTo(0, 900));
    const seen = await door.until(() => {
      const { bottom } = document.getElementById("head").getBoundingClientRect();
      return window.scrollY > 500 && bottom;
    });
    assert.ok(seen > 30 && seen <= 56, `${seen} px`);
  }, { width });
}

everyDoor("what can be touched in the frame is at least 44 px", async (door) => {
  await show(door, EXAMPLES[1]);
  await door.evaluate(() => document.querySelector('#atom[aria-expanded="false"]')?.click());
  const small = await door.evaluate(() => [...document.querySelectorAll(".head button, #editor button, #editor input, #editor select, #editor summary, .rung-button, .question-fields input, .hang > .actions button, .foot-bar button, .copy-say")]
    .filter((node) => node.checkVisibility())
    .map((node) => [node.textContent || node.id, node.getBoundingClientRect()])
    .filter(([, box]) => box.height < 44 || box.width < 44)
    .map(([name, box]) => `${name}: ${box.width} × ${box.height}`));
  assert.deepEqual(small, []);
}, { width: 360 });

everyDoor("text of fields is never under 16 px, and nothing is corrected while typing", async (door) => {
  const found = await door.evaluate(() => [...document.querySelectorAll("input[type=text], select, textarea")].map((node) => ({
    size: parseFloat(getComputedStyle(node).fontSize),
    quiet: node.localName !== "input" || (node.autocapitalize === "off" || node.getAttribute("autocapitalize") === "off") && node.getAttribute("autocorrect") === "off" && !node.spellcheck && node.autocomplete === "off",
  })));
  assert.ok(found.length > 4);
  for (const { size, quiet } of found) assert.ok(size >= 16 && quiet);
});

everyDoor("in forced colours every stroke keeps its mark", async (door) => {
  await show(door, EXAMPLES[1]);
  const strokes = await door.evaluate(() => [...document.querySelectorAll(".stroke .first")].map((node) => parseFloat(getComputedStyle(node).borderTopWidth)));
  assert.ok(strokes.every((width) => width >= 3), strokes.join());
}, { forcedColors: true });

everyDoor("nothing moves under reduced motion", async (door) => {
  const moving = await door.evaluate(() => document.getAnimations().length);
  assert.equal(moving, 0);
}, { reducedMotion: true });

everyDoor("the printed page has the answers and neither rail nor fields", async (door) => {
  await show(door, EXAMPLES[1]);
  await door.page.emulateMediaType("print");
  const seen = await door.evaluate(() => {
    const visible = (selector) => [...document.querySelectorAll(selector)].some((node) => node.checkVisibility());
    return { say: visible(".say"), title: visible(".title"), words: visible(".words-line"), editor: visible("#editor"), fields: visible(".question-fields"), bar: visible(".foot-bar"), paper: getComputedStyle(document.documentElement).backgroundColor, ink: getComputedStyle(document.querySelector(".say")).color };
  });
  assert.deepEqual(seen, { say: true, title: true, words: false, editor: false, fields: false, bar: false, paper: "rgb(255, 255, 255)", ink: "rgb(0, 0, 0)" });
  assert.ok((await door.pdf()).length > 5000);
}, { dark: true, browsers: ["chromium"] });

everyDoor("light or dark as chosen, over what the system says", async (door) => {
  const paper = () => door.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
  assert.equal(await paper(), "rgb(19, 24, 25)");
  await door.click("Settings");
  await door.evaluate(() => {
    const select = [...document.querySelectorAll("select")].find((node) => [...node.options].some((option) => option.value === "light"));
    select.value = "light";
    select.dispatchEvent(new Event("change"));
  });
  assert.equal(await paper(), "rgb(244, 245, 241)");
  await door.page.reload({ waitUntil: "domcontentloaded" });
  assert.equal(await paper(), "rgb(244, 245, 241)");
}, { dark: true });

everyDoor("headings and landmarks tell the page's order", async (door) => {
  const seen = await door.evaluate(() => ({
    headings: [...document.querySelectorAll("h1, h2, h3, h4")].filter((node) => node.checkVisibility()).map((node) => Number(node.localName[1])),
    landmarks: ["header", "main", "footer"].every((name) => document.querySelectorAll(name).length === 1),
    questions: [...document.querySelectorAll(".rung .question")].map((node) => node.textContent),
  }));
  assert.equal(seen.headings[0], 1);
  assert.equal(seen.headings.filter((level) => level === 1).length, 1);
  seen.headings.forEach((level, index) => assert.ok(index === 0 || level <= seen.headings[index - 1] + 1));
  assert.ok(seen.landmarks);
  assert.deepEqual(seen.questions, ["Which states?", "Which lines?", "How does it split?", "Record"]);
});
