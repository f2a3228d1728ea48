// Runs the core away from the page. One message in, one calculation, its text out.

import * as core from "rungline-web";

/** Beyond these a run waits until it is asked for by name. */
const WAIT_SECONDS = 2;
const WAIT_MEGABYTES = 300;
/** Shorter runs are not worth telling about. */
const TELL_SECONDS = 0.3;

/** A rest after which the tables of f shells are worked out, before anybody asks for them. */
const REST_MS = 150;
const HEAVIEST_SHELL = Object.freeze({ rungline: 1, species: "*", configurations: ["4f7"] });

/** What the first sheet will call, called once before: see `warm`. */
const USUAL = Object.freeze({ rungline: 1, species: "Fe", configurations: ["3d6 4s2"] });

let memory = null;
let resting = null;
let ready = false;
let warmed = false;

self.onmessage = ({ data }) => {
  if (data.module) {
    memory = core.initSync({ module: data.module }).memory;
    self.postMessage({ ready: true });
    if (data.warm) warm();
    return;
  }
  try {
    const asked = data.door === "answer" ? data.arguments : data.door === "splitting_map" ? [data.arguments[0], "splitting_map"] : null;
    if (asked !== null) {
      const estimate = JSON.parse(core.estimate(...asked));
      const large = estimate.seconds > WAIT_SECONDS || estimate.megabytes > WAIT_MEGABYTES;
      if (large && !data.asked) {
        self.postMessage({ id: data.id, waits: estimate });
        return;
      }
      if (estimate.seconds > TELL_SECONDS) self.postMessage({ id: data.id, estimate });
    }
    const text = core[data.door](...data.arguments);
    self.postMessage({ id: data.id, text, bytes: memory.buffer.byteLength });
    if (data.door === "about") warm();
  } catch (error) {
    // After a trap the memory is in no known state: the page ends this worker.
    self.postMessage({ id: data.id, failed: String(error) });
    return;
  }
  prepare();
};

// A browser compiles a function when it is first called, and the first reading calls most of them. While
// the page puts itself together, they are called once: before it asks for anything in the one file, which
// has the core before the page's script, and after "about", which the page asks first, on the site.
function warm() {
  if (warmed) return;
  warmed = true;
  core.read(USUAL);
  core.answer(USUAL, "states");
}

// The first question about f electrons pays for their fractional parentage and for code that the
// browser has not compiled yet, more than for its answer. Both are done once, when nothing is asked.
function prepare() {
  if (ready) return;
  clearTimeout(resting);
  resting = setTimeout(() => {
    ready = true;
    core.read(HEAVIEST_SHELL);
    core.answer(HEAVIEST_SHELL, "states");
  }, REST_MS);
}
