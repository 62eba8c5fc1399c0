/** How long ffmpeg may be silent before it is given up, s. */
export const DEFAULT_STALL_S = 30;

/** Looks several times within the stall time, so that a stall is noticed at most a quarter late. */
const LOOKS_PER_STALL = 4;

/** Calls `onStall` once when `alive()` has not been called for `stallS` seconds. */
export class StallWatchdog {
  readonly #timer: NodeJS.Timeout;
  #lastSign = performance.now();

  constructor(stallS: number, onStall: () => void) {
    const look = (): void => {
      if (performance.now() - this.#lastSign < stallS * 1000) return;
      this.end();
      onStall();
    };
    this.#timer = setInterval(look, (stallS * 1000) / LOOKS_PER_STALL);
  }

  /** Says that the watched one has just given a sign of life. */
  alive(): void {
    this.#lastSign = performance.now();
  }

  /** Ends the watch. */
  end(): void {
    clearInterval(this.#timer);
  }
}
