// The page's one policy for script addresses: its own worker and its own offline keeper, nothing else.

const policy = globalThis.trustedTypes?.createPolicy("rungline", {
  createScriptURL(address) {
    if (address === "sw.js" || address.startsWith("blob:")) return address;
    throw new TypeError(`Not one of this page's scripts: ${address}`);
  },
});

/** The address in the form in which this browser lets a script be started from it. */
export function scriptAddress(address) {
  return policy ? policy.createScriptURL(address) : address;
}
