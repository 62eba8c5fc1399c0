import { execFileSync } from 'node:child_process';
import { chmodSync, mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { containerOf, sniffContainer } from '../../src/clip/sniff-container.ts';
import { InputError } from '../../src/errors.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
const put = (name: string, content: string | Buffer): string => {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
};

describe('containers are known by their first bytes', () => {
  const transport = Buffer.alloc(188 * 5);
  for (let i = 0; i < 5; i++) transport[188 * i] = 0x47;
  test.each([
    ['ISO/IEC 14496-12 file type box', Buffer.from('\0\0\0\x18ftypisom\0\0\0\0', 'latin1'), 'mov'],
    [
      'QuickTime without a file type: wide, mdat',
      Buffer.from('\0\0\0\x08wide\0\0\0\x10mdat', 'latin1'),
      'mov',
    ],
    ['EBML (RFC 8794)', Buffer.from('1a45dfa39f4286810142f7', 'hex'), 'matroska'],
    ['RIFF AVI', Buffer.from('RIFF\x10\0\0\0AVI LIST', 'latin1'), 'avi'],
    ['MPEG-2 transport stream (ISO/IEC 13818-1): 0x47 every 188 bytes', transport, 'mpegts'],
    ['RIFF WAVE', Buffer.from('RIFF\x10\0\0\0WAVEfmt ', 'latin1'), null],
    ['a lone 0x47', Buffer.from('G'.padEnd(400, ' ')), null],
  ])('%s', (_what, start, container) => {
    expect(containerOf(start)).toBe(container);
  });
});

describe('what is not a clip is refused in one sentence that says what it is', () => {
  test.each([
    ['missing', () => join(folder, 'none.mp4'), 'does not exist'],
    ['inside a file as if that were a folder', () => join(put('plain.mp4', 'x'), 'a.mp4'), 'does not exist'],
    ['empty', () => put('empty.mp4', ''), 'is empty'],
    ['text', () => put('text.mp4', 'Dear lab,\nhere is the clip.\n'), 'is a text file'],
    ['an HLS playlist', () => put('list.mp4', '#EXTM3U\n#EXTINF:1,\nreal.mp4\n'), 'is a playlist'],
    [
      'a list of files',
      () => put('concat.mp4', "ffconcat version 1.0\nfile 'real.mp4'\n"),
      'is a list of files',
    ],
    ['a picture', () => put('photo.mp4', Buffer.from('ffd8ffe000104a464946', 'hex')), 'is a still picture'],
    ['sound', () => put('song.mp4', 'ID3\x04\0'), 'is a sound file'],
    ['zeros', () => put('zeros.mp4', Buffer.alloc(5000)), 'without the beginning of a video'],
    ['a session description', () => put('sdp.mp4', 'v=0\no=- 0 0 IN IP4 127.0.0.1\n'), 'is a text file'],
  ])('%s', async (_what, make, says) => {
    const path = make();
    await expect(sniffContainer(path)).rejects.toThrow(InputError);
    await expect(sniffContainer(path)).rejects.toThrow(says);
    await expect(sniffContainer(path)).rejects.toThrow(path);
  });

  test('a folder', async () => {
    const path = join(folder, 'folder.mp4');
    mkdirSync(path);
    await expect(sniffContainer(path)).rejects.toThrow(
      new InputError(`${path} is a folder; give a video file.`),
    );
  });

  test('a named pipe, without waiting for a writer', async () => {
    const path = join(folder, 'pipe.mp4');
    execFileSync('mkfifo', [path]);
    await expect(sniffContainer(path)).rejects.toThrow('is not a regular file');
  });

  test.skipIf(process.getuid?.() === 0)(
    'a file that may not be read (not as root, who may read all)',
    async () => {
      const path = put('locked.mp4', 'x');
      chmodSync(path, 0);
      await expect(sniffContainer(path)).rejects.toThrow('may not be read');
    },
  );
});
