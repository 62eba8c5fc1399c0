import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, vi } from 'vitest';

vi.mock('electron', () => import('../electron-double.ts'));

import { choosePaths } from '../../../app/main/choose-paths.ts';
import { menuTemplate } from '../../../app/main/setup-menu.ts';
import { filesOf, setupOpenFile, setupSingleInstance } from '../../../app/main/setup-single-instance.ts';
import { keepWindowPlace, onSomeScreen, readWindowPlace } from '../../../app/main/window-place.ts';
import { COMMANDS } from '../../../app/shared/commands.ts';
import * as double from '../electron-double.ts';

describe('menu', () => {
  it('every command of the table stands in it once, with its keys, and runs by its id', () => {
    const ran: string[] = [];
    const menu = menuTemplate((id) => ran.push(id), 'linux', true);
    const items = menu.flatMap((each) => each.submenu as unknown as { label?: string; click?: () => void }[]);
    for (const item of items) item.click?.();
    expect(ran.toSorted()).toEqual(COMMANDS.map((each) => each.id).toSorted());
  });
  it('no two commands share their keys', () => {
    const keys = COMMANDS.flatMap((each) => ('keys' in each ? [each.keys] : []));
    expect(new Set(keys).size).toBe(keys.length);
  });
  it('the packed program has no developer tools in its menu', () => {
    const text = (isPackaged: boolean): string =>
      JSON.stringify(menuTemplate(() => undefined, 'linux', isPackaged));
    expect(text(true)).not.toContain('toggleDevTools');
    expect(text(false)).toContain('toggleDevTools');
  });
});

describe('dialogs', () => {
  it('a cancelled dialog gives null', async () => {
    expect(await choosePaths({ kind: 'test' })).toBeNull();
    expect(await choosePaths({ kind: 'save-test' })).toBeNull();
  });
  it('clips may be several, a folder is one', async () => {
    double.dialogAnswers.open = { canceled: false, filePaths: ['/a.mp4', '/b.mp4'] };
    expect(await choosePaths({ kind: 'clips' })).toEqual(['/a.mp4', '/b.mp4']);
    expect(double.dialogAnswers.asked.at(-1)?.['properties']).toEqual(['openFile', 'multiSelections']);
    await choosePaths({ kind: 'folder', suggested: '/here' });
    expect(double.dialogAnswers.asked.at(-1)).toEqual({
      defaultPath: '/here',
      properties: ['openDirectory'],
    });
  });
});

describe('files from outside', () => {
  it('a second start hands over its files and the first one shows itself', () => {
    const files: string[][] = [];
    let shown = 0;
    expect(
      setupSingleInstance(
        (paths) => files.push(paths),
        () => shown++,
      ),
    ).toBe(true);
    double.app.emit('second-instance', {}, ['electron', 'main.js', '--flag', '/a.dwellbook']);
    double.app.emit('second-instance', {}, ['electron', 'main.js']);
    expect([files, shown]).toEqual([[['/a.dwellbook']], 2]);
  });
  it('the second one ends', () => {
    double.app.hasLock = false;
    expect(
      setupSingleInstance(
        () => undefined,
        () => undefined,
      ),
    ).toBe(false);
    expect(double.app.quits).toBe(1);
    double.app.hasLock = true;
  });
  it('the system opens a file', () => {
    const files: string[][] = [];
    setupOpenFile((paths) => files.push(paths));
    const event = double.preventable();
    double.app.emit('open-file', event, '/b.dwellbook');
    expect([files, event.defaultPrevented]).toEqual([[['/b.dwellbook']], true]);
  });
  it('options are no files, packed or not', () => {
    expect(filesOf(['electron', 'main.js', '--inspect', 'a'], false)).toEqual(['a']);
    expect(filesOf(['dwellbook', 'a', '-x'], true)).toEqual(['a']);
  });
});

describe('place of the window', () => {
  const screen = { x: 0, y: 0, width: 1920, height: 1080 };
  it('is kept and read again; a damaged file gives the first place', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'dwellbook-place-'));
    const path = join(folder, 'user', 'window.json');
    const place = { x: 5, y: 6, width: 1000, height: 700, maximized: true };
    await keepWindowPlace(path, place);
    expect(readWindowPlace(path)).toEqual(place);
    expect(await readFile(path, 'utf8')).toContain('1000');
    await writeFile(path, '{"width":-5}');
    expect(readWindowPlace(path)).toMatchObject({ width: 1440, height: 900 });
    await rm(folder, { recursive: true, force: true });
  });
  it('a place on a screen that was taken away loses its position, not its size', () => {
    const place = { x: 2500, y: 100, width: 1000, height: 700, maximized: false };
    expect(onSomeScreen(place, [screen])).toEqual({ width: 1000, height: 700, maximized: false });
    expect(onSomeScreen({ ...place, x: 100 }, [screen])).toEqual({ ...place, x: 100 });
  });
});
