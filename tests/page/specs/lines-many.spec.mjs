// A list of 20 000 lines: how long a frame takes while it scrolls, and that all of it can be reached.
// The lines are made up here and told to the page in the core's place; nothing is computed from them.

import assert from "node:assert/strict";
import { test } from "node:test";
import { BROWSERS } from "../driver/browsers.mjs";
import { openDoor } from "../driver/door.mjs";

const LINES = 20_000;
const FRAMES = 300;
const FRAME_95TH_MS = 32;
/** Another program's turn on this machine is not the page's: the best of so many rounds counts. */
const ROUNDS = 4;

/** Runs before the page: answers to "levels" and "lines" are the made-up ones. */
function answerInPlace(count) {
  const rich = (text, letter, odd, J) => [{ configuration: { core: null, subshells: [{ label: text, electrons: 1 }] } }, " ", { term: { multiplicity: 2, letter, odd, J, index: null } }];
  const level = (i, odd) => {
    const [text, letter, J] = [`${i + 3}${odd ? "p" : "d"}`, odd ? "P" : "D", odd ? "3/2" : "5/2"];
    const energy = odd ? 20_000 + 311.7 * i : 97.3 * i;
    return { label: `${text} 2${letter}${J}`, rich: rich(text, letter, odd, J), configuration: text, term: `2${letter}`, J, parity: odd ? "odd" : "even", energy, above_lowest: energy, energy_kind: "computed", computed_energy: energy,
      g: 1.2, leading: 90, composition: [{ name: text, rich: [text], percent: 90 }], lifetime: 1e-8, population: null };
  };
  const side = Math.ceil(Math.sqrt(count));
  const [even, odd] = [false, true].map((parity) => Array.from({ length: side }, (_, i) => level(i, parity)));
  const pairs = odd.flatMap((upper) => even.map((lower) => [upper, lower])).slice(0, count);
  const lines = pairs.map(([upper, lower], i) => {
    const wavenumber = Math.abs(upper.energy - lower.energy) + 0.5;
    const A = 10 ** (8 - 7 * ((i * 7919) % 1000) / 1000);
    return { upper: upper.label, lower: lower.label, upper_J: upper.J, lower_J: lower.J, wavenumber, energy_kind: "computed", vacuum_nm: 1e7 / wavenumber, air_nm: null, multipole: "E1", S: 1, gf: A * 1e-9, f: A * 1e-10, A,
      branching: 0.5, cancellation: 0.5, weak: false, intensity: null, absorption: null, relative: null, multiplet: null, spin_note: null };
  });
  const around = { say: ["Made-up lines."], say_plain: "Made-up lines.", working: [], limits: [], cautions: [], kinds: { "lines.A": "computed" } };
  const answers = {
    levels: { ...around, species: ["X"], levels: [...even, ...odd], parameters: [], schemes: [], ground: null, intervals: [], series: [], blocks: [], partition: null },
    lines: { ...around, lines, refused: [], multiplets: [], levels: [...even, ...odd], window: null, order: "" },
  };
  const Real = globalThis.Worker;
  globalThis.Worker = class {
    constructor(url) {
      this.real = new Real(url);
      this.real.onmessage = (event) => this.onmessage?.(event);
      this.real.onerror = (event) => this.onerror?.(event);
    }

    postMessage(message) {
      const answer = message.door === "answer" ? answers[message.arguments[1]] : undefined;
      if (answer === undefined) this.real.postMessage(message);
      else setTimeout(() => this.onmessage?.({ data: { id: message.id, text: JSON.stringify({ answer }), bytes: 0 } }), 0);
    }

    terminate() {
      this.real.terminate();
    }
  };
}

// Times are only measured by the full run, which has the machine to itself.
const skip = process.env.RUNGLINE_QUICK === "1" ? "a quick run measures no times" : BROWSERS.includes("chromium") ? false : "needs Chromium";

test(`scrolling ${LINES} lines: 95th percentile of ${FRAMES} frames ≤ ${FRAME_95TH_MS} ms`, { skip }, async (t) => {
  const before = `(${answerInPlace})(${LINES})`;
  const door = await openDoor("chromium", "file", { before, fragment: "v=1&species=Na&configurations.0=3s&configurations.1=3p" });
  try {
    await door.unfold("lines");
    await door.until(() => document.querySelector("#lines .lines-table table.many"));
    const round = () => door.evaluate(async (frames) => {
      const region = document.querySelector("#lines .lines-table .table-region");
      region.scrollIntoView();
      await new Promise((resolve) => setTimeout(resolve, 1000));
      region.scrollTop = 0;
      const found = [];
      let last = performance.now();
      for (let i = 0; i < frames; i += 1) {
        // Slow, faster, and as fast as a thrown finger: 22 000 pixels a second.
        region.scrollTop += [60, 180, 360][i % 3];
        await new Promise((resolve) => requestAnimationFrame(resolve));
        const now = performance.now();
        found.push(now - last);
        last = now;
      }
      return { found: found.sort((a, b) => a - b), top: region.scrollTop };
    }, FRAMES);
    const at = (part, { found } = times) => found[Math.ceil(part * FRAMES) - 1];
    const rounds = [];
    for (let i = 0; i < ROUNDS; i += 1) rounds.push(await round());
    const times = rounds.reduce((best, each) => (at(0.95, each) < at(0.95, best) ? each : best));
    t.diagnostic(`scrolling ${LINES} lines: median ${at(0.5).toFixed(1)} ms, 95th percentile ${at(0.95).toFixed(1)} ms, longest ${at(1).toFixed(1)} ms`);
    assert.ok(times.top > 50_000, `scrolled to ${times.top}`);
    assert.ok(at(0.95) <= FRAME_95TH_MS, `95th percentile ${at(0.95).toFixed(1)} ms`);
    assert.ok(await door.evaluate(() => document.querySelectorAll("#lines .lines-table tbody:not(.spacer) tr").length) < 120);
    await door.page.focus("#lines .lines-table .table-region");
    await door.press("End");
    await door.until((last) => document.activeElement.getAttribute("aria-rowindex") === String(last), LINES + 1);
    assert.deepEqual(door.troubles, []);
  } finally {
    await door.close();
  }
});
