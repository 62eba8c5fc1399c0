/**
 * Runs every check of the project one after the other and ends with a line `N passed, N failed`:
 * types, lint, unit tests, then the build and the journeys in a browser.
 * `--quick` leaves the build and the journeys out.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const top = dirname(dirname(fileURLToPath(import.meta.url)));
const quick = process.argv.includes('--quick');
const folder = mkdtempSync(join(tmpdir(), 'dwellbook-test-'));
const binary = (name) => join(top, 'node_modules', '.bin', name);

let passed = 0;
let failed = 0;
let skipped = 0;
const failures = [];

function run(command, args) {
  const done = spawnSync(command, args, { cwd: top, stdio: 'inherit', shell: process.platform === 'win32' });
  return done.status === 0;
}

/** A check that passes or fails as a whole. */
function check(name, command, args) {
  console.log(`\n== ${name}`);
  if (run(command, args)) passed += 1;
  else {
    failed += 1;
    failures.push(name);
  }
}

/** A test suite that counts its own tests. */
function suite(name, args) {
  console.log(`\n== ${name}`);
  const file = join(folder, `${name.replaceAll(' ', '-')}.json`);
  const fine = run(binary('vitest'), [
    'run',
    ...args,
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${file}`,
  ]);
  try {
    const counts = JSON.parse(readFileSync(file, 'utf8'));
    passed += counts.numPassedTests;
    failed += counts.numFailedTests;
    skipped += counts.numPendingTests;
    if (!fine && counts.numFailedTests === 0) {
      failed += 1;
      failures.push(`${name}: a test file did not run`);
    } else if (counts.numFailedTests > 0) failures.push(name);
  } catch {
    failed += 1;
    failures.push(`${name}: no outcome was written`);
  }
}

check('types', binary('tsc'), ['-p', 'tsconfig.json']);
check('types of the pure engine, without Node or DOM', binary('tsc'), ['-p', 'tsconfig.engine.json']);
check('types of the page', binary('tsc'), ['-p', 'app/page/tsconfig.json']);
check('lint and format', binary('biome'), ['ci', '.']);
if (!quick) check('build', process.execPath, ['app/build.mjs']);
suite('unit tests', []);
if (!quick) suite('journeys', ['--config', 'test/journeys/vitest.config.ts']);

rmSync(folder, { recursive: true, force: true });
if (failures.length > 0) console.log(`\nFailed: ${failures.join('; ')}`);
console.log(`\n${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`);
process.exitCode = failed > 0 ? 1 : 0;
