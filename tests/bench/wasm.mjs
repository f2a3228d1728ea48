// The browser's side of `cargo site bench`, in Node: seconds for each piece of work, one a line.
// Arguments: the bindings (an ES module) and the module.

import { readFileSync } from "node:fs";
import { pathToFileURL } from "node:url";

const [bindings, module] = process.argv.slice(2);
const core = await import(pathToFileURL(bindings).href);
core.initSync({ module: new WebAssembly.Module(readFileSync(module)) });

for (const [index, calls] of [...core.bench_calls()].entries()) {
  // The first calls run in code that is still being compiled.
  core.bench_work(index, calls);
  let best = Infinity;
  for (let round = 0; round < 5; round += 1) {
    const start = performance.now();
    core.bench_work(index, calls);
    best = Math.min(best, (performance.now() - start) / 1000 / calls);
  }
  console.log(String(best));
}
