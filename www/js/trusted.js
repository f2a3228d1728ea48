// The page's one policy for its scripts: its own worker, its own offline keeper and, in the one file, itself.

import { handed } from "./handed.js";

let policy = handed?.policy;

/** The policy, made at first use; null in a browser that knows none. `createScript` is the one file's own rule. */
export function scriptPolicy(createScript) {
  policy ??= globalThis.trustedTypes?.createPolicy("rungline", {
    createScriptURL(address) {
      if (address === "sw.js" || address.startsWith("blob:")) return address;
      throw new TypeError(`Not one of this page's scripts: ${address}`);
    },
    ...(createScript && { createScript }),
  }) ?? null;
  return policy;
}

/** The address in the form in which this browser lets a script be started from it. */
export function scriptAddress(address) {
  return scriptPolicy()?.createScriptURL(address) ?? address;
}
