import { spawn } from 'node:child_process';
import { dirname, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { electronBinary } from './loopback/electron-binary.ts';
import { runLoopback } from './loopback/run-loopback.ts';

/**
 * `node dist/start.js [--loopback] [--no-open] [FILE ...]`: the desktop window where Electron's binary is there,
 * otherwise the same bench in the browser at a loopback address.
 */
const args = process.argv.slice(2);
const dist = dirname(fileURLToPath(import.meta.url));
const files = args.filter((arg) => !arg.startsWith('--')).map((arg) => resolve(arg));
const binary = args.includes('--loopback') ? null : electronBinary();

if (binary !== null) {
  const child = spawn(binary, [resolve(dist, 'main.js'), ...files], { stdio: 'inherit' });
  child.on('exit', (code) => {
    process.exitCode = code ?? 1;
  });
} else {
  if (!args.includes('--loopback'))
    console.log('Electron is not installed here: the bench opens in the browser instead.');
  await runLoopback({ dist, files, openBrowser: !args.includes('--no-open') });
}
