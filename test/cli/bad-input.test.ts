import { execFileSync } from 'node:child_process';
import { chmod, copyFile, mkdtemp, readdir, readFile, rm, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ffmpeg } from '../helpers/make-clip.ts';
import { type RenderedTest, renderTest, type TestJson } from '../helpers/rendered-test.ts';
import { type CliOutcome, runCli } from './built-cli.ts';

let folder = '';
let good: RenderedTest;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-bad-'));
  good = await renderTest(folder, [{ id: 'good', driveHz: 3.1, camera: { frames: 60 } }]);
});
afterAll(async () => {
  await rm(folder, { recursive: true, force: true });
});

/** Writes a changed copy of the good test and runs a command on it. */
async function runOn(
  change: (test: TestJson) => void,
  args: readonly string[] = ['measure', '--json'],
  env: Record<string, string> = {},
): Promise<CliOutcome> {
  const test = structuredClone(good.test);
  change(test);
  const path = join(folder, 'changed.dwellbook');
  await writeFile(path, JSON.stringify(test));
  const [command = '', ...rest] = args;
  return runCli([command, path, ...rest], env);
}

function expectOneLine(stderr: string, pattern: RegExp): void {
  expect(stderr.trimEnd().split('\n')).toHaveLength(1);
  expect(stderr).toMatch(pattern);
  expect(stderr).not.toMatch(/\n\s+at /);
}

/** Adds a dwell for a clip file beside the good one. */
function addClip(test: TestJson, id: string, file: string): void {
  test['clips'].push({ id, file, setup: 'tripod' });
  test['configurations'][0].dwells.push({ id: `d-${id}`, driveHz: 3.1, clip: id });
}

async function makeBadClips(): Promise<Record<string, RegExp>> {
  const source = join(folder, 'good.mp4');
  const bytes = await readFile(source);
  await writeFile(join(folder, 'empty.mp4'), '');
  await writeFile(join(folder, 'text.mp4'), 'this is a shopping list, not a video');
  await writeFile(join(folder, 'playlist.mp4'), `ffconcat version 1.0\nfile good.mp4\n`);
  await writeFile(
    join(folder, 'hls.mp4'),
    '#EXTM3U\n#EXT-X-TARGETDURATION:10\n#EXTINF:1,\ngood.mp4\n#EXT-X-ENDLIST\n',
  );
  execFileSync(ffmpeg.path, [
    '-v',
    'error',
    '-f',
    'lavfi',
    '-i',
    'sine=d=1',
    '-c:a',
    'aac',
    join(folder, 'audio.mp4'),
  ]);
  await copyFile(source, join(folder, 'truncated.mp4'));
  await truncate(join(folder, 'truncated.mp4'), Math.floor(bytes.length / 2));
  await writeFile(join(folder, 'headless.mp4'), bytes.subarray(2048));
  execFileSync(ffmpeg.path, [
    '-v',
    'error',
    '-i',
    source,
    '-frames:v',
    '1',
    '-c:v',
    'libx264',
    join(folder, 'single.mp4'),
  ]);
  return {
    missing: /missing\.mp4 does not exist/,
    empty: /empty/,
    text: /text\.mp4 is a text file, not a clip/,
    playlist: /playlist\.mp4 is a list of files, not a clip/,
    hls: /hls\.mp4 is a (list of files|playlist|text file), not a clip/,
    audio: /audio\.mp4: holds sound only, no video/,
    truncated: /periods of 3\.1 Hz: film at least/,
    headless: /headless\.mp4 is a file without the beginning of a video/,
    single: /fewer than two of the 1 frames/,
  };
}

describe('a clip that cannot be measured costs its own dwell only', () => {
  it('each is named in one sentence, the good dwell is measured, the exit status is 1', async () => {
    const expected = await makeBadClips();
    const { status, stdout, stderr } = await runOn((test) => {
      for (const id of Object.keys(expected)) addClip(test, id, `${id}.mp4`);
    });
    expect(status).toBe(1);
    expect(stderr).toBe('');
    const results = JSON.parse(stdout);
    const errors = Object.fromEntries(
      results.dwells.map((dwell: { clip: string; error: string | null }) => [dwell.clip, dwell.error]),
    );
    expect(errors['good']).toBeNull();
    for (const [id, pattern] of Object.entries(expected)) {
      expect(errors[id], id).toMatch(pattern);
      expect(errors[id].split('\n')).toHaveLength(1);
    }
    expect(stdout).not.toMatch(/NaN|Infinity/);
  });

  it('a clip corrupted in the middle is measured as far as it decodes, and the lost frames are counted', async () => {
    const bytes = await readFile(join(folder, 'good.mp4'));
    const from = Math.floor(bytes.length * 0.45);
    for (let k = from; k < from + 4000; k++) bytes[k] = (bytes[k]! * 37 + 11) & 255;
    await writeFile(join(folder, 'corrupt.mp4'), bytes);
    const { status, stdout } = await runOn((test) => {
      test['clips'][0].file = 'corrupt.mp4';
    });
    const { dwells, clips } = JSON.parse(stdout);
    expect([0, 1]).toContain(status);
    expect(clips[0].frames).toBeGreaterThan(20);
    const damage = [...clips[0].warnings, ...dwells[0].warnings].join(' ');
    expect(clips[0].frames < 60 ? /frames do not decode/.test(damage) : dwells[0].lostFrames > 0).toBe(true);
  });

  it.each([
    [
      'a marker outside the frame',
      (test: TestJson) => (test['setups'][0].markers[0].at = [5000, 10]),
      /marker "board" at \(5000, 10\) lies outside the frame of 320 x 180 px/,
    ],
    [
      'a scale length of 0',
      (test: TestJson) => (test['setups'][0].scale.length = 0),
      /setup "tripod": .*length is 0 mm/i,
    ],
    [
      'scale points alike',
      (test: TestJson) => (test['setups'][0].scale.to = test['setups'][0].scale.from),
      /setup "tripod": scale points are alike/i,
    ],
    ['no scale', (test: TestJson) => delete test['setups'][0].scale, /setup "tripod" has no scale/],
    [
      'an unknown setup',
      (test: TestJson) => (test['clips'][0].setup = 'nowhere'),
      /setup "nowhere", which is not in the test file/,
    ],
    [
      'an unknown clip',
      (test: TestJson) => (test['configurations'][0].dwells[0].clip = 'nix'),
      /no clip "nix"/,
    ],
    [
      'a drive frequency of 0',
      (test: TestJson) => (test['configurations'][0].dwells[0].driveHz = 0),
      /drive frequency must be above 0 Hz/i,
    ],
    [
      'a window outside the clip',
      (test: TestJson) => (test['configurations'][0].dwells[0].window = [50, 60]),
      /window/i,
    ],
    [
      'a capture rate below that of the file',
      (test: TestJson) => (test['clips'][0].captureFps = 10),
      /10 frames\/s/,
    ],
    [
      'a response marker on bare wall',
      (test: TestJson) => (test['setups'][0].markers[0].at = [12, 12]),
      /Nothing moves at 3\.1 Hz above the noise/,
    ],
  ])('%s', async (_name, change, pattern) => {
    const { status, stdout, stderr } = await runOn(change as (test: TestJson) => void);
    expect(status).toBe(1);
    expect(stderr).toBe('');
    const [dwell] = JSON.parse(stdout).dwells;
    expect(dwell.error).toMatch(pattern);
    expect(dwell.amplitude).toEqual({ value: null, u: null });
  });
});

describe('a call or a test file that is not usable ends with status 2 and one line', () => {
  it.each([
    [
      'a missing test file',
      ['measure', 'nowhere.dwellbook'],
      /nowhere\.dwellbook cannot be read: there is no such file/,
    ],
    ['a folder for a test file', ['measure', '.'], /is a folder/],
    ['an unknown option', ['measure', 'x.dwellbook', '--frobnicate'], /unknown option '--frobnicate'/],
    ['an unknown command', ['weigh'], /unknown command 'weigh'/],
    ['no test named', ['measure'], /missing required argument 'test'/],
    ['a missing clip for probe', ['probe', 'nowhere.mp4'], /nowhere\.mp4 does not exist/],
  ])('%s', async (_name, args, pattern) => {
    const { status, stdout, stderr } = await runCli(args);
    expect(status).toBe(2);
    expect(stdout).toBe('');
    expectOneLine(stderr, pattern);
  });

  it('a syntax error in the test file is told by line and column', async () => {
    const path = join(folder, 'broken.dwellbook');
    await writeFile(path, '{\n "format": "dwellbook-test",\n "version" 1}\n');
    const { status, stderr } = await runCli(['measure', path]);
    expect(status).toBe(2);
    expectOneLine(stderr, /broken\.dwellbook, line 3, column 12: a colon is expected/);
  });

  it('a wrong type is told by its path in the file and what was expected', async () => {
    const { status, stderr } = await runOn((test) => {
      test['setups'][0].markers[1].at = ['a', 2];
    });
    expect(status).toBe(2);
    expectOneLine(stderr, /setups\[0\]\.markers\[1\]\.at\[0\]: expected number, but found "a"/);
  });

  it('a folder that cannot be written to is told before any clip is read', async () => {
    const { status, stderr } = await runOn(
      () => undefined,
      ['measure', '--out', join(folder, 'good.mp4', 'out')],
    );
    expect(status).toBe(2);
    expectOneLine(stderr, /Nothing can be written under/);
  });

  it('an ffmpeg that is not there is told with what to install', async () => {
    const { status, stderr } = await runOn(() => undefined, ['measure'], {
      DWELLBOOK_FFMPEG: join(folder, 'no-ffmpeg'),
    });
    expect(status).toBe(2);
    expectOneLine(stderr, /DWELLBOOK_FFMPEG/);
  });
});

describe('trouble on the way', () => {
  it('an ffmpeg killed mid-way fails the dwell with a sentence, and nothing is left running', async () => {
    const dying = join(folder, 'dying-ffmpeg.sh');
    // the real one for everything but a whole pass of pictures, which ends in its middle
    await writeFile(
      dying,
      `#!/bin/sh\ncase "$*" in\n*-skip_frame*|*-version*) exec '${ffmpeg.path}' "$@" ;;\n*rawvideo*) '${ffmpeg.path}' "$@" | head -c 900000; kill -9 $$ ;;\n*) exec '${ffmpeg.path}' "$@" ;;\nesac\n`,
    );
    await chmod(dying, 0o755);
    const { status, stdout } = await runOn(() => undefined, ['measure', '--json'], {
      DWELLBOOK_FFMPEG: dying,
    });
    expect(status).toBe(1);
    expect(JSON.parse(stdout).dwells[0].error).toMatch(/ffmpeg/i);
  });

  it('measuring leaves the folder of the test as it was', async () => {
    const before = (await readdir(folder)).sort();
    await runCli(['measure', good.path]);
    expect((await readdir(folder)).sort()).toEqual(before);
  });
});
