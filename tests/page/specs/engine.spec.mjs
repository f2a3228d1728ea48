// The page's side of the worker against a worker made for the test.

import assert from "node:assert/strict";
import { test } from "node:test";
import { Engine } from "../../../www/js/engine.js";

function harness() {
  const workers = [];
  class FakeWorker {
    constructor() {
      this.sent = [];
      this.ended = false;
      workers.push(this);
    }

    postMessage(message) {
      if (message.module) queueMicrotask(() => this.onmessage?.({ data: { ready: true } }));
      else this.sent.push(message);
    }

    terminate() {
      this.ended = true;
    }

    reply(data) {
      this.onmessage({ data: { id: this.sent.at(-1).id, ...data } });
    }
  }
  const engine = new Engine(() => new FakeWorker(), "module");
  return { engine, workers, newest: () => workers.at(-1) };
}

const settled = () => new Promise((resolve) => setTimeout(resolve, 0));

test("one calculation at a time, the latest of a kind wins", async () => {
  const { engine, newest } = harness();
  await settled();
  const first = engine.request("answer:states", "answer", ["a"]);
  const second = engine.request("answer:states", "answer", ["b"]);
  const third = engine.request("answer:states", "answer", ["c"]);
  assert.deepEqual(await first, { superseded: true });
  assert.deepEqual(await second, { superseded: true });
  assert.equal(newest().sent.length, 1);
  newest().reply({ text: "old" });
  assert.deepEqual(newest().sent.at(-1).arguments, ["c"]);
  newest().reply({ text: "new" });
  assert.deepEqual(await third, { text: "new" });
});

test("a superseded run is awaited for a moment only", async () => {
  const { engine, workers, newest } = harness();
  await settled();
  engine.request("answer:states", "answer", ["long"]);
  engine.supersede("answer:");
  const reading = engine.request("read", "read", ["new"]);
  assert.equal(workers.length, 1);
  await new Promise((resolve) => setTimeout(resolve, 150));
  assert.equal(workers.length, 2);
  assert.ok(workers[0].ended);
  newest().reply({ text: "read" });
  assert.deepEqual(await reading, { text: "read" });
});

test("reading goes before waiting answers", async () => {
  const { engine, newest } = harness();
  await settled();
  engine.request("chart:0", "chart", [0]);
  engine.request("answer:lines", "answer", ["a"]);
  engine.request("read", "read", ["a"]);
  newest().reply({ text: "chart" });
  assert.equal(newest().sent.at(-1).door, "read");
});

test("stopping ends the worker and starts a fresh one", async () => {
  const { engine, workers, newest } = harness();
  await settled();
  const running = engine.request("answer:states", "answer", []);
  const waiting = engine.request("answer:lines", "answer", []);
  engine.stop();
  assert.deepEqual(await running, { stopped: true });
  assert.deepEqual(await waiting, { stopped: true });
  assert.ok(workers[0].ended);
  await settled();
  const next = engine.request("read", "read", []);
  newest().reply({ text: "fine" });
  assert.deepEqual(await next, { text: "fine" });
});

test("a panic gives its words, and a fresh worker takes over", async () => {
  const { engine, workers, newest } = harness();
  await settled();
  const broken = engine.request("answer:states", "answer", []);
  const waiting = engine.request("answer:lines", "answer", []);
  newest().onmessage({ data: { panic: "index 3 is out of range" } });
  newest().reply({ failed: "RuntimeError: unreachable" });
  assert.deepEqual(await broken, { panic: "index 3 is out of range" });
  assert.ok(workers[0].ended);
  await settled();
  newest().reply({ text: "lines" });
  assert.deepEqual(await waiting, { text: "lines" });
});

test("a worker whose memory has grown is replaced", async () => {
  const { engine, workers, newest } = harness();
  await settled();
  const large = engine.request("answer:states", "answer", []);
  newest().reply({ text: "large", bytes: 301e6 });
  assert.deepEqual(await large, { text: "large" });
  assert.equal(workers.length, 2);
  assert.ok(workers[0].ended);
});

test("a run that waits says its estimate", async () => {
  const { engine, newest } = harness();
  await settled();
  const run = engine.request("answer:states", "answer", []);
  newest().reply({ waits: { seconds: 12, megabytes: 400 } });
  assert.deepEqual(await run, { waits: { seconds: 12, megabytes: 400 } });
});

test("a worker that cannot start is not started again and again", async () => {
  const { engine, workers } = harness();
  const request = engine.request("about", "about", []);
  workers[0].onmessage = null;
  workers[0].onerror({ message: "refused", preventDefault() {} });
  assert.deepEqual(await request, { panic: "refused" });
  assert.equal(workers.length, 1);
});
