/**
 * An abort signal that Ctrl-C (SIGINT) or SIGTERM fires. A second Ctrl-C ends the process at once.
 * Call `release` when the work is done, so that the handlers do not outlive it.
 */
export function interruptSignal(): { signal: AbortSignal; release: () => void } {
  const controller = new AbortController();
  const stop = (): void => {
    if (controller.signal.aborted) process.exit(130);
    controller.abort();
  };
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  return {
    signal: controller.signal,
    release: () => {
      process.off('SIGINT', stop);
      process.off('SIGTERM', stop);
    },
  };
}
