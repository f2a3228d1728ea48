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
