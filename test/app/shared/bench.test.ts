import { chmod, mkdir, readdir, readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { lockPath } from '../../../app/shared/lock-file.ts';
import type { Edit } from '../../../src/testfile/edit-schema.ts';
import { emptyTest } from '../../../src/testfile/edits.ts';
import { journalPath } from '../../../src/testfile/journal.ts';
import { loadTest, saveTest } from '../../../src/testfile/on-disk.ts';
import { FakeEngine } from '../fake-engine.ts';
import { fittingEngine, makeTestBench, SMALL_CLIP, type TestBench } from '../make-test-bench.ts';

let made: TestBench;
let path = '';
const SHEET = 'configuration-1';
const edit = (change: Edit): Promise<void> => made.bench.handlers.edit({ edit: change });
const dwell = (id: string, driveHz: number, amplitude: number): Edit => ({
  kind: 'add-dwells',
  configuration: SHEET,
  dwells: [{ id, driveHz, typed: { amplitude, u: 0.05 } }],
});

beforeEach(async () => {
  made = await makeTestBench();
  path = join(made.folder, 'a.dwellbook');
  await saveTest(path, emptyTest('carriage'));
  await made.bench.handlers.openTest({ path });
});
afterEach(() => made.end());

describe('saving', () => {
  it('every edit is in the file when the test is closed, and journal and lock are gone', async () => {
    await edit({ kind: 'title', title: 'renamed' });
    await made.bench.handlers.closeTest({});
    expect((await loadTest(path)).title).toBe('renamed');
    expect((await readdir(made.folder)).filter((name) => name.startsWith('.'))).toEqual([]);
  });

  it('an edit is in the journal before it is answered', async () => {
    await edit({ kind: 'title', title: 'in the journal' });
    expect(await readFile(journalPath(path), 'utf8')).toContain('in the journal');
  });

  it('killed after an edit and before the save, the edit is there when the test is opened again', async () => {
    await edit({ kind: 'title', title: 'before the kill' });
    const journal = await readFile(journalPath(path), 'utf8');
    const file = await readFile(path, 'utf8');
    await made.bench.handlers.closeTest({});
    await writeFile(path, file); // as the kill would have left them
    await writeFile(journalPath(path), journal);
    await made.bench.handlers.openTest({ path });
    expect(made.bench.state().test?.title).toBe('before the kill');
    expect(made.events.some((event) => event.type === 'notice' && /One change/.test(event.notice.text))).toBe(
      true,
    );
  });

  it('undo and redo go through every edit and are saved too', async () => {
    await edit(dwell('d1', 1, 2));
    await edit(dwell('d2', 2, 3));
    const dwells = (): number => made.bench.state().test?.configurations[0]?.dwells.length ?? -1;
    await made.bench.handlers.undo({});
    await made.bench.handlers.undo({});
    expect([dwells(), made.bench.state().history]).toEqual([0, { undo: null, redo: 'add a dwell' }]);
    await made.bench.handlers.undo({}); // nothing left: nothing happens
    await made.bench.handlers.redo({});
    expect(dwells()).toBe(1);
    await made.bench.handlers.closeTest({});
    expect((await loadTest(path)).configurations[0]?.dwells).toHaveLength(1);
  });

  it('edits sent at once are applied in order', async () => {
    await Promise.all(Array.from({ length: 40 }, (_, k) => edit({ kind: 'title', title: `title ${k}` })));
    expect(made.bench.state().test?.title).toBe('title 39');
  });

  it('an edit that cannot be applied changes nothing and says why', async () => {
    const before = made.bench.state().test;
    await expect(edit({ kind: 'remove-marker', setup: 'setup-1', id: 'ghost' })).rejects.toThrow(/"ghost"/);
    expect(made.bench.state().test).toBe(before);
  });
});

describe('read-only', () => {
  it('a test open in another program is opened read-only and nothing is written', async () => {
    await made.bench.handlers.closeTest({});
    await writeFile(lockPath(path), JSON.stringify({ pid: 1, host: (await import('node:os')).hostname() }));
    const text = await readFile(path, 'utf8');
    await made.bench.handlers.openTest({ path });
    expect(made.bench.state().file?.readOnly).toMatch(/another Dwellbook.*process 1/);
    await edit({ kind: 'title', title: 'only in memory' });
    expect(made.bench.state().test?.title).toBe('only in memory');
    await made.bench.handlers.saveAs({ path: join(made.folder, 'copy') });
    expect((await loadTest(join(made.folder, 'copy.dwellbook'))).title).toBe('only in memory');
    expect(await readFile(path, 'utf8')).toBe(text);
  });

  it('the lock of a program that no longer runs is taken over', async () => {
    await made.bench.handlers.closeTest({});
    await writeFile(
      lockPath(path),
      JSON.stringify({ pid: 2 ** 22 + 7, host: (await import('node:os')).hostname() }),
    );
    await made.bench.handlers.openTest({ path });
    expect(made.bench.state().file?.readOnly).toBeNull();
  });

  it('a torn lock is taken over', async () => {
    await made.bench.handlers.closeTest({});
    await writeFile(lockPath(path), '{"pi');
    await made.bench.handlers.openTest({ path });
    expect(made.bench.state().file?.readOnly).toBeNull();
  });
});

describe('results', () => {
  it('follow every edit: a dwell typed in appears, one excluded says so', async () => {
    await edit(dwell('d1', 1.6, 12.1));
    await edit({ kind: 'change-dwells', configuration: SHEET, dwells: [{ id: 'd1', excluded: 'bumped' }] });
    await settled();
    expect(made.bench.state().results?.dwells).toMatchObject([
      { id: 'd1', amplitude: { value: 12.1, u: 0.05 }, excluded: 'bumped', typed: true },
    ]);
  });

  it('an engine that stops costs one sentence, and the next edit is evaluated again', async () => {
    await made.end();
    let broken = true;
    const fitting = fittingEngine();
    const engine = new FakeEngine({
      plan: () => [],
      evaluate: (args) => {
        if (broken) throw new Error('worker stopped');
        return fitting.call('evaluate', args);
      },
    });
    made = await makeTestBench({ engine });
    path = join(made.folder, 'b.dwellbook');
    await saveTest(path, emptyTest('carriage'));
    await made.bench.handlers.openTest({ path });
    await settled();
    expect(
      made.events.some((event) => event.type === 'notice' && event.notice.text === 'worker stopped'),
    ).toBe(true);
    broken = false;
    await edit(dwell('d1', 1.6, 12.1));
    await settled();
    expect(made.bench.state().results?.dwells).toHaveLength(1);
  });
});

/** Waits until the evaluation that the last edit started is through. */
async function settled(): Promise<void> {
  for (let turn = 0; turn < 50; turn++) await new Promise((resolve) => setImmediate(resolve));
}

describe('taking in', () => {
  it('a folder of clips makes a test beside them, with drive frequencies from the names', async () => {
    await made.bench.handlers.closeTest({});
    const rig = join(made.folder, 'rig');
    await mkdir(rig);
    for (const name of ['1.7Hz.mp4', '1,6Hz.mp4', 'IMG_1.mov', 'notes.txt'])
      await writeFile(join(rig, name), name);
    const intake = await made.bench.handlers.takeIn({ paths: [rig] });
    expect(intake).toEqual({
      opened: false,
      added: ['1-6hz', '1-7hz', 'img-1'],
      unknownFrequency: ['img-1'],
      refused: [],
    });
    expect(made.bench.state().file?.path).toBe(join(rig, 'rig.dwellbook'));
    expect(made.bench.state().test?.clips.map((clip) => clip.file)).toEqual([
      '1,6Hz.mp4',
      '1.7Hz.mp4',
      'IMG_1.mov',
    ]);
    expect(made.bench.state().missing).toEqual([]);
  });

  it('a test file opens, anything else is refused by name with what to do', async () => {
    const notes = join(made.folder, 'notes.txt');
    await writeFile(notes, 'x');
    expect((await made.bench.handlers.takeIn({ paths: [notes] })).refused).toEqual([
      expect.stringMatching(/^notes.txt is neither a clip nor a test file: drop/),
    ]);
    await made.bench.handlers.closeTest({});
    expect(await made.bench.handlers.takeIn({ paths: [path] })).toMatchObject({ opened: true });
  });

  it('a clip that cannot be read is refused and the others are taken', async () => {
    await made.end();
    const engine = new FakeEngine({
      plan: () => [],
      evaluate: (args) => fittingEngine().call('evaluate', args),
      probe: async ({ path: clip }) => {
        const { InputError } = await import('../../../src/errors.ts');
        if (clip.includes('bad')) throw new InputError('bad.mp4: holds no video.');
        return SMALL_CLIP;
      },
    });
    made = await makeTestBench({ engine });
    for (const name of ['bad.mp4', '2Hz.mp4']) await writeFile(join(made.folder, name), name);
    const intake = await made.bench.handlers.takeIn({
      paths: ['bad.mp4', '2Hz.mp4'].map((name) => join(made.folder, name)),
    });
    expect(intake).toMatchObject({ added: ['2hz'], refused: ['bad.mp4: holds no video.'] });
  });

  it('a clip that is in the test already is not taken twice', async () => {
    const clip = join(made.folder, '2Hz.mp4');
    await writeFile(clip, 'x');
    await made.bench.handlers.takeIn({ paths: [clip] });
    expect(await made.bench.handlers.takeIn({ paths: [clip] })).toMatchObject({
      added: [],
      refused: ['2Hz.mp4 is in this test already.'],
    });
  });

  it('a folder that cannot be written to gets its test among the others', async () => {
    await made.bench.handlers.closeTest({});
    const rig = join(made.folder, 'card');
    await mkdir(rig);
    await writeFile(join(rig, '2Hz.mp4'), 'x');
    await chmod(rig, 0o500);
    await made.bench.handlers.takeIn({ paths: [rig] });
    const at = made.bench.state().file?.path;
    await chmod(rig, 0o700);
    // root may write anywhere: then the test lies beside the clips after all
    const expected = process.getuid?.() === 0 ? rig : join(made.folder, 'tests', 'card');
    expect(at).toBe(join(expected, 'card.dwellbook'));
  });
});
