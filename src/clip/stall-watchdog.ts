/** How long ffmpeg may be silent before it is given up, s. */
export const DEFAULT_STALL_S = 30;

/** Looks within the stall time: a stall is noticed at most a quarter late. */
const LOOKS_PER_STALL = 4;

/**
 * Calls `onStall` once when `alive()` has not been called for `stallS` seconds. It counts its own looks instead of
 * reading a clock, so that a computer that slept, or was busy with something else, does not count as a stall.
 */
export class StallWatchdog {
  readonly #timer: NodeJS.Timeout;
  #silentLooks = 0;

  constructor(stallS: number, onStall: () => void) {
    const look = (): void => {
      this.#silentLooks++;
      if (this.#silentLooks < LOOKS_PER_STALL) return;
      this.end();
      onStall();
    };
    this.#timer = setInterval(look, (stallS * 1000) / LOOKS_PER_STALL);
  }

  /** Says that the watched one has just given a sign of life. */
  alive(): void {
    this.#silentLooks = -1; // the look under way is not a whole one
  }

  /** Ends the watch. */
  end(): void {
    clearInterval(this.#timer);
  }
}
