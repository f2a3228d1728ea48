// Long runs, Stop, and a calculation that ends by itself. A wrapper round the page's worker holds
// answers back or breaks them by the sheet's title; everything else is the page's own.

import assert from "node:assert/strict";
import { everyDoor } from "../driver/door.mjs";

function wrapWorker() {
  const Real = globalThis.Worker;
  globalThis.Worker = class {
    constructor(url) {
      this.real = new Real(url);
      this.real.onmessage = (event) => this.onmessage?.(event);
      this.real.onerror = (event) => this.onerror?.(event);
    }

    postMessage(message) {
      const [sheet, question] = message.arguments ?? [];
      const title = message.door === "answer" && question === "states" ? sheet.title : null;
      const say = (data) => setTimeout(() => this.onmessage?.({ data }), 0);
      if (title === "slow") say({ id: message.id, estimate: { seconds: 1.5, megabytes: 10 } });
      else if (title === "large" && !message.asked) say({ id: message.id, waits: { seconds: 12, megabytes: 400 } });
      else if (title === "large") say({ id: message.id, estimate: { seconds: 12, megabytes: 400 } });
      else if (title === "broken") {
        say({ panic: "panicked at the tenth level" });
        say({ id: message.id, failed: "RuntimeError: unreachable" });
      } else this.real.postMessage(message);
    }

    terminate() {
      this.real.terminate();
    }
  };
}

const setTitle = (door, text) => door.evaluate((title) => {
  const input = document.querySelector('[data-path="/title"]');
  input.value = title;
  input.dispatchEvent(new Event("input", { bubbles: true }));
}, text);

everyDoor("a run above 0.3 s says so, with its estimate, and Stop stops it", async (door) => {
  const before = await door.sentence("states");
  await setTitle(door, "slow");
  await door.until(() => document.getElementById("states").dataset.state === "running");
  assert.match(await door.text("#states .words"), /running, about 1\.5\ss/);
  await door.evaluate(() => [...document.querySelectorAll("#states .run button")].find((button) => button.textContent === "Stop").click());
  await door.until(() => document.getElementById("states").dataset.state === "stale");
  assert.match(await door.text("#states .run"), /Stopped. The last answer is still here/);
  assert.equal(await door.text("#states .say"), before);
  await setTitle(door, "usual");
  await door.sentence("states");
}, { before: wrapWorker });

everyDoor("Esc stops a run, and so does a change of the sheet", async (door) => {
  await setTitle(door, "slow");
  await door.until(() => document.getElementById("states").dataset.state === "running");
  await door.press("Escape");
  await door.until(() => document.getElementById("states").dataset.state === "stale");
  await setTitle(door, "slow");
  await setTitle(door, "usual");
  await door.sentence("states");
}, { before: wrapWorker });

everyDoor("a run estimated above 2 s or 300 MB waits for Start", async (door) => {
  await setTitle(door, "large");
  await door.until(() => /12\ss and 400\sMB, waits for Start/.test(document.querySelector("#states .words").textContent));
  await door.click("Start");
  await door.until(() => document.getElementById("states").dataset.state === "running");
  await setTitle(door, "usual");
  await door.sentence("states");
}, { before: wrapWorker });

everyDoor("a calculation that ends by itself leaves the sheet and offers to try again", async (door) => {
  await setTitle(door, "broken");
  await door.until(() => /stopped unexpectedly; your sheet is safe/.test(document.getElementById("states").innerText));
  assert.match(await door.text("#states .run"), /Try again.*Save the sheet for a report/s);
  assert.match(await door.text("#states .run pre"), /tenth level/);
  // The other questions are answered by the fresh worker.
  await setTitle(door, "usual");
  await door.sentence("states");
}, { before: wrapWorker });
