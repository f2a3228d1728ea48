// Which states?, read and worked on the page. Terms of p² and d⁶: Condon & Shortley, The Theory of
// Atomic Spectra (1935), table of terms; counts C(6,2) = 15 and C(10,6) = 210.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

const IRON = "v=1&species=Fe&configurations.0=3d6+4s2";
const CARBON = "v=1&species=C&configurations.0=2p2";

/** Keeps what the page puts on the clipboard. */
function listen() {
  window.clips = [];
  Object.defineProperty(navigator, "clipboard", { value: { writeText: async (text) => { window.clips.push(text); } } });
}

/** Takes the clipboard away. */
function refuseClipboard() {
  window.clips = [];
  Object.defineProperty(navigator, "clipboard", { value: { writeText: async () => { throw new Error("refused"); } } });
  document.addEventListener("copy", () => window.clips.push(document.activeElement.value), true);
}

/** Presses a button of the copy menu of the table whose caption has this text. */
async function copy(door, caption, label) {
  await door.evaluate((words, wanted) => {
    const table = [...document.querySelectorAll(".table")].find((each) => each.querySelector("caption").textContent.includes(words));
    table.querySelector(".copy-menu").open = true;
    [...table.querySelectorAll(".copy-list button")].find((each) => each.textContent === wanted).click();
  }, caption, label);
  return door.until(() => window.clips.at(-1));
}

const captions = (door) => door.evaluate(() => [...document.querySelectorAll("#states caption")].map((each) => each.textContent));

everyDoor("iron: 16 terms, 34 levels, 210 states and the ground level ⁵D₄ are read off the page", async (door) => {
  await door.sentence("states");
  await door.unfold("states");
  assert.match((await captions(door))[0], /16 terms, 34 levels, 210 states/);
  assert.ok(await door.evaluate(() => document.querySelector('#states .say [aria-label="quintet D 4"]') !== null), await door.text("#states .say"));
  await door.unfoldPart("states", "Levels counted by J");
  const rows = await door.evaluate(() => {
    const table = [...document.querySelectorAll("#states table")].find((each) => each.caption.textContent.includes("by J"));
    return [...table.tBodies[0].rows].map((row) => [...row.cells].map((cell) => cell.textContent));
  });
  assert.equal(rows.reduce((sum, [, levels]) => sum + Number(levels), 0), 34);
  assert.equal(rows.reduce((sum, [, , states]) => sum + Number(states), 0), 210);
  assert.deepEqual(door.troubles, []);
}, { fragment: IRON });

everyDoor("the accessible name of ³P₂ is “triplet P 2”", async (door) => {
  await door.unfold("states");
  await door.unfoldPart("states", "Levels and their g factors");
  const found = await door.evaluate(() => [...document.querySelectorAll("#states td [role=img], #states tbody th [role=img]")]
    .filter((each) => each.getAttribute("aria-label") === "triplet P 2").map((each) => each.textContent));
  assert.ok(found.includes("3P2"), String(found));
}, { fragment: CARBON });

everyDoor("a table is copied with all rows, full digits and kinds", async (door) => {
  await door.unfold("states");
  await door.unfoldPart("states", "Levels and their g factors");
  const csv = await copy(door, "Levels of", "Copy as CSV");
  const lines = csv.trim().split("\r\n");
  assert.equal(lines.length, 35);
  assert.match(lines[0], /^level,J,parity,g_J \[\w+\],mu_eff \(mu_B\) \[\w+\]$/);
  const ground = lines.find((line) => /5D4,/.test(line)).split(",");
  // Landé's formula with g_s of CODATA 2022: g(⁵D₄) = 1 + (g_s − 1)/2.
  assert.ok(Math.abs(Number(ground[3]) - (1 + 1.00231930436092 / 2)) < 1e-11, ground[3]);
  for (const label of ["Copy as text", "Copy for a spreadsheet", "Copy as LaTeX"]) {
    await door.evaluate(() => { window.clips = []; });
    assert.equal((await copy(door, "Levels of", label)).match(/5D4|\\mathrm\{D\}_\{4\}/g).length, 1, label);
  }
  assert.match(await door.text(".told:not(:empty)"), /^Copied 34 rows/);
  assert.deepEqual(door.troubles, []);
}, { fragment: IRON, before: listen });

everyDoor("copying works where the browser refuses its clipboard", async (door) => {
  await door.unfold("states");
  await door.evaluate(() => document.querySelector("#states .copy-menu summary").click());
  const box = await door.page.$("#states .copy-list button:nth-child(3)");
  await box.click();
  const csv = await door.until(() => window.clips.at(-1));
  assert.match(csv, /^term,J,times/);
  assert.match(await door.text("#states .told"), /Copied 3 rows as CSV/);
}, { fragment: CARBON, before: refuseClipboard });

everyDoor("the cursor walks the grid and tells M_L, M_S and the microstates; Enter chooses a corner's term", async (door) => {
  await door.unfold("states");
  await door.until(() => document.querySelector("#states .stage svg"));
  await door.page.focus("#states .stage");
  const reading = () => door.evaluate(() => {
    const line = document.querySelector("#states .reading").cloneNode(true);
    for (const sign of line.querySelectorAll("[aria-label]")) sign.textContent = sign.getAttribute("aria-label");
    return line.textContent;
  });
  await door.press("Home", "ArrowRight");
  assert.equal(await reading(), "M L 2, M S 0: 1 microstate");
  await door.press("ArrowDown", "ArrowDown");
  assert.equal(await reading(), "M L 0, M S 0: 3 microstates");
  await door.press("ArrowUp", "ArrowRight", "Enter");
  assert.equal(await reading(), "M L 1, M S 1: 1 microstate");
  const chosen = await door.evaluate(() => [...document.querySelectorAll('#states tr[aria-current="true"]')].map((row) => row.querySelector("[role=img]").getAttribute("aria-label")));
  assert.deepEqual(chosen, ["triplet P"]);
  assert.ok(await door.evaluate(() => document.querySelector("#states .ring-chosen") !== null));
  await door.press("Escape");
  assert.ok(await door.evaluate(() => !document.activeElement.classList.contains("stage")));
}, { fragment: CARBON });

everyDoor("a changed input moves tables and picture", async (door) => {
  await door.unfold("states");
  await door.until(() => document.querySelector("#states .stage svg"));
  const counts = () => door.evaluate(() => [...document.querySelectorAll("#states .stage svg[role=img] text")].map((each) => each.textContent).join(" "));
  const before = await counts();
  await door.type("Configuration", "2p3");
  await door.until(() => /20 states/.test(document.querySelector("#states caption")?.textContent));
  await door.until((old) => {
    const now = [...document.querySelectorAll("#states .stage svg[role=img] text")].map((each) => each.textContent).join(" ");
    return now !== "" && now !== old;
  }, before);
  assert.deepEqual(await door.evaluate(() => [...document.querySelectorAll("#states .table-and-picture tbody th [role=img]")].map((each) => each.getAttribute("aria-label")).sort()),
    ["doublet D, odd", "doublet P, odd", "quartet S, odd"]);
}, { fragment: "v=1&species=*&configurations.0=2p2" });

everyDoor("sorting by a head is told to everyone, and the answer's order comes back", async (door) => {
  await door.unfold("states");
  const names = () => door.evaluate(() => [...document.querySelectorAll("#states .table-and-picture tbody th [role=img]")].map((each) => each.getAttribute("aria-label")));
  const press = () => door.evaluate(() => document.querySelector("#states .table-and-picture thead .sort").click());
  const first = await names();
  await press();
  assert.equal(await door.evaluate(() => document.querySelector("#states th[aria-sort]").getAttribute("aria-sort")), "ascending");
  assert.deepEqual(await names(), ["singlet D", "singlet S", "triplet P"]);
  await press();
  await press();
  assert.equal(await door.evaluate(() => document.querySelector("#states th[aria-sort]")), null);
  assert.deepEqual(await names(), first);
}, { fragment: CARBON });

everyDoor("the group label W is named aloud and explained under the table", async (door) => {
  await door.unfold("states");
  await door.until(() => document.querySelector("#states .table-and-note"));
  assert.ok(await door.evaluate(() => document.querySelector('#states thead [aria-label="W, label of the rotation group"]') !== null));
  assert.match(await door.text("#states .table-and-note > .note"), /^W labels the rotation group/);
  assert.match((await captions(door))[0], /\(exact, by counting\)$/);
}, { fragment: "v=1&species=*&configurations.0=4f3" });

// Squared coefficients of fractional parentage of p³, from memory of Racah, Phys. Rev. 63, 367 (1943); five digits are shown.
everyDoor("the parents of p³ stand beside their terms, with weights of one kind", async (door) => {
  await door.unfold("states");
  await door.unfoldPart("states", "Parents of each term");
  const { head, rows } = await door.evaluate(() => {
    const table = [...document.querySelectorAll("#states table")].find((each) => each.caption.textContent.startsWith("Parents"));
    const term = (cell) => cell.querySelector("[role=img]").getAttribute("aria-label");
    return {
      head: table.tHead.rows[0].cells[2].textContent,
      rows: [...table.tBodies[0].rows].map(({ cells: [of, parent, weight] }) => [term(of), term(parent), Number(weight.textContent)]),
    };
  });
  assert.match(head, /computed/);
  const expected = [["quartet S, odd", "triplet P", 1], ["doublet D, odd", "triplet P", 1 / 2], ["doublet D, odd", "singlet D", 1 / 2],
    ["doublet P, odd", "triplet P", 1 / 2], ["doublet P, odd", "singlet D", 5 / 18], ["doublet P, odd", "singlet S", 2 / 9]];
  assert.equal(rows.length, expected.length, JSON.stringify(rows));
  for (const [term, parent, weight] of expected) {
    const found = rows.find(([of, from]) => of === term && from === parent);
    assert.ok(found && Math.abs(found[2] - weight) < 1e-5, `${term} from ${parent}: ${JSON.stringify(rows)}`);
  }
}, { fragment: "v=1&species=N&configurations.0=2p3" });

everyDoor("a bare shell is counted: n = 5 has 25 pairs and 50 states", async (door) => {
  await door.unfold("states");
  assert.match((await captions(door))[0], /n = 5 \(O\): 5 values of ℓ, 25 pairs \(ℓ, mℓ\), 50 states/);
}, { fragment: "v=1&species=*&configurations.0=n%3D5" });

for (const options of [{ width: 360 }, { width: 820, dark: true }, { width: 1400 }]) {
  everyDoor(`every part of the states is free of what axe finds, ${options.width}`, async (door) => {
    await door.unfold("states");
    await door.evaluate(() => { for (const part of document.querySelectorAll("#states .part")) part.open = true; });
    await door.until(() => [...document.querySelectorAll("#states .part")].every((part) => part.querySelector(".fold-body").childElementCount > 0));
    assert.deepEqual(await door.axe(), []);
    assert.equal(await door.scrollsSideways(), false);
    assert.deepEqual(door.troubles, []);
  }, { ...options, fragment: IRON, doors: ["file"] });
}
