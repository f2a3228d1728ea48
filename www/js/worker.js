// Runs the core away from the page. One message in, one calculation, its text out.

import * as core from "rungline-web";

/** Beyond these a run waits until it is asked for by name. */
const WAIT_SECONDS = 2;
const WAIT_MEGABYTES = 300;
/** Shorter runs are not worth telling about. */
const TELL_SECONDS = 0.3;

let memory = null;

self.onmessage = ({ data }) => {
  if (data.module) {
    memory = core.initSync({ module: data.module }).memory;
    self.postMessage({ ready: true });
    return;
  }
  try {
    if (data.door === "answer") {
      const estimate = JSON.parse(core.estimate(...data.arguments));
      const large = estimate.seconds > WAIT_SECONDS || estimate.megabytes > WAIT_MEGABYTES;
      if (large && !data.asked) {
        self.postMessage({ id: data.id, waits: estimate });
        return;
      }
      if (estimate.seconds > TELL_SECONDS) self.postMessage({ id: data.id, estimate });
    }
    const text = core[data.door](...data.arguments);
    self.postMessage({ id: data.id, text, bytes: memory.buffer.byteLength });
  } catch (error) {
    // After a trap the memory is in no known state: the page ends this worker.
    self.postMessage({ id: data.id, failed: String(error) });
  }
};
