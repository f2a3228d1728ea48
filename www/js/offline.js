// Has the browser keep the static site for use without a network; the one file needs no keeping.

import { scriptAddress } from "./trusted.js";

/**
 * `tell` hears "kept" once everything is stored, "waiting" when a newer version is stored and waits
 * until it is taken, "refused" when this browser keeps nothing.
 * Returns a function that takes the waiting version: the page then loads again.
 */
export function keepOffline(tell) {
  if (RUNGLINE_DOOR === "file") return () => {};
  const container = navigator.serviceWorker;
  if (!container) {
    tell("refused");
    return () => {};
  }
  let waiting = null;
  const watch = (registration) => {
    const look = () => {
      if (registration.waiting && registration.active) {
        waiting = registration.waiting;
        tell("waiting");
      } else if (registration.active) {
        tell("kept");
      }
    };
    const follow = (worker) => worker?.addEventListener("statechange", look);
    follow(registration.installing);
    registration.addEventListener("updatefound", () => follow(registration.installing));
    look();
  };
  container
    .register(scriptAddress("sw.js"), { updateViaCache: "none" })
    .then(watch)
    .catch(() => tell("refused"));
  return () => {
    if (!waiting) return;
    container.addEventListener("controllerchange", () => location.reload(), { once: true });
    waiting.postMessage("take over");
  };
}
