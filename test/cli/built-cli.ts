import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { build } from 'esbuild';
import { top } from '../house/source-files.ts';

/** What a run of the command line came to. */
export interface CliOutcome {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

// inside node_modules so that the bundle finds the packages it leaves outside
const BUNDLE = join(top, 'node_modules', '.cache', 'dwellbook-test', `cli-${process.pid}.js`);
let built: Promise<unknown> | null = null;

/** Path of the command line, built once per test file. */
export async function cliPath(): Promise<string> {
  built ??= build({
    entryPoints: [join(top, 'src', 'cli', 'main.ts')],
    outfile: BUNDLE,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    logLevel: 'error',
  });
  await built;
  return BUNDLE;
}

/** Runs the command line as a stranger would: another process, its own exit status, nothing shared. */
export async function runCli(args: readonly string[], env: Record<string, string> = {}): Promise<CliOutcome> {
  const path = await cliPath();
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [path, ...args], {
      env: { ...process.env, ...env },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    let stdout = '';
    let stderr = '';
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      stdout += text;
    });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      stderr += text;
    });
    child.on('error', reject);
    child.on('close', (status) => resolve({ status, stdout, stderr }));
  });
}
