// Which lines?, with energies: read off the screen. The sodium resonance line: the row of Morton 2003 in
// tests/vectors/resonance_lines_fvalues.csv (wavelengths in air and vacuum, energy, A, f).

import assert from "node:assert/strict";
import { mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { everyDoor } from "../driver/door.mjs";

const SODIUM = "v=1&species=Na&configurations.0=3s&configurations.1=3p&configurations.2=3d";
const CARBON = "v=1&species=C&configurations.0=2p2&configurations.1=2p+3s";

const [, , , , , , airAngstrom, vacuumAngstrom, , energy, , , rate, oscillator] = readFileSync(new URL("../../vectors/resonance_lines_fvalues.csv", import.meta.url), "utf8")
  .split("\n").find((line) => /^Morton2003,Na,I,3s 2S J=1\/2 GROUND,1v,3p 2Po,/.test(line)).split(",");

/** The cells of the list of lines: {head: cell} for each row that is drawn. */
const list = (door) => door.evaluate(() => {
  const table = document.querySelector("#lines .lines-table table");
  const heads = [...table.tHead.rows[0].cells].map((cell) => cell.querySelector(".sort > span").textContent.replace(/\u00a0.*/, ""));
  return [...table.querySelectorAll("tbody:not(.spacer) tr")].map((row) => ({
    id: row.dataset.id, chosen: row.getAttribute("aria-current") === "true",
    ...Object.fromEntries([...row.cells].map((cell, i) => [heads[i], cell.textContent.replace("▸", "").replaceAll("\u2212", "-")])),
    kinds: [...row.querySelectorAll("[class*=kind-]")].map((each) => each.className),
  }));
});

const RESONANCE = "line:3s 2S1/2/3p 2P1/2/E1";
const resonance = async (door) => (await list(door)).find(({ id }) => id === RESONANCE);

/** Opens the rung and waits for the list; all the folds of its fields with it. */
async function openLines(door) {
  await door.sentence("lines");
  await door.unfold("lines");
  await door.until(() => document.querySelector("#lines .lines-table table"));
  await door.evaluate(() => { for (const part of document.querySelectorAll("#lines .question-fields details")) part.open = true; });
}

/** Takes a word in the select with this label. */
const take = (door, label, value) => door.evaluate((wanted, word) => {
  const box = [...document.querySelectorAll("#lines select")].find((each) => (each.getAttribute("aria-label") ?? each.labels[0]?.textContent) === wanted);
  box.value = word;
  box.dispatchEvent(new Event("change", { bubbles: true }));
}, label, value);

/** A number as it is shown, "6.139 × 10⁷" among them. */
const shown = (text) => {
  const [, mantissa, , exponent] = /^([-\d.]+)(\s×\s10(.+))?$/.exec(text);
  return Number(mantissa) * 10 ** Number(exponent ?? 0);
};

everyDoor("sodium’s resonance line from measured levels has the published wavelengths, and says that it is measured", async (door) => {
  await openLines(door);
  const computed = await resonance(door);
  assert.ok(Math.abs(shown(computed["in vacuum"]) / (Number(vacuumAngstrom) / 10) - 1) < 0.1, computed["in vacuum"]);
  assert.match(await door.text("#lines .lines-table thead"), /computed/);
  await door.type("Level", "3p 2P1/2");
  await door.type("Measured energy", `${energy} cm-1`);
  await door.click("Add a level");
  await door.sentence("lines");
  await take(door, "Tell wavelengths", "air");
  await door.until((id, wanted) => document.querySelector(`#lines tr[data-id="${id}"]`)?.textContent.includes(wanted), RESONANCE, (Number(vacuumAngstrom) / 10).toFixed(3));
  const found = await resonance(door);
  assert.equal(found["in vacuum"], (Number(vacuumAngstrom) / 10).toFixed(3));
  assert.equal(found["in air"], (Number(airAngstrom) / 10).toFixed(3));
  assert.ok(found.kinds.some((each) => /kind-(measured|entered)/.test(each)), String(found.kinds));
  // Without polarisation of the core f is a little high; A and f of the same line agree within a few per cent.
  assert.ok(Math.abs(shown(found.A) / Number(rate) - 1) < 0.15, found.A);
  assert.ok(Math.abs(shown(found.gf) / 2 / Number(oscillator) - 1) < 0.15, found.gf);
  // In other units the same line stands elsewhere: 1 eV is 8065.544 cm⁻¹ (CODATA 2022).
  await take(door, "Places in", "eV");
  await door.until(() => document.querySelector("#lines .lines-table thead").textContent.includes("photon energy"));
  assert.ok(Math.abs(shown((await resonance(door))["photon energy"]) - Number(energy) / 8065.544) < 1e-4);
  // Undo takes the pin out again.
  await door.click("Undo");
  await door.click("Undo");
  await door.sentence("lines");
  await door.until((id, wanted) => !document.querySelector(`#lines tr[data-id="${id}"]`).textContent.includes(wanted), RESONANCE, (Number(energy) / 8065.544).toFixed(5));
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

everyDoor("a line chosen in the list is marked in the diagram, the spectrum and the levels, and told in full", async (door) => {
  await openLines(door);
  await door.evaluate(() => { for (const part of document.querySelectorAll("#lines .evidence details")) part.open = true; });
  await door.evaluate((id) => document.querySelector(`#lines tr[data-id="${id}"]`).click(), RESONANCE);
  assert.equal(await door.evaluate(() => document.querySelectorAll("#lines .stage .ring-chosen").length >= 4), true, "both levels, the link and the stick are ringed");
  const marked = await door.evaluate(() => [...document.querySelectorAll('#lines tr[data-id^="level:"][aria-current="true"]')].map((row) => row.dataset.id).sort());
  assert.deepEqual(marked, ["level:3p 2P1/2", "level:3s 2S1/2"]);
  assert.match(await door.text("#lines .chosen-one"), /E1.*in vacuum.*nm.*A.*per second|E1.*in vacuum.*s−1/s);
  await door.click("Split it in a field");
  await door.until(() => document.querySelector('[data-path="/line/upper"]').value === "3p 2P1/2");
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

everyDoor("a level is walked to, read and chosen in the rung diagram by keys alone", async (door) => {
  await openLines(door);
  await door.page.focus("#lines .stage");
  assert.match(await door.text("#lines .reading"), /3s.*above the lowest level 0/s);
  await door.press("ArrowRight", "ArrowRight");
  assert.match(await door.text("#lines .reading"), /3p.*above the lowest level \d+.*computed/s);
  await door.press("Enter");
  await door.until(() => [...document.querySelectorAll('#lines .lines-table tr[aria-current="true"]')].length >= 2);
  assert.match(await door.text("#lines .chosen-one"), /lines down\s*\d/);
  await door.press("=");
  await door.until(() => [...document.querySelectorAll("#lines .picture-tools button")].some((each) => each.textContent === "Whole picture" && each.checkVisibility()));
  await door.press("0", "Escape");
}, { fragment: SODIUM, browsers: ["chromium", "firefox"] });

everyDoor("choices narrow list and pictures: multipole, lower level, least strength, window", async (door) => {
  await openLines(door);
  const all = (await list(door)).length;
  await take(door, "Multipole", "E1");
  const electric = await list(door);
  assert.ok(electric.length < all && electric.every(({ multipole }) => multipole === "E1"));
  await take(door, "Ends on", "of 3p");
  assert.ok((await list(door)).every(({ id }) => id.startsWith("line:3p ")));
  assert.match(await door.text("#lines .lines-table caption"), /^\d+ of \d+ lines/);
  await take(door, "Ends on", "");
  await take(door, "Multipole", "");
  await take(door, "Leave out below", "0.1");
  const strong = await list(door);
  const most = Math.max(...strong.map(({ A }) => shown(A)));
  assert.ok(strong.length > 0 && strong.length < all && strong.every(({ A }) => shown(A) >= 0.1 * most));
  await take(door, "Leave out below", "0");
  // One end alone is open to the other side; an end may be an energy.
  await door.type("Show lines between", "580 nm");
  await door.until(() => /^Above 580\snm/.test(document.querySelector("#lines .say")?.textContent ?? ""));
  const above = await list(door);
  assert.ok(above.length > 0 && above.length < all && above.every((row) => shown(row["in vacuum"]) >= 580));
  await door.type("Show lines up to", "700 nm");
  await door.until(() => /^Between 580\D+700\snm/.test(document.querySelector("#lines .say")?.textContent ?? ""));
  await door.until(() => [...document.querySelectorAll("#lines .filters label")].some((each) => each.textContent.startsWith("Only the window")));
  assert.ok((await list(door)).every((row) => shown(row["in vacuum"]) >= 580 && shown(row["in vacuum"]) <= 700));
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

/** Counts what the workers are asked. */
function countAsked() {
  const Real = globalThis.Worker;
  window.asked = [];
  globalThis.Worker = class {
    constructor(url) {
      this.real = new Real(url);
      this.name = (window.workers = (window.workers ?? 0) + 1);
      this.real.onmessage = (event) => this.onmessage?.(event);
      this.real.onerror = (event) => this.onerror?.(event);
    }

    postMessage(message) {
      const [sheet, question] = message.arguments ?? [];
      if (message.door === "answer") window.asked.push({ question, worker: this.name });
      if (question === "levels" && sheet.title === "slow") {
        const say = (data) => setTimeout(() => this.onmessage?.({ data }), 0);
        say({ id: message.id, estimate: { seconds: 1.5, megabytes: 10 } });
        say({ progress: { configuration: 0, of: 1, label: "even, J 2", iteration: 37, residual: 0, done: 0.37 } });
        return;
      }
      const waits = question === "levels" && sheet.structure?.scale?.F === 0.5 && !message.asked;
      if (waits) setTimeout(() => this.onmessage?.({ data: { id: message.id, waits: { seconds: 12, megabytes: 40 } } }), 0);
      else this.real.postMessage(message);
    }

    terminate() {
      this.real.terminate();
    }
  };
}

everyDoor("energies are computed apart from typing, and only where the sheet changed what they hang on", async (door) => {
  await openLines(door);
  const asked = () => door.evaluate(() => window.asked.filter(({ question }) => question === "levels" || question === "lines"));
  const before = await asked();
  const typing = await door.evaluate(() => window.asked.find(({ question }) => question === "states").worker);
  assert.ok(before.length >= 2 && before.every(({ worker }) => worker !== typing));
  await door.evaluate(() => {
    const field = document.querySelector('[data-path="/field/flux_density"]');
    field.value = "0.5 T";
    field.dispatchEvent(new Event("input", { bubbles: true }));
  });
  await door.sentence("states");
  await new Promise((resolve) => setTimeout(resolve, 900));
  assert.equal((await asked()).length, before.length);
  assert.equal(await door.state("lines"), "answered");
  // A long one waits for Start, and the last answer stays.
  const sentence = await door.text("#lines .say");
  await door.type("Multiply computed F by", "0.5");
  await door.until(() => /waits for Start/.test(document.querySelector("#lines .words").textContent));
  assert.equal(await door.text("#lines .say"), sentence);
  await door.evaluate(() => [...document.querySelectorAll("#lines .run button")].find((each) => each.textContent === "Start").click());
  await door.sentence("lines");
  await door.until(() => location.hash.includes("structure.scale.F=~0.5"));
  await door.until((old) => document.querySelector("#lines .say").textContent !== old, sentence);
}, { fragment: CARBON, before: countAsked });

everyDoor("a long run tells how far it is in words and in the stroke, and Stop ends it", async (door) => {
  await door.until(() => /even, J 2: 37\s%, estimated 1\.5\ss in all/.test(document.querySelector("#lines .run").textContent));
  assert.equal(await door.evaluate(() => document.querySelector("#lines .stroke .first").style.width), "37%");
  await door.evaluate(() => [...document.querySelectorAll("#lines .run button")].find((each) => each.textContent === "Stop").click());
  await door.until(() => /^Stopped/.test(document.querySelector("#lines .run").textContent));
}, { fragment: `${CARBON}&title=slow`, before: countAsked });

everyDoor("a value of one’s own replaces a computed parameter, and the table says so", async (door) => {
  await openLines(door);
  await door.type("Parameter", "zeta(2p) @ 2p2");
  await door.type("Value", "100 cm-1");
  await door.click("Give a value");
  await door.sentence("lines");
  await door.unfoldPart("lines", "Parameters");
  const row = await door.until(() => {
    const found = [...document.querySelectorAll("#lines .evidence tbody tr")].find((each) => /^zeta\(2p\)/.test(each.textContent) && /2p2/.test(each.textContent));
    return found && { text: found.textContent, entered: found.querySelector(".kind-entered") !== null };
  });
  assert.match(row.text, /100/);
  assert.equal(row.entered, true);
  await door.click("Take it out: zeta(2p) @ 2p2");
  await door.sentence("lines");
  assert.equal(await door.evaluate(() => document.querySelectorAll('[data-path^="/structure/given"]').length), 0);
  assert.deepEqual(door.troubles, []);
}, { fragment: CARBON });

// Carbon's 2p² ¹D₂ lies 10192.66 cm⁻¹ above ³P₀ and 10149.25 above ³P₂ (from memory).
everyDoor("correlation in a subshell brings carbon’s first excited term where it is observed, and can be left out", async (door) => {
  await openLines(door);
  const above = () => door.evaluate(() => {
    const row = document.querySelector('#lines tr[data-id="line:2p2 3P2/2p2 1D2/M1"]');
    return row && Number(row.cells[2].textContent);
  });
  const changed = (old) => door.until((old) => Number(document.querySelector('#lines tr[data-id="line:2p2 3P2/2p2 1D2/M1"]').cells[2].textContent) !== old, old);
  const usual = await above();
  assert.ok(Math.abs(usual / 10149.25 - 1) < 0.1, String(usual));
  await door.evaluate(() => {
    const box = document.querySelector('select[data-path="/structure/correlation"]');
    box.selectedIndex = 2;
    box.dispatchEvent(new Event("change"));
  });
  await door.until(() => location.hash.includes("structure.correlation=~false"));
  await changed(usual);
  const without = await above();
  assert.ok(without / 10149.25 > 1.15, String(without));
  await door.click("Put in correlation within subshells");
  await door.until(() => !location.hash.includes("correlation"));
  await changed(without);
  assert.equal(await above(), usual);
}, { fragment: "v=1&species=C&configurations.0=2p2" });

everyDoor("a table of measured levels is opened, taken, and taken back", async (door) => {
  const path = join(mkdtempSync(join(tmpdir(), "rungline-")), "levels.csv");
  writeFileSync(path, `level,energy (cm-1)\n3s 2S1/2,0\n3p 2P1/2,${energy}\n9z 2Z1/2,5\n`);
  await openLines(door);
  await (await door.page.$("#file")).uploadFile(path);
  await door.until(() => /2 measured levels taken/.test(document.getElementById("notes").textContent));
  assert.match(await door.text("#notes"), /1 row was left out.*Line 4:/s);
  await door.sentence("lines");
  assert.equal((await resonance(door))["in vacuum"], (Number(vacuumAngstrom) / 10).toFixed(3));
  await door.click("Undo");
  await door.sentence("lines");
  assert.notEqual((await resonance(door))["in vacuum"], (Number(vacuumAngstrom) / 10).toFixed(3));
}, { fragment: SODIUM, doors: ["file"] });

for (const [width, dark] of [[360, false], [820, true], [1400, false]]) {
  everyDoor(`levels and lines fit ${width} px and are free of what axe finds`, async (door) => {
    await openLines(door);
    await door.evaluate(() => { for (const part of document.querySelectorAll("#lines details")) part.open = true; });
    await door.evaluate((id) => document.querySelector(`#lines tr[data-id="${id}"]`).click(), RESONANCE);
    assert.deepEqual(await door.axe(), []);
    assert.equal(await door.scrollsSideways(), false);
    assert.deepEqual(door.troubles, []);
  }, { fragment: `${SODIUM}&source.temperature=3000+K`, width, dark, doors: ["file"] });
}
