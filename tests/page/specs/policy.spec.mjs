// Nothing is requested from anywhere else: page and worker try, and the policy refuses each attempt.

import assert from "node:assert/strict";
import { createServer } from "node:http";
import { after } from "node:test";
import { everyDoor } from "../driver/door.mjs";

// A server that would answer anybody: only the policy stands between it and the page.
const asked = [];
const elsewhere = createServer((request, response) => {
  asked.push(request.url);
  response.writeHead(200, { "Access-Control-Allow-Origin": "*" }).end("reached");
});
elsewhere.on("upgrade", (request, socket) => {
  asked.push(request.url);
  socket.destroy();
});
await new Promise((resolve) => elsewhere.listen(0, "127.0.0.1", resolve));
const port = elsewhere.address().port;
after(() => elsewhere.close());

/** Runs in the page and in the worker: what became of each attempt, and what the policy said of it. */
async function attempt(port) {
  const refused = [];
  globalThis.addEventListener("securitypolicyviolation", (event) => refused.push(event.effectiveDirective));
  const attempts = {
    fetch: () => fetch(`http://127.0.0.1:${port}/fetch`).then((response) => response.text()),
    WebSocket: () => new Promise((resolve, reject) => {
      const socket = new WebSocket(`ws://127.0.0.1:${port}/socket`);
      socket.onopen = () => resolve("reached");
      socket.onerror = () => reject(new Error("refused"));
    }),
    eval: async () => (0, globalThis.eval)("6 * 7"),
    Function: async () => new Function("return 6 * 7")(),
    timer: () => new Promise((resolve, reject) => {
      globalThis.ranText = () => resolve("ran");
      try {
        setTimeout("ranText()", 0);
      } catch (error) {
        reject(error);
      }
      setTimeout(() => reject(new Error("did not run")), 100);
    }),
  };
  const results = {};
  for (const [name, work] of Object.entries(attempts)) {
    try {
      results[name] = `reached: ${await work()}`;
    } catch (error) {
      results[name] = `refused: ${error?.name}`;
    }
  }
  // The report of a refusal may come after the refusal.
  await new Promise((resolve) => setTimeout(resolve, 100));
  return { results, refused };
}

function assertRefused({ results, refused }, where) {
  for (const [name, result] of Object.entries(results)) assert.match(result, /^refused/, `${where}: ${name}`);
  assert.ok(refused.filter((directive) => directive === "connect-src").length >= 2, `${where}: ${refused}`);
  // Text as a script is refused for want of a trusted type, before script-src is even asked.
  assert.ok(refused.filter((directive) => /^(script-src|require-trusted-types-for)/.test(directive)).length >= 3, `${where}: ${refused}`);
  assert.deepEqual(asked, [], `${where}: a request left the page`);
}

everyDoor("the page reaches nothing and runs no text", async (door) => {
  await door.evaluate(() => {
    try {
      const script = document.createElement("script");
      script.textContent = "globalThis.inlineRan = true";
      document.head.append(script);
    } catch {
      // Refused at the assignment where the browser knows trusted types.
    }
  });
  // From a timer of the page itself, not from the driver's call, which a browser may let do more.
  await door.evaluate(
    `globalThis.tryAll = ${attempt}; setTimeout(() => tryAll(${port}).then((found) => { globalThis.attempts = found; }), 0); undefined`,
  );
  assertRefused(await door.until(() => globalThis.attempts), "page");
  assert.equal(await door.evaluate(() => globalThis.inlineRan ?? false), false, "an inline script ran");
}, { start: false });

everyDoor("the worker reaches nothing and runs no text", async (door) => {
  // The page's own worker, with the attempts in front of its source.
  assertRefused(await door.until(() => globalThis.attempts), "worker");
}, {
  start: false,
  before: [
    `const attemptSource = ${JSON.stringify(`(${attempt})(${port}).then((attempts) => self.postMessage({ attempts }));\n`)};`,
    "const makeUrl = URL.createObjectURL.bind(URL);",
    "URL.createObjectURL = (blob) => makeUrl(new Blob([attemptSource, blob], { type: blob.type }));",
    "const PlainWorker = globalThis.Worker;",
    "globalThis.Worker = class extends PlainWorker { constructor(...given) { super(...given);",
    "this.addEventListener('message', (event) => { if (event.data.attempts) { globalThis.attempts = event.data.attempts; event.stopImmediatePropagation(); } }); } };",
  ].join("\n"),
});

everyDoor("the page asks nobody but its own door while it works", async (door) => {
  const requests = [];
  door.page.on("request", (request) => requests.push(request.url()));
  await door.page.reload({ waitUntil: "load" });
  const home = door.address.replace(/[^/]*$/, "");
  const strange = requests.filter((url) => !/^(blob|data):/.test(url) && !url.startsWith(home));
  assert.deepEqual(strange, []);
}, { start: false });
