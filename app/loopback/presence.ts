/** Tells when the page has gone: no connection for a while after there was one. */
export class Presence {
  readonly #graceMs: number;
  readonly #onGone: () => void;
  #connections = 0;
  #timer: NodeJS.Timeout | null = null;

  /**
   * @param graceMs how long a page may take to come back (a reload)
   */
  constructor(graceMs: number, onGone: () => void) {
    this.#graceMs = graceMs;
    this.#onGone = onGone;
  }

  /** A page came; call what is given back once it has gone. */
  arrive(): () => void {
    this.#connections++;
    this.stop();
    let left = false;
    return () => {
      if (left) return;
      left = true;
      this.#connections--;
      if (this.#connections === 0) this.#timer = setTimeout(this.#onGone, this.#graceMs);
    };
  }

  /** Stops waiting. */
  stop(): void {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = null;
  }
}
