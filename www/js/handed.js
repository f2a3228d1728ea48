// What the one file's unpacking hands to the page's script, which it starts: {policy, core, workers}. On the site there is none.

export const handed = globalThis.document?.currentScript?.handed ?? null;
