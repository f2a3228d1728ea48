// The one file's own script: unpacks the rest of the style, the worker, the core and the page's script, which stand after it as
// text in pieces, while the rest of the file is still being read, and starts each as soon as it can.

import { CannotStart, showCannotStart } from "./cannot-start.js";
import { fromPrintable } from "./printable.js";
import { paintKeptTheme } from "./theme.js";
import { scriptPolicy } from "./trusted.js";
import { WorkerStarter } from "./worker-starter.js";

/** One part of the file: where its packed bytes are written to, and what comes out unpacked. */
function part(type) {
  const { readable, writable } = new DecompressionStream("gzip");
  return { writer: writable.getWriter(), unpacked: new Response(readable, { headers: { "Content-Type": type } }) };
}

/** Writes each part's pieces to it once they are read; a part that never ends fails. */
function feed(parts) {
  const open = new Set(Object.keys(parts));
  const take = (atEnd) => {
    for (const piece of document.querySelectorAll("script[data-part]")) {
      // A piece is whole once the next element stands after it.
      if (!atEnd && piece.nextElementSibling === null) return;
      const { part: name, last } = piece.dataset;
      piece.remove();
      // What goes wrong inside is told by what comes out.
      parts[name].writer.write(fromPrintable(piece.textContent)).catch(() => {});
      if (last === undefined) continue;
      open.delete(name);
      parts[name].writer.close().catch(() => {});
    }
  };
  const observer = new MutationObserver(() => take(false));
  observer.observe(document.body, { childList: true });
  document.addEventListener("DOMContentLoaded", () => {
    observer.disconnect();
    take(true);
    for (const name of open) parts[name].writer.abort(new Error("The file is cut short."));
  });
}

async function compiled(response) {
  if (typeof WebAssembly !== "object") throw new CannotStart("no-webassembly");
  try {
    return await WebAssembly.compileStreaming(response);
  } catch (error) {
    throw new CannotStart("broken", String(error));
  }
}

// The content policy knows the style's hash too.
function addStyle(text) {
  const style = document.createElement("style");
  style.textContent = text;
  document.head.append(style);
}

async function start() {
  if (typeof DecompressionStream !== "function") throw new CannotStart("broken", "This browser has no DecompressionStream.");
  const parts = { style: part("text/css"), worker: part("text/javascript"), core: part("application/wasm"), app: part("text/javascript") };
  feed(parts);
  const core = compiled(parts.core.unpacked);
  const app = parts.app.unpacked.text();
  const styled = parts.style.unpacked.text().then(addStyle);
  // Each is awaited below; that one fails while another is awaited is no fault of its own.
  core.catch(() => {});
  app.catch(() => {});
  styled.catch(() => {});
  // The policy is made once, and its rule for scripts knows but one text.
  let text = null;
  const policy = scriptPolicy((given) => {
    if (given === text) return given;
    throw new TypeError("Not this page's script.");
  });
  const workers = new WorkerStarter(await parts.worker.unpacked.text());
  core.then((module) => workers.prepare(module), showCannotStart);
  text = await app;
  await styled;
  // The content policy knows the script's hash: no other text would run.
  const script = document.createElement("script");
  script.text = policy?.createScript(text) ?? text;
  script.handed = { policy, core, workers };
  document.body.append(script);
  script.remove();
}

paintKeptTheme();
start().catch(showCannotStart);
