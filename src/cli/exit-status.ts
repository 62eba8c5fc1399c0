/** Exit status of the command line, as scripts rely on it. */
export const EXIT = {
  /** Everything asked for was done. */
  ok: 0,
  /** Some dwell could not be measured; the others were. */
  someFailed: 1,
  /** The call or the test file is not usable. */
  unusable: 2,
  /** Stopped by Ctrl-C (128 + SIGINT, the habit of shells). */
  interrupted: 130,
} as const;
