// The evidence "Orbitals", read and worked on the page. Energies without relativity: tests/vectors/hf_energies.csv and
// hf_orbitals.csv, whose heads name their source.

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { everyDoor } from "../driver/door.mjs";

const SODIUM = "v=1&species=Na&configurations.0=3s&configurations.1=3p";
const IRON = "v=1&species=Fe&configurations.0=3d6+4s2&structure.relativity=~false";

const rowsOf = (name) => readFileSync(new URL(`../../vectors/${name}`, import.meta.url), "utf8").split("\n").map((line) => line.split(/,(?=(?:[^"]*"[^"]*")*[^"]*$)/));

/** Notes what the workers are asked. A sheet with the note "slow" gets one iteration and no answer. */
function watchWorkers() {
  const Real = globalThis.Worker;
  window.asked = [];
  globalThis.Worker = class {
    constructor(url) {
      this.real = new Real(url);
      this.real.onmessage = (event) => this.onmessage?.(event);
      this.real.onerror = (event) => this.onerror?.(event);
    }

    postMessage(message) {
      const [sheet, question] = message.arguments ?? [];
      const orbitals = message.door === "curves" || question === "orbitals";
      if (orbitals) window.asked.push(`${message.door} ${sheet.species} ${sheet.configurations ?? ""}`);
      const say = (data) => setTimeout(() => this.onmessage?.({ data }), 0);
      if (orbitals && window.large && !message.asked) say({ id: message.id, waits: { seconds: 12, megabytes: 40 } });
      else if (orbitals && window.slow) {
        say({ id: message.id, estimate: { seconds: 1.5, megabytes: 10 } });
        say({ progress: { configuration: 0, of: 2, label: "3s", iteration: 7, residual: 0.003 } });
      } else this.real.postMessage(message);
    }

    terminate() {
      this.real.terminate();
    }
  };
}

/** Opens the fold and waits for the picture. */
async function openOrbitals(door, picture = true) {
  await door.sentence("states");
  await door.evaluate(() => {
    const fold = document.querySelector(".orbitals");
    if (!fold.open) fold.querySelector("summary").click();
  });
  if (picture) await door.until(() => document.querySelector(".orbitals .stage svg polyline"));
}

const openPart = (door, beginning) => door.until((wanted) => {
  const summary = [...document.querySelectorAll(".orbitals summary")].find((each) => each.textContent.startsWith(wanted));
  if (summary && !summary.parentElement.open) summary.click();
  return summary?.parentElement.querySelector("table, svg") !== null;
}, beginning);

/** The cells of the table whose caption begins so: {head: cell} for each row. */
const table = (door, beginning) => door.evaluate((wanted) => {
  const found = [...document.querySelectorAll(".orbitals table")].find((each) => each.caption.textContent.startsWith(wanted));
  const heads = [...found.tHead.rows[0].cells].map((cell) => cell.querySelector(".sort > span").textContent.replace(/\u00a0.*/, ""));
  return [...found.tBodies[0].rows].map((row) => Object.fromEntries([...row.cells].map((cell, i) => [heads[i], cell.textContent.replace("▸", "").replaceAll("\u2212", "-")])));
}, beginning);

/** What is shown is the value, as far as its digits go. */
function shows(text, value, digits) {
  const decimals = (text.split(".")[1] ?? "").length;
  assert.ok(text.replace(/\D/g, "").replace(/^0+/, "").length >= digits, `${text} has too few digits`);
  assert.ok(Math.abs(Number(text) - value) <= 0.5001 * 10 ** -decimals, `${text} is not ${value}`);
}

const polylines = (door) => door.evaluate(() => document.querySelectorAll(".orbitals .stage svg[role=img] polyline").length);

everyDoor("iron without relativity: energies and radii of the reference are read off the table", async (door) => {
  await openOrbitals(door);
  const rows = await table(door, "Subshells");
  const own = rows.find(({ subshell }) => subshell === "3d");
  const [, , , , , energy, r] = rowsOf("hf_orbitals.csv").find(([atom, , which, shell]) => atom === "Fe" && which === "average" && shell === "3d");
  shows(own["energy"], Number(energy), 3);
  shows(own["⟨r⟩"], Number(r), 5);
  await openPart(door, "Energy, convergence");
  const [run] = await table(door, "Energy and convergence");
  shows(run["average energy"], Number(rowsOf("hf_energies.csv").find(([z]) => z === "26")[8]), 6);
  assert.ok(Math.abs(Number(run["virial ratio"]) + 2) < 1e-5, run["virial ratio"]);
  const [nucleus] = await table(door, "Nucleus");
  assert.deepEqual([nucleus.model, nucleus.charge], ["point", "26"]);
  const history = await table(door, "Residual after");
  assert.equal(history.length, Number(run.iterations));
  await openPart(door, "Slater integrals");
  assert.ok((await table(door, "Slater integrals")).some(({ integral }) => integral === "F2(3d,3d)"));
  assert.deepEqual(door.troubles, []);
}, { fragment: IRON });

everyDoor("sodium: 3s and 3p stand in one picture, a curve is chosen by its row, and the other way round", async (door) => {
  await openOrbitals(door);
  assert.equal(await polylines(door), 2);
  assert.match(await door.text(".orbitals .set-list"), /3s: plain; .*3p: circles/);
  const chosen = () => door.evaluate(() => [...document.querySelectorAll('.orbitals tr[aria-current="true"]')].map((row) => row.textContent));
  await door.page.focus(".orbitals .stage");
  await door.press("Home", "ArrowRight");
  assert.match(await door.text(".orbitals .reading"), /^3s of 3s: P² is .*a−10\scomputed at r = .*a0/);
  await door.press("ArrowDown");
  assert.match(await door.text(".orbitals .reading"), /^3p of 3p/);
  await door.press("Enter");
  assert.equal((await chosen()).length, 1);
  assert.match((await chosen())[0], /^▸3p/);
  const widths = () => door.evaluate(() => [...document.querySelectorAll(".orbitals .stage svg[role=img] polyline")].map((line) => line.getAttribute("stroke-width")));
  assert.deepEqual(await widths(), ["2", "4"]);
  // A row of the core brings its curve into the picture.
  await door.evaluate(() => [...document.querySelectorAll(".orbitals tbody tr")].find((row) => row.textContent.startsWith("2p")).click());
  assert.deepEqual(await widths(), ["4", "2", "2"]);
  await door.press("Escape");
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

everyDoor("the picture is zoomed by keys, has its points as a table, and is saved as SVG", async (door) => {
  await openOrbitals(door);
  await door.page.focus(".orbitals .stage");
  await door.press("Home", "=", "=", "End", "=");
  await door.until(() => [...document.querySelectorAll(".orbitals .picture-tools button")].find(({ textContent }) => textContent === "Whole picture").checkVisibility());
  assert.equal(await polylines(door), 2);
  await door.press("0");
  await door.evaluate(() => [...document.querySelectorAll(".orbitals .picture-tools button")].find(({ textContent }) => textContent === "Show as table").click());
  await door.until(() => document.querySelector(".orbitals .picture-table table"));
  // 201 points of each of the two curves.
  assert.equal(await door.evaluate(() => document.querySelector(".orbitals .picture-table table").rows.length), 403);
  await door.evaluate(() => [...document.querySelectorAll(".orbitals .picture-tools button")].find(({ textContent }) => textContent === "Save SVG").click());
  const svg = await door.until(() => window.files.at(-1)?.text);
  assert.match(svg, /<title>Radial distributions of Na I \[Ne\] 3s and Na I \[Ne\] 3p<\/title>/);
  assert.match(svg, /<polyline/);
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM, before: () => {
  window.files = [];
  const make = URL.createObjectURL;
  URL.createObjectURL = (blob) => {
    if (blob.type === "image/svg+xml") blob.text().then((text) => window.files.push({ text }));
    return make.call(URL, blob);
  };
} });

everyDoor("a polarisability that has a source is put in by its button", async (door) => {
  await openOrbitals(door);
  const words = await door.text(".orbitals .offer button");
  // 0.9457 a0^3 for Na+: Johnson, Kolb and Huang (1983).
  assert.match(words, /0\.9457 a0\^3/);
  await door.evaluate(() => document.querySelector(".orbitals .offer button").click());
  await door.until(() => [...document.querySelectorAll(".orbitals summary")].some((each) => each.textContent === "What core polarisation changed"));
  assert.equal(await door.evaluate(() => document.querySelector('[data-path="/structure/polarisation/alpha"]').value), "0.9457 a0^3");
  await openPart(door, "Integrals between");
  assert.equal((await table(door, "E1 integrals"))[0].integral, "r(3s,3p)");
}, { fragment: SODIUM });

everyDoor("another field or title never asks again, a second look neither", async (door) => {
  await openOrbitals(door);
  const before = await door.evaluate(() => window.asked.slice());
  assert.deepEqual(before, ["answer Na 3s,3p", "curves Na 3s,3p"]);
  await door.evaluate(() => document.querySelector("#splitting .rung-button").click());
  await door.type("Field", "0.7 T");
  await door.type("Field", "0.7 Q");
  await door.type("Field", "0.9 T");
  await door.sentence("states");
  // Away and back: what was computed is kept.
  await door.type("Configuration", "4s");
  await door.until(() => window.asked.length === 4);
  await door.until(() => /4s/.test(document.querySelector(".orbitals-say").textContent));
  await door.press("Control+z");
  await door.until(() => /3s/.test(document.querySelector(".orbitals-say").textContent));
  await new Promise((resolve) => setTimeout(resolve, 500));
  assert.equal(await door.evaluate(() => window.asked.length), 4);
}, { fragment: SODIUM, before: watchWorkers });

everyDoor("closed, nothing is computed", async (door) => {
  await door.sentence("states");
  await door.type("Configuration", "4s");
  await door.sentence("states");
  await new Promise((resolve) => setTimeout(resolve, 600));
  assert.deepEqual(await door.evaluate(() => window.asked), []);
}, { fragment: SODIUM, before: watchWorkers });

everyDoor("a run tells its iterations, Stop stops it, and the next one answers", async (door) => {
  await door.evaluate(() => { window.slow = true; });
  await openOrbitals(door, false);
  await door.until(() => /Calculating 3s, 1 of 2: iteration 7, residual 3\.0e−3, estimated 1\.5\ss in all/.test(document.querySelector(".orbitals .run p")?.textContent));
  await door.evaluate(() => [...document.querySelectorAll(".orbitals .run button")].find(({ textContent }) => textContent === "Stop").click());
  await door.until(() => /^Stopped/.test(document.querySelector(".orbitals .run p")?.textContent));
  await door.click("Start again");
  await door.until(() => /iteration 7/.test(document.querySelector(".orbitals .run p")?.textContent));
  await door.press("Escape");
  await door.until(() => /^Stopped/.test(document.querySelector(".orbitals .run p")?.textContent));
  await door.evaluate(() => { window.slow = false; });
  await door.click("Start again");
  await door.until(() => document.querySelector(".orbitals .stage svg polyline"));
  await door.type("Configuration", "3d");
  await door.sentence("states");
  await door.until(() => /3d/.test(document.querySelector(".orbitals-say").textContent));
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM, before: watchWorkers });

everyDoor("a run that takes long waits for Start", async (door) => {
  await door.evaluate(() => { window.large = true; });
  await openOrbitals(door, false);
  await door.until(() => /about 12\ss and 40\sMB/.test(document.querySelector(".orbitals .run p")?.textContent));
  await door.click("Start");
  await door.until(() => document.querySelector(".orbitals .stage svg polyline"));
}, { fragment: SODIUM, before: watchWorkers });

everyDoor("core polarisation: echoes, faults at their field, and what it changed", async (door) => {
  await openOrbitals(door);
  await door.type("Core polarisability", "0.95 a0^3");
  await door.type("Cut-off radius", "0 a0");
  await door.press("Tab");
  const echo = (path) => door.evaluate((wanted) => document.querySelector(`[data-path="${wanted}"]`).closest(".field").innerText, `/structure/polarisation/${path}`);
  await door.until(() => document.querySelector('[data-path="/structure/polarisation/radius"]').getAttribute("aria-invalid"));
  assert.match(await echo("radius"), /The cut-off radius of the core is 0 a0/);
  await door.type("Cut-off radius", "");
  await door.press("Tab");
  await door.until(() => /no "radius"/.test(document.querySelector('[data-path="/structure/polarisation/radius"]').closest(".field").innerText));
  assert.equal(await door.evaluate(() => document.querySelector('[data-note="elsewhere"]')), null);
  await door.type("Cut-off radius", "-1 a0");
  await door.press("Tab");
  await door.until(() => document.querySelector('[data-path="/structure/polarisation/radius"]').getAttribute("aria-invalid"));
  await door.type("Cut-off radius", "1.2 a0");
  await door.until(() => /Changes|What core polarisation/.test(document.querySelector(".orbitals .parts").textContent));
  assert.match(await echo("alpha"), /0\.95\sa3?.*entered/s);
  await openPart(door, "What core polarisation");
  const change = await table(door, "Changes by");
  // Polarisation of the core binds the outer electron more tightly.
  const outer = change.find((row) => row["of what"] === "3s");
  assert.ok(Number(outer["change of energy"]) < -0.001, JSON.stringify(outer));
  assert.ok(Number(outer["change of ⟨r⟩"]) < 0);
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

everyDoor("relativity is taken out and put back as steps that can be undone", async (door) => {
  await openOrbitals(door);
  await door.click("Relativity in the radial equation");
  await door.until(() => /without relativity/.test(document.querySelector(".orbitals-say").textContent));
  shows((await door.text(".orbitals-say")).match(/−(161\.\d+)/)[1], -Number(rowsOf("hf_energies.csv").find(([z]) => z === "11")[5]), 5);
  await door.evaluate(() => document.activeElement.blur());
  await door.press("Control+z");
  await door.until(() => /with relativity/.test(document.querySelector(".orbitals-say").textContent));
  assert.ok(await door.evaluate(() => document.querySelector(".orbitals input[type=checkbox]").checked));
}, { fragment: SODIUM });

everyDoor("another ion stands beside, read by the core alone", async (door) => {
  await openOrbitals(door);
  await door.type("Beside it: atom or ion", "Mg+");
  await door.until(() => /Mg\sII/.test(document.querySelector(".orbitals .set-list").textContent));
  // A picture is drawn once its width is known, after the words.
  await door.until(() => document.querySelector(".orbitals .stage svg polyline"));
  assert.equal(await polylines(door), 2);
  assert.ok((await table(door, "Subshells")).some((row) => row.subshell === "3s" && /Mg\sII/.test(row.of)));
  // The ion's 3s lies further in.
  const of = (rows, atom) => Number(rows.find((row) => row.subshell === "3s" && row.of.replace("\u00a0", " ").startsWith(atom))["⟨r⟩"]);
  const rows = await table(door, "Subshells");
  assert.ok(of(rows, "Mg II") < of(rows, "Na I"));
  await door.type("Beside it: atom or ion", "Xx");
  await door.until(() => /Xx/.test(document.querySelector(".orbitals .at-fault .sentence")?.textContent));
  assert.deepEqual(await door.axe(), []);
  await door.type("Beside it: atom or ion", "");
  await door.until(() => !/Mg/.test(document.querySelector(".orbitals .set-list").textContent));
  assert.deepEqual(door.troubles, []);
}, { fragment: SODIUM });

everyDoor("an anion that is not bound is a fault with its reason, and the next atom is answered", async (door) => {
  await openOrbitals(door, false);
  await door.until(() => document.querySelector(".orbitals .at-fault .sentence"));
  assert.match(await door.text(".orbitals .at-fault .sentence"), /not bound/);
  await door.type("Atom or ion", "He");
  await door.type("Configuration", "");
  await door.until(() => document.querySelector(".orbitals .stage svg polyline"));
  assert.equal(await door.text(".orbitals .at-fault"), null);
}, { fragment: "v=1&species=He-&configurations.0=1s2+2s" });

for (const [what, fragment, needs] of [
  ["any atom", "v=1&species=*&configurations.0=3d6", /^Needs .*nucleus/],
  ["an atom without electrons", "v=1&species=H%2B", /^Needs a sheet without faults/],
]) {
  everyDoor(`${what} says what is missing`, async (door) => {
    await door.until(() => document.querySelector(".orbitals"));
    await door.evaluate(() => document.querySelector(".orbitals > summary").click());
    await door.until(() => document.querySelector(".orbitals-status p"));
    assert.match(await door.text(".orbitals-status"), needs);
    assert.deepEqual(door.troubles, []);
  }, { fragment, start: false });
}

everyDoor("one electron: Dirac’s levels", async (door) => {
  await openOrbitals(door);
  await openPart(door, "Levels by Dirac");
  const [level] = await table(door, "Levels by Dirac");
  // E = c²{[1 − (αZ)²]^½ − 1} for 1s, from the formula.
  shows(level["energy, nucleus at rest"], 137.035999177 ** 2 * (Math.sqrt(1 - 137.035999177 ** -2) - 1), 5);
}, { fragment: "v=1&species=H&configurations.0=1s" });

everyDoor("the angular part in section: solid and hatched lobes, values of the harmonic", async (door) => {
  await openOrbitals(door);
  await openPart(door, "Shape of");
  await door.until(() => document.querySelectorAll(".orbitals .stage").length === 2);
  const last = () => door.evaluate(() => document.querySelectorAll(".orbitals .stage")[1].closest("figure").querySelector(".reading").textContent);
  const stage = (await door.page.$$(".orbitals .stage"))[1];
  await stage.focus();
  await door.press("Home");
  // Y of d with m = 0 on the axis: √(5/4π) = 0.630783.
  assert.match(await last(), /^0° from the axis: Y is 0\.630783\sexact/);
  await door.until(() => document.querySelectorAll(".orbitals .stage")[1].querySelectorAll("svg[role=img] polygon").length === 4);
}, { fragment: IRON });

const openTurning = async (door) => {
  await openOrbitals(door);
  await openPart(door, "Shape of");
  await door.until(() => document.querySelectorAll(".orbitals .stage").length === 2);
  await openPart(door, "Turning view");
  await door.until(() => document.querySelectorAll(".orbitals .stage").length === 3 && document.querySelectorAll(".orbitals .stage")[2].querySelectorAll("polygon").length > 500);
};
const drawn = () => [...document.querySelectorAll(".orbitals .stage")[2].querySelectorAll("polygon")].slice(0, 40).map((each) => each.getAttribute("points")).join();

everyDoor("the angular part in space is turned by keys, and by itself on request", async (door) => {
  await openTurning(door);
  const before = await door.evaluate(drawn);
  const [turn, tip] = await door.page.$$(".orbitals input[type=range]");
  await tip.focus();
  await door.press("ArrowRight");
  assert.equal(await tip.evaluate((each) => each.value), "25");
  const tipped = await door.evaluate(drawn);
  assert.notEqual(tipped, before);
  // A d orbital with m = 0 is round about its axis.
  const stage = (await door.page.$$(".orbitals .stage"))[2];
  await stage.focus();
  await door.press("Home");
  const reading = () => door.evaluate(() => document.querySelectorAll(".orbitals .stage")[2].closest("figure").querySelector(".reading").textContent);
  assert.match(await reading(), /^0° from the axis, 0° around it: Y is 0\.630783\sexact/);
  await door.evaluate(() => [...document.querySelectorAll(".orbitals button")].find((each) => each.textContent === "Turn it").click());
  await door.until((was) => [...document.querySelectorAll(".orbitals .stage")[2].querySelectorAll("polygon")].slice(0, 40).map((each) => each.getAttribute("points")).join() !== was, tipped);
  await door.evaluate(() => [...document.querySelectorAll(".orbitals button")].find((each) => each.textContent === "Hold it").click());
  const held = await door.evaluate(drawn);
  await new Promise((done) => setTimeout(done, 200));
  assert.equal(await door.evaluate(drawn), held);
  assert.ok(turn);
}, { fragment: IRON });

everyDoor("under reduced motion the view in space stands still and can be turned by hand only", async (door) => {
  await openTurning(door);
  assert.equal(await door.evaluate(() => [...document.querySelectorAll(".orbitals button")].some((each) => each.textContent === "Turn it")), false);
  assert.equal((await door.page.$$(".orbitals input[type=range]")).length, 2);
}, { fragment: IRON, reducedMotion: true });

for (const width of [360, 820, 1400]) {
  for (const dark of [false, true]) {
    everyDoor(`axe finds nothing with orbitals open, ${width} px, ${dark ? "dark" : "light"}`, async (door) => {
      await openOrbitals(door);
      for (const part of ["Shape of", "Slater integrals", "Energy, convergence"]) await openPart(door, part);
      await door.until(() => document.querySelectorAll(".orbitals .stage svg").length > 1);
      await openPart(door, "Turning view");
      assert.deepEqual(await door.axe(), []);
      assert.equal(await door.scrollsSideways(), false);
      assert.deepEqual(door.troubles, []);
    }, { fragment: SODIUM, width, dark, browsers: ["chromium"], doors: ["file"] });
  }
}
