import { spawnSync } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';

const top = join(import.meta.dirname, '..', '..');

/** Builds what the journeys run: they try the built program, as a user would. */
export default function buildFirst(): void {
  mkdirSync(join(top, 'test', 'journeys', 'output'), { recursive: true });
  const parts = ['worker', 'start', 'page'];
  const { status } = spawnSync(process.execPath, [join(top, 'app', 'build.mjs'), ...parts], {
    stdio: 'inherit',
  });
  if (status !== 0) throw new Error('the bench does not build');
}
