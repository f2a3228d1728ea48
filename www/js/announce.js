// Speaks politely, once typing has rested.

/** Typing has rested after this. */
const REST_MS = 600;

/** Announces the newest text of each kind after a rest; `now` speaks at once. */
export function makeAnnouncer(region) {
  const waiting = new Map();
  let timer = 0;
  const speak = () => {
    region.textContent = [...waiting.values()].join(" ");
    waiting.clear();
  };
  return {
    /** After the rest, and only the newest text of this kind. */
    later(kind, text) {
      waiting.delete(kind);
      if (text) waiting.set(kind, text);
      clearTimeout(timer);
      timer = setTimeout(speak, REST_MS);
    },
    /** Typing goes on: whatever waits goes on waiting. */
    hold() {
      if (waiting.size === 0) return;
      clearTimeout(timer);
      timer = setTimeout(speak, REST_MS);
    },
    now(text) {
      // The same words twice are only spoken when the region was empty between.
      region.textContent = "";
      setTimeout(() => {
        region.textContent = text;
      }, 50);
    },
  };
}
