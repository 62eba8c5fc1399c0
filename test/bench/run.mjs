/**
 * `npm run bench`: builds the command line and measures it. Arguments are the bench's own:
 * `--short`, `--rounds N`, `--seconds N`, `--cli FILE` (another build to measure).
 */
import { spawnSync } from 'node:child_process';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const top = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const run = (...args) => spawnSync(process.execPath, args, { cwd: top, stdio: 'inherit' }).status ?? 1;

process.exitCode =
  run('app/build.mjs', 'cli') ||
  run('--import', 'tsx', join('test', 'bench', 'bench.ts'), ...process.argv.slice(2));
