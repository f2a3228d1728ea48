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

/** Something that starts a worker each time it is called. */
export function workerStarter() {
  if (typeof Worker !== "function") throw new CannotStart("no-worker");
  const url = URL.createObjectURL(new Blob([RUNGLINE_WORKER_SOURCE], { type: "text/javascript" }));
  const trusted = scriptAddress(url);
  return () => {
    try {
      return new Worker(trusted);
    } catch (error) {
      throw new CannotStart("no-worker", String(error));
    }
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

async function unpacked(base64) {
  const packed = fromBase64(base64.trim());
  const stream = new Blob([packed]).stream().pipeThrough(new DecompressionStream("gzip"));
  return new Response(stream).arrayBuffer();
}

function fromBase64(text) {
  if (Uint8Array.fromBase64) return Uint8Array.fromBase64(text);
  const characters = atob(text);
  const bytes = new Uint8Array(characters.length);
  for (let index = 0; index < characters.length; index += 1) bytes[index] = characters.charCodeAt(index);
  return bytes;
}

async function fetched(url) {
  const response = await fetch(url);
  if (!response.ok) throw new Error(`${url}: ${response.status}`);
  // A server that does not know the type of the file still serves its bytes.
  if (response.headers.get("content-type")?.startsWith("application/wasm")) return WebAssembly.compileStreaming(response);
  return WebAssembly.compile(await response.arrayBuffer());
}
