import { spawn } from 'node:child_process';
import { type Usage, watchProcesses } from './watch-processes.ts';

/** How a whole process fared, from its start to its end. */
export interface TimedProcess extends Usage {
  readonly seconds: number;
  readonly stdout: string;
}

/**
 * Runs a program to its end.
 * @throws Error with its last words when it does not end with status 0
 */
export async function runTimed(program: string, args: readonly string[]): Promise<TimedProcess> {
  const start = process.hrtime.bigint();
  const child = spawn(program, args, { stdio: ['ignore', 'pipe', 'pipe'] });
  let stdout = '';
  let stderr = '';
  child.stdout.on('data', (text: Buffer) => {
    stdout += text.toString();
  });
  child.stderr.on('data', (text: Buffer) => {
    stderr = (stderr + text.toString()).slice(-2000);
  });
  const watch = child.pid === undefined ? null : watchProcesses(child.pid);
  try {
    await new Promise<void>((resolve, reject) => {
      child.on('error', reject);
      child.on('close', (code) => {
        if (code === 0) resolve();
        else reject(new Error(`${program} ${args.join(' ')} ended with ${code}: ${stderr.trim()}`));
      });
    });
  } finally {
    watch?.stop();
  }
  const seconds = Number(process.hrtime.bigint() - start) / 1e9;
  return { seconds, stdout, ...(watch?.stop() ?? { peakMb: null, processorS: null }) };
}
