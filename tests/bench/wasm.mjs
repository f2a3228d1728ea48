// The browser's side of `cargo site bench`, in Node: seconds for each piece of work, one a line.
// Arguments: the bindings (an ES module) and the module.

import { readFileSync } from "node:fs";
import { pathToFileURL } from "node:url";

/** As long as the second compilation of a piece of work may take. */
const WARM_MS = 300;

const [bindings, module] = process.argv.slice(2);
const core = await import(pathToFileURL(bindings).href);
core.initSync({ module: new WebAssembly.Module(readFileSync(module)) });

for (const [index, calls] of [...core.bench_calls()].entries()) {
  // What runs often is compiled a second time, for speed, while it runs.
  for (const start = performance.now(); performance.now() - start < WARM_MS;) core.bench_work(index, calls);
  let best = Infinity;
  for (let round = 0; round < 5; round += 1) {
    const start = performance.now();
    core.bench_work(index, calls);
    best = Math.min(best, (performance.now() - start) / 1000 / calls);
  }
  console.log(String(best));
}
