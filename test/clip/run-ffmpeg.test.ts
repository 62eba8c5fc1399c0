import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { cutRealFfmpegAfter, fakeFfmpeg } from '../helpers/fake-ffmpeg.ts';
import { ffmpeg } from '../helpers/make-clip.ts';

describe('one result shape for every end', () => {
  test('a good end', async () => {
    const pieces: Uint8Array[] = [];
    const result = await runFfmpeg(ffmpeg.path, ['-version'], {
      onOutput: (piece) => pieces.push(piece.slice()),
    });
    expect(result).toMatchObject({ reason: 'finished', exitCode: 0, signal: null });
    expect(Buffer.concat(pieces).toString()).toContain('ffmpeg version');
  });

  test('an exit status, with the last words', async () => {
    const result = await runFfmpeg(fakeFfmpeg('exits-1'), []);
    expect(result).toMatchObject({ reason: 'failed', exitCode: 1, signal: null });
    expect(result.lastLines).toEqual(['[info] first words', '[error] clip.mp4: nothing good in here']);
  });

  test('a program that does not exist', async () => {
    const result = await runFfmpeg('/no/such/ffmpeg', []);
    expect(result).toMatchObject({ reason: 'not-started', exitCode: null, signal: null });
    expect(result.lastLines[0]).toContain('ENOENT');
  });

  test('killed by somebody else', async () => {
    cutRealFfmpegAfter(10);
    const result = await runFfmpeg(fakeFfmpeg('killed-mid-way'), ['-version']);
    expect(result).toMatchObject({ reason: 'killed', exitCode: null, signal: 'SIGKILL' });
  });

  test('cancelled before it began: nothing is started', async () => {
    const result = await runFfmpeg('/no/such/ffmpeg', [], { signal: AbortSignal.abort() });
    expect(result).toMatchObject({ reason: 'cancelled', exitCode: null, lastLines: [] });
  });

  test('cancelled on the way', async () => {
    const controller = new AbortController();
    const run = runFfmpeg(fakeFfmpeg('stalls'), [], { signal: controller.signal });
    setImmediate(() => controller.abort());
    expect(await run).toMatchObject({ reason: 'cancelled', exitCode: null, signal: 'SIGTERM' });
  });

  test('one that refuses to stop is ended by force', async () => {
    const controller = new AbortController();
    const result = await runFfmpeg(fakeFfmpeg('refuses-to-stop'), [], {
      signal: controller.signal,
      onOutput: () => controller.abort(),
    });
    expect(result).toMatchObject({ reason: 'cancelled', exitCode: null, signal: 'SIGKILL' });
  });

  test('silent for too long', async () => {
    const result = await runFfmpeg(fakeFfmpeg('stalls'), [], { stallS: 0.2 });
    expect(result).toMatchObject({ reason: 'stalled', signal: 'SIGTERM' });
    expect(result.durationS).toBeGreaterThanOrEqual(0.2);
  });

  test('the first reason counts: a cancel while it is being stopped changes nothing', async () => {
    const controller = new AbortController();
    const result = await runFfmpeg(fakeFfmpeg('asks-back'), [], {
      signal: controller.signal,
      onOutput: () => false,
      onLine: () => controller.abort(),
    });
    expect(controller.signal.aborted).toBe(true);
    expect(result).toMatchObject({ reason: 'stopped', signal: 'SIGKILL', lastLines: ['asked to stop'] });
  });
});

describe('the receiver of the output', () => {
  test('stops the run by saying that it has enough', async () => {
    const result = await runFfmpeg(fakeFfmpeg('refuses-to-stop'), [], { onOutput: () => false });
    expect(result.reason).toBe('stopped');
  });

  test('its error comes out once the process has ended', async () => {
    const run = runFfmpeg(fakeFfmpeg('refuses-to-stop'), [], {
      onOutput: () => {
        throw new RangeError('from the receiver');
      },
    });
    await expect(run).rejects.toThrow(new RangeError('from the receiver'));
  });
});

test('a flood on standard error neither blocks the run nor fills the memory', async () => {
  let lines = 0;
  const result = await runFfmpeg(fakeFfmpeg('floods-stderr'), [], { onLine: () => lines++ });
  expect(result.reason).toBe('finished');
  expect(lines).toBe(100_000);
  expect(result.lastLines).toHaveLength(20);
  expect(Math.max(...result.lastLines.map((line) => line.length))).toBeLessThanOrEqual(2000);
});

test('no process outlives this program', () => {
  const script = fileURLToPath(new URL('../helpers/leave-while-running.ts', import.meta.url));
  const left = spawnSync(process.execPath, ['--import', 'tsx', script, fakeFfmpeg('refuses-to-stop')]);
  const pid = Number(left.stdout.toString());
  expect(pid).toBeGreaterThan(1);
  expect(isAlive(pid)).toBe(false);
});

/** A process that was just killed may still be entered in the table until the system has cleared it away. */
function isAlive(pid: number): boolean {
  const state = spawnSync('ps', ['-o', 'stat=', '-p', String(pid)])
    .stdout.toString()
    .trim();
  return state !== '' && !state.startsWith('Z');
}
