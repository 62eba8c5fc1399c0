import { readdirSync, readFileSync } from 'node:fs';

/** How often the processes are looked at, ms. */
const EVERY_MS = 40;

/** Linux counts processor time in hundredths of a second (USER_HZ). */
const TICKS_PER_S = 100;

/** What a process and all it started have used; null where the system has no /proc. */
export interface Usage {
  /** Largest sum of the peak resident sizes (VmHWM) of the processes alive at one time, MB. */
  readonly peakMb: number | null;
  /** User and system time of all processes as last seen, s; what one used after its last look is missing. */
  readonly processorS: number | null;
}

/** Watches a process and its descendants until stopped. */
export function watchProcesses(pid: number): { stop(): Usage } {
  let peakKb = 0;
  const processorS = new Map<number, number>();
  const look = (): void => {
    let sumKb = 0;
    for (const each of treeOf(pid)) {
      sumKb += peakKbOf(each);
      const used = processorSecondsOf(each);
      if (used !== null) processorS.set(each, used);
    }
    peakKb = Math.max(peakKb, sumKb);
  };
  look();
  const timer = setInterval(look, EVERY_MS);
  return {
    stop: () => {
      clearInterval(timer);
      return {
        peakMb: peakKb > 0 ? peakKb / 1024 : null,
        processorS:
          processorS.size > 0 ? [...processorS.values()].reduce((sum, used) => sum + used, 0) : null,
      };
    },
  };
}

/** A process and its descendants. */
function treeOf(root: number): number[] {
  const children = new Map<number, number[]>();
  for (const entry of readProc('/proc')) {
    const pid = Number(entry);
    if (!Number.isInteger(pid)) continue;
    const parent = Number(statusFields(pid)[1]);
    children.set(parent, [...(children.get(parent) ?? []), pid]);
  }
  const tree = [root];
  for (const pid of tree) tree.push(...(children.get(pid) ?? []));
  return tree;
}

/** 0 for a process that has ended. */
function peakKbOf(pid: number): number {
  return Number(/^VmHWM:\s+(\d+) kB/m.exec(readText(`/proc/${pid}/status`))?.[1] ?? 0);
}

/** Null for a process that has ended. */
function processorSecondsOf(pid: number): number | null {
  const fields = statusFields(pid);
  const [user, system] = [Number(fields[11]), Number(fields[12])];
  return Number.isFinite(user + system) ? (user + system) / TICKS_PER_S : null;
}

/** The fields of /proc/PID/stat from the state on: the name before them may hold spaces. */
function statusFields(pid: number): string[] {
  return readText(`/proc/${pid}/stat`)
    .replace(/^.*\) /s, '')
    .split(' ');
}

function readProc(folder: string): string[] {
  try {
    return readdirSync(folder);
  } catch {
    return [];
  }
}

/** Empty where the process has ended in the meantime. */
function readText(file: string): string {
  try {
    return readFileSync(file, 'utf8');
  } catch {
    return '';
  }
}
