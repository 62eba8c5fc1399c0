import { type ChildProcess, spawn } from 'node:child_process';
import { LineTail } from './line-tail.ts';
import { openOutputChannel } from './output-channel.ts';
import { DEFAULT_STALL_S, StallWatchdog } from './stall-watchdog.ts';
import { leaveNoOrphan, stopProcess } from './stop-process.ts';

/** Lines of standard error kept for the message. */
const KEPT_LINES = 20;

/**
 * Why a run ended; the first cause that arises is the one recorded.
 * 'finished': exit status 0. 'failed': another exit status. 'killed': by a signal that was not ours.
 * 'cancelled': by the caller's AbortSignal. 'stalled': silent for too long. 'stopped': the receiver had enough or
 * threw. 'not-started': the program could not be started at all.
 */
export type EndReason =
  | 'finished'
  | 'failed'
  | 'killed'
  | 'cancelled'
  | 'stalled'
  | 'stopped'
  | 'not-started';

/** How a run of ffmpeg ended, one shape for success, failure and cancel. */
export interface FfmpegResult {
  readonly reason: EndReason;
  /** Exit status; null when ended by a signal or never started. */
  readonly exitCode: number | null;
  /** The signal that ended it, if one did. */
  readonly signal: NodeJS.Signals | null;
  /** Wall-clock time from start to end, s. */
  readonly durationS: number;
  /** Last lines of standard error, oldest first; the system's reason where the program did not start. */
  readonly lastLines: readonly string[];
}

/** What to do while ffmpeg runs; everything is optional. */
export interface RunOptions {
  readonly signal?: AbortSignal;
  /**
   * Receives standard output piece by piece, synchronously; the piece may be reused afterwards. Returning false
   * stops the run; throwing stops it too, and the error is passed on once the process has ended.
   */
  readonly onOutput?: (chunk: Uint8Array) => unknown;
  /** Expect megabytes of output: they are taken in over a channel that costs less for each. */
  readonly bulk?: boolean;
  /** Receives each line of standard error. */
  readonly onLine?: (line: string) => void;
  /** Time without any output after which the run is given up, s; 30 where absent. */
  readonly stallS?: number;
}

/**
 * Runs ffmpeg once, without a shell, and waits for its end. Output is consumed as it comes, so memory does not grow
 * with the length of the clip. Rejects only with what `onOutput` threw; every end of the process itself, good or
 * bad, is a result.
 */
export async function runFfmpeg(
  executable: string,
  args: readonly string[],
  options: RunOptions = {},
): Promise<FfmpegResult> {
  const startedMs = performance.now();
  let cause: EndReason | null = options.signal?.aborted ? 'cancelled' : null;
  const ended = (
    exitCode: number | null,
    signal: NodeJS.Signals | null,
    lines: readonly string[],
  ): FfmpegResult => ({
    reason: cause ?? naturalEnd(exitCode),
    exitCode,
    signal,
    durationS: (performance.now() - startedMs) / 1000,
    lastLines: lines,
  });
  if (cause !== null) return ended(null, null, []);

  let thrown: { readonly error: unknown } | null = null;
  const receive = (chunk: Uint8Array): void => {
    watchdog.alive();
    if (cause !== null) return; // drained, so that the process is not blocked on its way out
    try {
      if (options.onOutput?.(chunk) === false) stop('stopped');
    } catch (error) {
      thrown = { error };
      stop('stopped');
    }
  };
  const channel = options.bulk ? await openOutputChannel(receive) : null;
  const child: ChildProcess = spawn(executable, args, {
    stdio: ['ignore', channel?.childEnd ?? 'pipe', 'pipe'],
    windowsHide: true,
  });
  channel?.handedOver();
  leaveNoOrphan(child);
  child.stdout?.on('data', receive);
  // A process of its own that an ended program left behind may hold the pipes open: do not wait for it.
  const letGo = (): void => {
    child.stdout?.destroy();
    child.stderr?.destroy();
    channel?.letGo();
  };
  const stop = (why: EndReason): void => {
    if (cause !== null) return; // the first reason counts, and asking once is enough
    cause = why;
    stopProcess(child);
    if (child.exitCode !== null || child.signalCode !== null) letGo();
  };
  child.once('exit', () => {
    if (cause !== null) letGo();
  });
  const watchdog = new StallWatchdog(options.stallS ?? DEFAULT_STALL_S, () => stop('stalled'));
  const stderr = new LineTail(KEPT_LINES, options.onLine);
  child.stderr?.on('data', (chunk: Buffer) => {
    watchdog.alive();
    stderr.push(chunk);
  });
  const cancel = (): void => stop('cancelled');
  if (options.signal?.aborted) cancel();
  options.signal?.addEventListener('abort', cancel, { once: true });

  const result = await new Promise<FfmpegResult>((resolve) => {
    child.once('error', (error) => {
      if (child.pid !== undefined) return; // a signal that could not be sent; the end is still to come
      cause = 'not-started';
      letGo();
      resolve(ended(null, null, [error.message]));
    });
    child.once('close', async (exitCode, signal) => {
      await channel?.ended;
      resolve(ended(exitCode, signal, stderr.end()));
    });
  });
  watchdog.end();
  options.signal?.removeEventListener('abort', cancel);
  if (thrown !== null) throw (thrown as { readonly error: unknown }).error;
  return result;
}

function naturalEnd(exitCode: number | null): EndReason {
  if (exitCode === 0) return 'finished';
  return exitCode === null ? 'killed' : 'failed';
}
