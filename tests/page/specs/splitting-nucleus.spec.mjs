// The nucleus on the page: constants, isotopes, a level alone, and what is refused at its own field.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const CAESIUM = "v=1&species=133Cs&configurations.0=6s&nucleus.magnetic_dipole.6s+2S1/2=2298.1579425+MHz&field.flux_density=0.01+T";
const RUBIDIUM = "v=1&species=Rb&configurations.0=5s&field.flux_density=0.01+T";
const ALONE = "v=1&level.J=1/2&level.g=2.0025&level.I=7/2&level.A=2298.1579425+MHz&field.flux_density=0.1+T&field.up_to=0.5+T";

const rows = (door, caption) => door.until((words) => {
  const table = [...document.querySelectorAll("#splitting table")].find((each) => each.caption.textContent.startsWith(words));
  return table && [...table.tBodies[0].rows].map((row) => [...row.cells].map((cell) => cell.textContent));
}, caption);

everyDoor("a level with its nucleus has states by F and M, in the table and in the map", async (door) => {
  await door.unfold("splitting");
  await door.unfoldPart("splitting", "States");
  const states = await rows(door, "States");
  assert.equal(states.length, 16);
  const head = await door.evaluate(() => [...document.querySelectorAll("#splitting .parts table th")].map((each) => each.textContent));
  assert.ok(head.some((text) => text.startsWith("F")) && head.some((text) => text.startsWith("M")));
  await door.unfoldPart("splitting", "Hyperfine constants");
  const [[, value]] = await rows(door, "Hyperfine constants");
  assert.match(value, /^2298\.1/);
  await door.until(() => document.querySelectorAll("#splitting .map-part svg[role=img] polyline").length >= 16);
  assert.match(await door.text("#splitting .map-part svg[role=img]"), /F 4/);
  assert.deepEqual(door.troubles, []);
}, { fragment: CAESIUM });

everyDoor("the natural isotopes are put in with their shares, and taken out again", async (door) => {
  await door.unfold("splitting");
  await door.unfoldPart("splitting", "Nucleus and isotopes");
  await door.until(() => [...document.querySelectorAll("#splitting button")].some((each) => each.textContent === "Put in the natural isotopes" && !each.hidden));
  await door.click("Put in the natural isotopes");
  // 85Rb 72.17 %, 87Rb 27.83 % (IUPAC, isotopic compositions of the elements 2009, from memory).
  const value = (path) => door.evaluate((wanted) => document.querySelector(`[data-path="${wanted}"]`)?.value ?? null, path);
  await door.until(() => document.querySelector('[data-path="/isotopes/1/share"]'));
  assert.deepEqual([await value("/isotopes/0/isotope"), await value("/isotopes/1/isotope")], ["85Rb", "87Rb"]);
  assert.match(await value("/isotopes/0/share"), /^72\.1[67]/);
  assert.match(await door.sentence("splitting"), /isotopes/);
  await door.unfoldPart("splitting", "Isotopes");
  assert.deepEqual((await rows(door, "Isotopes")).map(([name, , spin]) => [name, spin]), [["85Rb", "5/2"], ["87Rb", "3/2"]]);
  const add = await door.page.$('[aria-label="Take it out: isotope 1"]');
  await add.evaluate((node) => node.click());
  await door.until(() => document.querySelector('[data-path="/isotopes/0/isotope"]').value === "87Rb" && document.querySelector('[data-path="/isotopes/1/isotope"]') === null);
  assert.deepEqual(door.troubles, []);
}, { fragment: RUBIDIUM });

everyDoor("a spin that is no half-integer, an isotope that is not there and a B where there can be none are refused at their fields", async (door) => {
  await door.unfold("splitting");
  await door.unfoldPart("splitting", "Nucleus and isotopes");
  await door.type("Nuclear spin I", "1/3");
  await door.until(() => document.querySelector('[data-path="/nucleus/spin"]').getAttribute("aria-invalid") === "true");
  await door.type("Nuclear spin I", "5/2");
  await door.sentence("splitting");
  await door.click("Add an isotope");
  await door.until(() => document.querySelector('[data-path="/isotopes/0/isotope"]'));
  await door.type("Isotope 1", "40Rb");
  await door.until(() => document.querySelector('[data-path="/isotopes/0/isotope"]').getAttribute("aria-invalid") === "true");
  assert.deepEqual(door.troubles, []);
}, { fragment: RUBIDIUM });

// 9 192 631 770 Hz is the transition between the two hyperfine levels of the ground state of ¹³³Cs that
// defines the second (SI Brochure, 9th edition, 2.3.1); A = 2298.1579425 MHz is a quarter of it.
everyDoor("a level alone is enough: the clock point of caesium without field", async (door) => {
  await door.unfold("splitting");
  await door.unfoldPart("splitting", "Crossings of levels");
  const [first] = await rows(door, "Crossings of levels");
  assert.match(first[0], /^Clock point/);
  assert.match(first[1], /F = 3, M = 0$/);
  assert.match(first[6], /^9192\.63/);
  await door.unfoldPart("splitting", "Resonance frequencies");
  assert.ok((await rows(door, "Resonance frequencies")).length > 20);
  // There is no line that could be chosen for it.
  assert.equal(await door.evaluate(() => [...document.querySelectorAll("#splitting button")].some((each) => each.textContent === "Choose a line")), false);
  assert.deepEqual(await door.axe(), []);
  assert.deepEqual(door.troubles, []);
}, { fragment: ALONE });

everyDoor("A and B are estimated at one press where none is entered, say that they are, and go again with the box", async (door) => {
  await door.unfold("splitting");
  await door.until(() => [...document.querySelectorAll("#splitting .offer button")].some((each) => each.textContent === "Estimate A and B"));
  assert.doesNotMatch(await door.sentence("splitting"), /estimated/);
  await door.click("Estimate A and B");
  await door.until(() => /A and B estimated/.test(document.querySelector("#splitting").textContent));
  await door.unfoldPart("splitting", "Hyperfine constants");
  const [[, value, , from]] = await rows(door, "Hyperfine constants");
  // Published: 3417.34 MHz (Arimondo, Inguscio and Violino 1977, from memory); the estimate is a third too small.
  assert.match(value, /^22\d\d/);
  assert.equal(from, "estimated: A");
  await door.unfoldPart("splitting", "Nucleus and isotopes");
  const box = await door.page.$('#splitting [data-path="/nucleus/estimate"]');
  assert.equal(await box.evaluate((node) => node.checked), true);
  await box.evaluate((node) => node.click());
  await door.until(() => [...document.querySelectorAll("#splitting .offer button")].some((each) => each.textContent === "Estimate A and B"));
  assert.deepEqual(door.troubles, []);
}, { fragment: "v=1&species=87Rb&configurations.0=5s&field.flux_density=0.01+T" });
