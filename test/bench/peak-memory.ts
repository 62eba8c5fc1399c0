import { readdirSync, readFileSync } from 'node:fs';

/** How often the processes are looked at, ms. */
const EVERY_MS = 40;

/** Follows the memory of a process and all it starts. */
export interface MemoryWatch {
  /**
   * Ends the watch. Largest sum of the peak resident sizes (VmHWM) of the processes alive at one time, MB; null where
   * the system has no /proc.
   */
  stop(): number | null;
}

/** Watches a process and its descendants until stopped. */
export function watchMemory(pid: number): MemoryWatch {
  let peakKb = 0;
  let seen = false;
  const look = (): void => {
    const sizes = treeOf(pid).map(peakKbOf);
    const known = sizes.filter((size) => size !== null);
    if (known.length > 0) seen = true;
    peakKb = Math.max(
      peakKb,
      known.reduce((sum, size) => sum + size, 0),
    );
  };
  look();
  const timer = setInterval(look, EVERY_MS);
  return {
    stop: () => {
      clearInterval(timer);
      return seen ? peakKb / 1024 : null;
    },
  };
}

/** A process and its descendants. */
function treeOf(root: number): number[] {
  const children = new Map<number, number[]>();
  for (const entry of readProc('/proc')) {
    const pid = Number(entry);
    if (!Number.isInteger(pid)) continue;
    // The name in brackets may hold spaces; the parent is the second field after it.
    const parent = Number(
      readText(`/proc/${pid}/stat`)
        .replace(/^.*\) /s, '')
        .split(' ')[1],
    );
    children.set(parent, [...(children.get(parent) ?? []), pid]);
  }
  const tree = [root];
  for (const pid of tree) tree.push(...(children.get(pid) ?? []));
  return tree;
}

function peakKbOf(pid: number): number | null {
  const match = /^VmHWM:\s+(\d+) kB/m.exec(readText(`/proc/${pid}/status`));
  return match ? Number(match[1]) : null;
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
