import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import type { ClipContainer } from '../../src/clip/clip-info.ts';
import { ffmpegArguments } from '../../src/clip/ffmpeg-arguments.ts';
import { probeClip } from '../../src/clip/probe.ts';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';
import { InputError } from '../../src/errors.ts';
import { ffmpeg, H264, makeClip } from '../helpers/make-clip.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
let real: string;
beforeAll(() => {
  real = makeClip(folder, { name: 'real.mp4', frames: 5, encoder: H264 });
});

const disguises = [
  {
    kind: 'concat script',
    text: () => `ffconcat version 1.0\nfile '${real}'\n`,
    free: ['-f', 'concat', '-safe', '0'],
  },
  {
    kind: 'HLS playlist',
    text: () => `#EXTM3U\n#EXT-X-TARGETDURATION:1\n#EXTINF:1,\n${real}\n#EXT-X-ENDLIST\n`,
    free: ['-f', 'hls', '-allowed_extensions', 'ALL'],
  },
];

describe.each(disguises)('a $kind named .mp4', ({ kind, text, free }) => {
  const path = join(folder, `${kind}.mp4`);
  beforeAll(() => writeFileSync(path, text()));

  test('would lead ffmpeg to the real clip if it were let (else this test proves nothing)', async () => {
    const result = await runFfmpeg(ffmpeg.path, [
      '-nostdin',
      ...free,
      '-i',
      path,
      '-map',
      '0:v',
      '-f',
      'null',
      '-',
    ]);
    expect(result.reason).toBe('finished');
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
      expect(lines.join('\n')).not.toMatch(/real\.mp4/);
    },
  );
});
