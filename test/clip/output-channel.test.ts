import { spawn } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, expect, test } from 'vitest';
import { openOutputChannel } from '../../src/clip/output-channel.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { ffmpeg } from '../helpers/make-clip.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const usualFolder = process.env['TMPDIR'];
afterEach(() => {
  if (usualFolder === undefined) delete process.env['TMPDIR'];
  else process.env['TMPDIR'] = usualFolder;
});

/** Puts temporary files of the code under test in a folder of its own. */
function ownTempFolder(name: string): string {
  const own = join(folder, name);
  mkdirSync(own, { recursive: true });
  process.env['TMPDIR'] = own;
  return own;
}

test('all bytes come through in order, in one buffer, and nothing is left in the temporary folder', async () => {
  const own = ownTempFolder('own');
  const sent = randomBytes(3_000_001);
  const file = join(folder, 'sent');
  writeFileSync(file, sent);
  const pieces: Buffer[] = [];
  const buffers = new Set<ArrayBufferLike>();
  const channel = await openOutputChannel((piece) => {
    pieces.push(Buffer.from(piece));
    buffers.add(piece.buffer);
  });
  expect(readdirSync(own)).toEqual([]);
  if (channel === null) throw new Error('This system is expected to have local sockets.');
  spawn('cat', [file], { stdio: ['ignore', channel.childEnd, 'inherit'] });
  channel.handedOver();
  await channel.ended;
  expect(Buffer.concat(pieces).equals(sent)).toBe(true);
  expect(buffers.size).toBe(1);
});

test('where the address would be too long, there is none, and the ordinary output serves', async () => {
  ownTempFolder('a-very-long-name/'.repeat(12));
  expect(await openOutputChannel(() => {})).toBeNull();
  let text = '';
  const result = await runFfmpeg(ffmpeg.path, ['-version'], {
    bulk: true,
    onOutput: (piece) => {
      text += Buffer.from(piece).toString();
    },
  });
  expect(result.reason).toBe('finished');
  expect(text).toContain('ffmpeg version');
});

test('a program that does not start leaves nothing waiting', async () => {
  const result = await runFfmpeg('/no/such/ffmpeg', [], { bulk: true, onOutput: () => {} });
  expect(result.reason).toBe('not-started');
});
