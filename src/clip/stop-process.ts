import type { ChildProcess } from 'node:child_process';

/** How long a process may take to end by itself once asked to, s. */
export const STOP_GRACE_S = 0.5;

const living = new Set<ChildProcess>();
let watchingExit = false;

/** Asks a process to end (SIGTERM) and ends it by force (SIGKILL) if it has not done so within the grace time. */
export function stopProcess(child: ChildProcess, graceS: number = STOP_GRACE_S): void {
  if (hasEnded(child)) return;
  child.kill('SIGTERM');
  const force = setTimeout(() => {
    if (!hasEnded(child)) child.kill('SIGKILL');
  }, graceS * 1000);
  child.once('exit', () => clearTimeout(force));
}

/** Sees to it that the process does not outlive this one, whichever way this one ends by itself. */
export function leaveNoOrphan(child: ChildProcess): void {
  living.add(child);
  child.once('exit', () => living.delete(child));
  child.once('error', () => living.delete(child));
  if (watchingExit) return;
  watchingExit = true;
  process.on('exit', () => {
    for (const left of living) left.kill('SIGKILL');
  });
}

const hasEnded = (child: ChildProcess): boolean => child.exitCode !== null || child.signalCode !== null;
