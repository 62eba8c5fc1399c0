import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { app, type BrowserWindow } from 'electron';
import { makeBench } from '../shared/make-bench.ts';
import { choosePaths } from './choose-paths.ts';
import { openWindow } from './open-window.ts';
import { declarePageScheme, setupPageScheme } from './page-scheme.ts';
import { setupClosing } from './setup-closing.ts';
import { setupMenu } from './setup-menu.ts';
import { setupNavigation } from './setup-navigation.ts';
import { setupOperations } from './setup-operations.ts';
import { setupPermissions } from './setup-permissions.ts';
import { filesOf, setupOpenFile, setupSingleInstance } from './setup-single-instance.ts';

// Electron's main process: what is set up, in order. Windows open when everything that serves them is there.

const dist = dirname(fileURLToPath(import.meta.url));
const waiting: string[] = [];
let takeIn = (paths: string[]): void => void waiting.push(...paths);
let window: BrowserWindow | null = null;

function show(): void {
  if (window?.isMinimized()) window.restore();
  window?.focus();
}

async function start(): Promise<void> {
  declarePageScheme();
  setupNavigation();
  setupOpenFile((paths) => takeIn(paths));
  await app.whenReady();
  setupPermissions();
  setupPageScheme(join(dist, 'page'));
  const bench = await makeBench({
    host: { kind: 'electron', nativeDialogs: true, program: `Dwellbook ${app.getVersion()}` },
    dist,
    userFolder: app.getPath('userData'),
    demoFolder: join(app.isPackaged ? process.resourcesPath : dirname(dist), 'fixtures', 'demo'),
    testsFolder: join(app.getPath('documents'), 'Dwellbook'),
    choosePaths,
  });
  const tell = (error: unknown): void => console.error('Dwellbook met a fault of its own:', error);
  setupOperations(bench, tell);
  setupMenu((command) => bench.command(command));
  setupClosing(bench);
  takeIn = (paths) => void bench.handlers.takeIn({ paths }).catch(tell);
  const files = [...filesOf(process.argv), ...waiting];
  if (files.length > 0) takeIn(files);
  window = openWindow({
    bench,
    preload: join(dist, 'preload.cjs'),
    placeFile: join(app.getPath('userData'), 'window.json'),
  });
}

if (setupSingleInstance((paths) => takeIn(paths), show))
  start().catch((error: unknown) => {
    console.error('Dwellbook could not start:', error);
    app.exit(1);
  });
