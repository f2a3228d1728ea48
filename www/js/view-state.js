// What is folded in and out, remembered on this device.

export class ViewState {
  #storage;
  #state;

  constructor(storage) {
    this.#storage = storage;
    this.#state = { ...storage.view() };
  }

  get(key) {
    return this.#state[key];
  }

  set(key, value) {
    if (this.#state[key] === value) return;
    this.#state[key] = value;
    this.#storage.keepView(this.#state);
  }
}
