import { mkdir, mkdtemp, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';

vi.mock('electron', () => import('../electron-double.ts'));

import { openWindow } from '../../../app/main/open-window.ts';
import {
  declarePageScheme,
  isPageAddress,
  PAGE_ADDRESS,
  setupPageScheme,
} from '../../../app/main/page-scheme.ts';
import { setupNavigation } from '../../../app/main/setup-navigation.ts';
import { setupOperations } from '../../../app/main/setup-operations.ts';
import { setupPermissions } from '../../../app/main/setup-permissions.ts';
import { CALL_CHANNEL, EVENT_CHANNEL } from '../../../app/shared/electron-bridge.ts';
import * as double from '../electron-double.ts';
import { makeTestBench, type TestBench } from '../make-test-bench.ts';

// The items are those of Electron's own security checklist (docs/tutorial/security.md), by its numbers.

let made: TestBench;
let window: double.BrowserWindow;
let pageFolder = '';
const faults: unknown[] = [];

beforeAll(async () => {
  made = await makeTestBench();
  pageFolder = await mkdtemp(join(tmpdir(), 'dwellbook-page-'));
  await writeFile(join(pageFolder, 'index.html'), '<!doctype html>');
  await writeFile(join(pageFolder, 'secret.key'), 'no page file');
  await mkdir(join(pageFolder, 'assets'));
  await symlink('/etc/hostname', join(pageFolder, 'assets/leak.js'));
  declarePageScheme();
  setupNavigation();
  setupPermissions();
  setupPageScheme(pageFolder);
  setupOperations(made.bench, (error) => faults.push(error));
  openWindow({
    bench: made.bench,
    preload: '/dist/preload.cjs',
    placeFile: join(made.folder, 'window.json'),
  });
  window = double.BrowserWindow.all.at(-1) as double.BrowserWindow;
});
afterAll(async () => {
  await rm(pageFolder, { recursive: true, force: true });
  await made.end();
});

const preferences = (): Record<string, unknown> =>
  window.options['webPreferences'] as Record<string, unknown>;

function serve(address: string, method = 'GET'): Promise<Response> {
  const handler = double.schemes.handlers.get('dwellbook');
  if (!handler) throw new Error('the scheme is not served');
  return handler({ url: address, method } as Request);
}

describe('what is loaded', () => {
  it('1, 18: only the page under its own scheme, no remote content and no file: address', () => {
    expect(window.loaded).toEqual([PAGE_ADDRESS]);
    expect(PAGE_ADDRESS.startsWith('dwellbook://')).toBe(true);
  });

  it('7: every answer carries a content policy without unsafe sources, and refusals too', async () => {
    for (const address of [PAGE_ADDRESS, 'dwellbook://bench/nothing.js']) {
      const policy = (await serve(address)).headers.get('Content-Security-Policy') ?? '';
      expect(policy).toContain("default-src 'none'");
      expect(policy).toContain("script-src 'self'");
      expect(policy).not.toMatch(/unsafe|\*|https?:/);
    }
  });

  it.each([
    'dwellbook://bench/../main.js',
    'dwellbook://bench/..%2fmain.js',
    'dwellbook://bench/%2e%2e/%2e%2e/etc/passwd',
    'dwellbook://bench/assets/leak.js',
    'dwellbook://bench/secret.key',
    'dwellbook://bench/assets',
    'dwellbook://bench/index.html%00.js',
    'dwellbook://bench/..\\main.js',
    'dwellbook://elsewhere/index.html',
    'file:///etc/passwd',
  ])('18: %s is not served', async (address) => {
    expect((await serve(address)).status).toBe(404);
  });

  it('18: only reading is answered', async () => {
    expect((await serve(PAGE_ADDRESS)).status).toBe(200);
    expect((await serve(PAGE_ADDRESS, 'POST')).status).toBe(404);
  });
});

describe('the window', () => {
  it('2: no Node integration, in workers and frames neither', () => {
    expect(preferences()).toMatchObject({
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
    });
  });
  it('3, 4: context isolation and sandbox are on', () => {
    expect(preferences()).toMatchObject({ contextIsolation: true, sandbox: true });
  });
  it('6, 8, 9: web security on, insecure content and experiments off', () => {
    expect(preferences()).toMatchObject({
      webSecurity: true,
      allowRunningInsecureContent: false,
      experimentalFeatures: false,
    });
  });
  it('10: no Blink feature is switched on', () => {
    expect(preferences()).not.toHaveProperty('enableBlinkFeatures');
  });
  it('11, 12: there are no webviews, and none can be attached', () => {
    expect(preferences()).toMatchObject({ webviewTag: false });
    const event = double.preventable();
    window.webContents.emit('will-attach-webview', event);
    expect(event.defaultPrevented).toBe(true);
  });
});

describe('5: permissions', () => {
  it.each(['media', 'geolocation', 'notifications', 'clipboard-read', 'openExternal', 'fileSystem'])(
    '%s is refused',
    (permission) => {
      const answers: boolean[] = [];
      double.session.defaultSession.requestHandler?.({}, permission, (ok) => answers.push(ok));
      expect(answers).toEqual([false]);
      expect(double.session.defaultSession.checkHandler?.()).toBe(false);
      expect(double.session.defaultSession.deviceHandler?.()).toBe(false);
    },
  );

  it('only saves made in the page may be downloaded', () => {
    const download = (url: string): boolean => {
      const event = double.preventable();
      double.session.defaultSession.emit('will-download', event, { getURL: () => url });
      return !event.defaultPrevented;
    };
    expect(download('blob:dwellbook://bench/1c2d')).toBe(true);
    expect(download('https://example.com/x.exe')).toBe(false);
    expect(download('blob:https://example.com/1c2d')).toBe(false);
  });
});

describe('13, 14, 15: navigation and new windows', () => {
  const away = [
    'https://example.com/',
    'http://127.0.0.1/',
    'file:///etc/passwd',
    'javascript:alert(1)',
    'data:text/html,x',
    'dwellbook://elsewhere/index.html',
    'not an address',
  ];
  it.each(['will-navigate', 'will-redirect', 'will-frame-navigate'])('%s leads nowhere else', (name) => {
    for (const url of away) {
      const event = double.preventable({ url });
      window.webContents.emit(name, event);
      expect([url, event.defaultPrevented]).toEqual([url, true]);
    }
    const home = double.preventable({ url: PAGE_ADDRESS });
    window.webContents.emit(name, home);
    expect(home.defaultPrevented).toBe(false);
  });
  it('no address opens a window, the page itself neither', () => {
    for (const url of [...away, PAGE_ADDRESS])
      expect(window.webContents.openHandler?.({ url })).toEqual({ action: 'deny' });
  });
});

describe('17: the sender of a call', () => {
  const call = async (event: object, name: unknown = 'hello', input: unknown = {}): Promise<unknown> =>
    double.ipcHandlers.get(CALL_CHANNEL)?.(event, name, input);
  const page = (): object => ({ sender: window.webContents, senderFrame: window.webContents.mainFrame });

  it('the top frame of the page is answered', async () => {
    expect(await call(page())).toEqual({ ok: true, output: undefined });
  });
  it('a frame inside the page, another address and a frame that has gone are not', async () => {
    const { webContents } = window;
    const frame = { url: 'dwellbook://bench/index.html' };
    await expect(call({ sender: webContents, senderFrame: frame })).rejects.toThrow(/not come from the page/);
    await expect(call({ sender: webContents, senderFrame: null })).rejects.toThrow(/not come from the page/);
    const foreign = { mainFrame: { url: 'https://example.com/' } };
    await expect(call({ sender: foreign, senderFrame: foreign.mainFrame })).rejects.toThrow(/not come/);
  });
  it.each([
    ['no such operation', {}],
    ['constructor', {}],
    ['__proto__', {}],
    [7, {}],
    ['openTest', {}],
    ['openTest', { path: 7 }],
    ['openTest', { path: '/a', more: 1 }],
    ['edit', { edit: { kind: 'run', command: 'rm' } }],
    ['frame', { clip: 'c', frame: -1, widthPx: 640, near: false }],
    ['hello', null],
  ])('%s with %j is refused before any handler sees it', async (name, input) => {
    expect(await call(page(), name, input)).toMatchObject({ ok: false, kind: 'refused' });
    expect(faults).toEqual([]);
  });
});

it('20: the page is sent plain events on one channel', () => {
  made.bench.command('undo');
  expect(window.webContents.sent.at(-1)).toEqual([EVENT_CHANNEL, { type: 'command', command: 'undo' }]);
});

it('a page that crashed is loaded again, one that was closed is not', () => {
  window.webContents.emit('render-process-gone', {}, { reason: 'crashed' });
  window.webContents.emit('render-process-gone', {}, { reason: 'clean-exit' });
  expect(window.webContents.reloads).toBe(1);
});

it('an address counts as the page only by scheme and host together', () => {
  expect(isPageAddress('dwellbook://bench/assets/x.js')).toBe(true);
  expect(isPageAddress('https://bench/')).toBe(false);
  expect(isPageAddress('dwellbook://bench.example.com/')).toBe(false);
});
