// Starts the core, or fails with what is missing.

import { CannotStart } from "./cannot-start.js";
import { handed } from "./handed.js";
import { WorkerStarter } from "./worker-starter.js";

/** The compiled core: unpacked with the page's script in the one file, beside the page of the site. */
export async function compileCore() {
  if (handed) return handed.core;
  if (typeof WebAssembly !== "object") throw new CannotStart("no-webassembly");
  try {
    return await fetched(RUNGLINE_WASM);
  } catch (error) {
    throw new CannotStart("broken", String(error));
  }
}

/** What starts workers. */
export function workerStarter() {
  return handed?.workers ?? new WorkerStarter(RUNGLINE_WORKER_SOURCE);
}

async function fetched(url) {
  const response = await fetch(url);
  if (!response.ok) throw new Error(`${url}: ${response.status}`);
  // A server that does not know the type of the file still serves its bytes.
  if (response.headers.get("content-type")?.startsWith("application/wasm")) return WebAssembly.compileStreaming(response);
  return WebAssembly.compile(await response.arrayBuffer());
}
