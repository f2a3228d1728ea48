// The one thing that is chosen, shared by every table and picture.

export function makeChoice() {
  let chosen = null;
  const listeners = new Set();
  return {
    get: () => chosen,
    set(id) {
      if (id === chosen) return;
      chosen = id;
      for (const listener of listeners) listener(id);
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

/** The same choice for nodes that are made anew now and then: `release` ends their subscriptions. */
export function scopedChoice(choice) {
  let drops = [];
  return {
    get: choice.get,
    set: choice.set,
    subscribe(listener) {
      const drop = choice.subscribe(listener);
      drops.push(drop);
      return drop;
    },
    release() {
      for (const drop of drops) drop();
      drops = [];
    },
  };
}
