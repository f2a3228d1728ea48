// Starts the core, or says which part of the browser is missing.

import { scriptAddress } from "./trusted.js";

/** Why the page cannot start; `reason` names the text in index.html that says what to do. */
export class CannotStart extends Error {
  constructor(reason, detail = "") {
    super(detail || reason);
    this.reason = reason;
    this.detail = detail;
  }
}

/** The compiled core: embedded in the one file, or beside the page of the site. */
export async function compileCore() {
  if (typeof WebAssembly !== "object") throw new CannotStart("no-webassembly");
  const embedded = document.getElementById("wasm");
  try {
    return embedded ? await WebAssembly.compile(await unpacked(embedded.textContent)) : await fetched(RUNGLINE_WASM);
  } catch (error) {
    throw new CannotStart("broken", String(error));
  }
}

/** Something that gives a fresh worker each time it is called. */
export function workerStarter() {
  if (typeof Worker !== "function") throw new CannotStart("no-worker");
  const url = URL.createObjectURL(new Blob([RUNGLINE_WORKER_SOURCE], { type: "text/javascript" }));
  const trusted = scriptAddress(url);
  const fresh = () => {
    try {
      return new Worker(trusted);
    } catch (error) {
      throw new CannotStart("no-worker", String(error));
    }
  };
  // The first one starts while the core compiles. If it fails before anybody listens, it fails once more.
  let first = fresh();
  first.onerror = (event) => {
    event.preventDefault();
    first = null;
  };
  return () => {
    const worker = first ?? fresh();
    first = null;
    return worker;
  };
}

/** Shows the text for what is missing. */
export function showCannotStart(error) {
  const box = document.getElementById("cannot-start");
  const reason = error instanceof CannotStart ? error.reason : "broken";
  for (const part of box.querySelectorAll("[data-reason]")) part.hidden = part.dataset.reason !== reason;
  const detail = document.getElementById("cannot-start-detail");
  detail.textContent = error instanceof CannotStart ? error.detail : String(error);
  detail.hidden = detail.textContent === "";
  document.getElementById("cannot-start-sheet").hidden = false;
  box.classList.add("certain");
  box.hidden = false;
}

async function unpacked(text) {
  const stream = new Blob([fromPrintable(text.trim())]).stream().pipeThrough(new DecompressionStream("gzip"));
  return new Response(stream).arrayBuffer();
}

// 13 bits in two of 91 characters, the last six or fewer in one, as web/site/src/printable.rs writes them.
function fromPrintable(text) {
  const values = new Uint8Array(128);
  let next = 0;
  for (let code = 33; code < 127; code += 1) if (!"<>&".includes(String.fromCharCode(code))) values[code] = next++;
  const pairs = text.length >> 1;
  const last = text.length % 2;
  const bytes = new Uint8Array(Math.floor((13 * pairs + 6 * last) / 8));
  let held = 0;
  let count = 0;
  let place = 0;
  for (let pair = 0; pair < pairs + last; pair += 1) {
    const high = pair < pairs ? values[text.charCodeAt(2 * pair + 1)] : 0;
    held |= (values[text.charCodeAt(2 * pair)] + 91 * high) << count;
    for (count += pair < pairs ? 13 : 6; count >= 8; count -= 8) {
      bytes[place++] = held;
      held >>>= 8;
    }
  }
  return bytes;
}

async function fetched(url) {
  const response = await fetch(url);
  if (!response.ok) throw new Error(`${url}: ${response.status}`);
  // A server that does not know the type of the file still serves its bytes.
  if (response.headers.get("content-type")?.startsWith("application/wasm")) return WebAssembly.compileStreaming(response);
  return WebAssembly.compile(await response.arrayBuffer());
}
