// Keeps one version of the site, whole, for use without a network.
//
// The build puts in RUNGLINE_FILES, each file with its digest, and RUNGLINE_CACHE, named by the
// digest of that list. A download that fails or has other bytes than the list says fails the whole
// installation, and the version before stays.

const PREFIX = "rungline-";
const START = "index.html";

self.addEventListener("install", (event) => event.waitUntil(install()));
self.addEventListener("activate", (event) => event.waitUntil(removeOlder()));
self.addEventListener("message", (event) => {
  if (event.data === "take over") self.skipWaiting();
});
self.addEventListener("fetch", (event) => {
  const name = nameOf(event.request);
  if (name !== null) event.respondWith(kept(name, event.request));
});

async function install() {
  try {
    const cache = await caches.open(RUNGLINE_CACHE);
    await Promise.all(
      Object.entries(RUNGLINE_FILES).map(async ([name, integrity]) => {
        const response = await fetch(name, { integrity, cache: "no-store" });
        if (!response.ok) throw new Error(`${name}: ${response.status}`);
        await cache.put(name, response);
      }),
    );
  } catch (error) {
    await caches.delete(RUNGLINE_CACHE);
    throw error;
  }
}

async function removeOlder() {
  for (const name of await caches.keys()) {
    if (name.startsWith(PREFIX) && name !== RUNGLINE_CACHE) await caches.delete(name);
  }
}

/** The kept file that a request is for, or null. */
function nameOf(request) {
  if (request.method !== "GET") return null;
  const scope = self.registration.scope;
  const address = request.url.split(/[?#]/)[0];
  if (!address.startsWith(scope)) return null;
  const name = address.slice(scope.length) || START;
  return Object.hasOwn(RUNGLINE_FILES, name) ? name : null;
}

/** A file of this version; the network only where the browser has thrown the kept one away. */
async function kept(name, request) {
  const cache = await caches.open(RUNGLINE_CACHE);
  return (await cache.match(name)) ?? fetch(request);
}
