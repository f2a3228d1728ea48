// The same sheet gives the same bytes: the native program and both browsers, on every example.

import assert from "node:assert/strict";
import { execFileSync } from "node:child_process";
import { readFileSync, readdirSync } from "node:fs";
import { test } from "node:test";
import { everyDoor } from "../driver/door.mjs";

const FOLDER = new URL("../../examples/", import.meta.url);
const NAMES = readdirSync(FOLDER).filter((name) => name.endsWith(".json")).sort();

const QUESTIONS = ["states", "levels", "lines", "splitting"];

/** Each answer of the native program as the text it printed, by question. */
function native(name) {
  const path = new URL(name, FOLDER).pathname;
  const answers = {};
  for (const question of QUESTIONS) {
    let text;
    try {
      text = execFileSync(process.env.RUNGLINE_NATIVE, ["answer", path, "--question", question], {
        encoding: "utf8", maxBuffer: 1 << 28, stdio: ["ignore", "pipe", "pipe"],
      });
    } catch {
      // The example does not allow this question; the page must agree.
      continue;
    }
    answers[question] = inner(text.trim(), `{"rungline":1,"answers":{"${question}":`, "}}");
  }
  return answers;
}

/** What stands between a beginning and an end that must be there. */
function inner(text, beginning, end) {
  assert.ok(text.startsWith(beginning), `${text.slice(0, 80)} does not begin with ${beginning}`);
  assert.ok(text.endsWith(end));
  return text.slice(beginning.length, text.length - end.length);
}

test("there are examples", () => assert.ok(NAMES.length >= 11, String(NAMES)));

everyDoor("every example has the same bytes here and natively", async (door) => {
  for (const name of NAMES) {
    const sheet = JSON.parse(readFileSync(new URL(name, FOLDER), "utf8"));
    const expected = native(name);
    assert.ok(Object.keys(expected).length > 0, `${name} answers nothing`);
    const found = await door.evaluate(async (example, questions) => {
      const answers = {};
      for (const question of questions) answers[question] = await globalThis.askWorker(example, question);
      return answers;
    }, sheet, QUESTIONS);
    for (const question of QUESTIONS) {
      if (expected[question] === undefined) {
        assert.match(found[question], /^\{"faults":/, `${name}, ${question}`);
        continue;
      }
      // Compared as one: a difference is shown by its place, not by two pages of numbers.
      const here = inner(found[question], '{"answer":', "}");
      if (here === expected[question]) continue;
      const at = [...here].findIndex((character, index) => character !== expected[question][index]);
      assert.fail(`${name}, ${question}: differs at ${at}: ${here.slice(at - 60, at + 60)} | ${expected[question].slice(at - 60, at + 60)}`);
    }
  }
}, {
  // Keeps the page's own worker in reach: the core that answers here is the one that the page uses.
  before: () => {
    const PlainWorker = globalThis.Worker;
    let last = 1_000_000;
    globalThis.Worker = class extends PlainWorker {
      constructor(...given) {
        super(...given);
        globalThis.askWorker = (sheet, question) => new Promise((resolve) => {
          last += 1;
          const id = last;
          const hear = ({ data }) => {
            if (data.id !== id || data.estimate) return;
            this.removeEventListener("message", hear);
            resolve(data.text ?? JSON.stringify(data));
          };
          this.addEventListener("message", hear);
          this.postMessage({ id, door: "answer", arguments: [sheet, question], asked: true });
        });
      }
    };
  },
});
