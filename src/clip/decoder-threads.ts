import { availableParallelism } from 'node:os';

/** More threads hold more frames in memory at once than the speed they bring is worth. */
const MOST_THREADS = 4;

/** Options before the input that let the decoder use the processors there are, within reason. */
export function decoderThreadOptions(processors: number = availableParallelism()): string[] {
  return ['-threads', String(Math.min(MOST_THREADS, Math.max(1, processors)))];
}
