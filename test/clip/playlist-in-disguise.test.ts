import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipContainer } from '../../src/clip/clip-info.ts';
import { ffmpegArguments } from '../../src/clip/ffmpeg-arguments.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { InputError } from '../../src/errors.ts';
import { ffmpeg, H264, makeClip, runToMake } from '../helpers/make-clip.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
let real: string;
beforeAll(() => {
  real = makeClip(folder, { name: 'real.mp4', frames: 5, encoder: H264 });
  runToMake(['-i', real, '-c', 'copy', join(folder, 'real.ts')]);
});

// Each of these makes ffmpeg open the real clip when it may choose the demuxer itself.
const disguises = {
  'concat script': () => `ffconcat version 1.0\nfile '${real}'\n`,
  'HLS playlist': () =>
    `#EXTM3U\n#EXT-X-TARGETDURATION:1\n#EXTINF:1,\n${join(folder, 'real.ts')}\n#EXT-X-ENDLIST\n`,
};

describe.each(Object.entries(disguises))('a %s named .mp4', (kind, text) => {
  const path = join(folder, `${kind}.mp4`);
  beforeAll(() => writeFileSync(path, text()));

  test('would lead ffmpeg to the real clip if it were let (else this test proves nothing)', async () => {
    const free = [
      '-nostdin',
      '-safe',
      '0',
      '-allowed_extensions',
      'ALL',
      '-i',
      path,
      '-map',
      '0:v',
      '-f',
      'null',
      '-',
    ];
    const tries = [
      free.filter((a) => !['-allowed_extensions', 'ALL'].includes(a)),
      free.filter((a) => !['-safe', '0'].includes(a)),
    ];
    const results = await Promise.all(tries.map((args) => runFfmpeg(ffmpeg.path, args)));
    expect(results.map((result) => result.reason)).toContain('finished');
  });

  test('is refused', async () => {
    await expect(probeClip(path, { ffmpeg })).rejects.toThrow(InputError);
    await expect(probeClip(path, { ffmpeg })).rejects.toThrow('not a clip');
  });

  test.each<ClipContainer>(['mov', 'matroska', 'avi', 'mpegts'])(
    'even past the first look, as %s, opens nothing and gives nothing',
    async (container) => {
      const lines: string[] = [];
      let bytes = 0;
      const outputOptions = ['-c', 'copy', '-f', 'framecrc'];
      const args = ffmpegArguments({ path, container, outputOptions, logLevel: 'info' });
      const result = await runFfmpeg(ffmpeg.path, args, {
        onLine: (line) => lines.push(line),
        onOutput: (piece) => {
          bytes += piece.length;
        },
      });
      expect(result.reason).toBe('failed');
      expect(bytes).toBe(0);
      expect(lines.join('\n')).not.toMatch(/real\.(mp4|ts)/);
    },
  );
});
