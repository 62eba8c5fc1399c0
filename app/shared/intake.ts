import { stat } from 'node:fs/promises';
import { basename, dirname, isAbsolute, join, relative, sep } from 'node:path';
import { driveFrequencyFromName } from '../../src/testfile/drive-frequency-from-name.ts';
import { freshId } from '../../src/testfile/edit-lists.ts';
import type { EditOf } from '../../src/testfile/edit-schema.ts';
import { clipsInFolder, looksLikeClip } from '../../src/testfile/find-clips.ts';
import { clipPath } from '../../src/testfile/on-disk.ts';
import type { TestFile } from '../../src/testfile/schema.ts';

/** What was dropped, sorted out. */
export interface SortedPaths {
  /** The test file to open, where one was dropped. */
  readonly testFile: string | null;
  readonly clips: readonly string[];
  readonly refused: readonly string[];
}

/** Sorts dropped files and folders into a test file and clips; a folder gives its clips, or its one test file. */
export async function sortPaths(paths: readonly string[], testIsOpen: boolean): Promise<SortedPaths> {
  const clips: string[] = [];
  const refused: string[] = [];
  for (const path of paths) {
    const name = basename(path);
    const facts = await stat(path).catch(() => null);
    if (!facts) refused.push(`${name} is not there any more.`);
    else if (facts.isDirectory()) {
      const inside = await clipsInFolder(path);
      if (inside.length === 0) refused.push(`The folder ${name} holds no clips.`);
      clips.push(...inside);
    } else if (isTestName(name)) {
      if (!testIsOpen || paths.length === 1) return { testFile: path, clips: [], refused };
      refused.push(`${name} is a test file: drop it alone to open it in place of this test.`);
    } else if (looksLikeClip(name)) clips.push(path);
    else
      refused.push(
        `${name} is neither a clip nor a test file: drop videos (.mp4, .mov ...) or a .dwellbook file.`,
      );
  }
  return { testFile: null, clips: [...new Set(clips)], refused };
}

/** Whether a file name is a test file's. */
export function isTestName(name: string): boolean {
  return /\.(dwellbook|json)$/i.test(name);
}

/** A path as a test file keeps it: relative with forward slashes where the clip lies near, absolute otherwise. */
export function pathInTest(testPath: string, path: string): string {
  const way = relative(dirname(testPath), path);
  const far = isAbsolute(way) || way.startsWith(join('..', '..', '..'));
  return far ? path : way.split(sep).join('/');
}

/** The edit that adds clips to a run sheet, and what is to be told; clips the test has already are refused. */
export function addClipsEdit(
  test: TestFile,
  testPath: string,
  paths: readonly string[],
  target: { configuration: string; setup: string },
): { edit: EditOf<'add-clips'> | null; unknownFrequency: string[]; refused: string[] } {
  const there = new Set(test.clips.map((clip) => clipPath(testPath, clip)));
  const taken = new Set(test.clips.map((clip) => clip.id));
  const clips: EditOf<'add-clips'>['clips'] = [];
  const unknownFrequency: string[] = [];
  const refused: string[] = [];
  for (const path of paths) {
    const name = basename(path);
    if (there.has(path)) {
      refused.push(`${name} is in this test already.`);
      continue;
    }
    const id = freshId(taken, name.replace(/\.[^.]*$/, ''));
    taken.add(id);
    const driveHz = driveFrequencyFromName(name);
    if (driveHz === null) unknownFrequency.push(id);
    clips.push({ id, file: pathInTest(testPath, path), ...(driveHz === null ? {} : { driveHz }) });
  }
  clips.sort((a, b) => (a.driveHz ?? Number.POSITIVE_INFINITY) - (b.driveHz ?? Number.POSITIVE_INFINITY));
  return {
    edit: clips.length > 0 ? { kind: 'add-clips', ...target, clips } : null,
    unknownFrequency,
    refused,
  };
}
