import { join } from 'node:path';
import { expect, it } from 'vitest';
import { CancelledError } from '../../src/errors.ts';
import { setupPictures } from '../../src/report/frame-pictures.ts';
import { testSchema } from '../../src/testfile/schema.ts';
import { HEIGHT, makeClip, WIDTH } from '../helpers/make-clip.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();
makeClip(folder, { name: 'there.mp4', frames: 6, encoder: ['-c:v', 'mpeg4', '-q:v', '3'] });
const testPath = join(folder, 'test.dwellbook');
const marker = { id: 'm', role: 'response', at: [5, 5] };
const test = testSchema.parse({
  format: 'dwellbook-test',
  version: 1,
  setups: [
    { id: 'good', markers: [{ ...marker, clip: 'late', frame: 4 }] },
    { id: 'gone', markers: [marker] },
    { id: 'bare', markers: [] },
  ],
  clips: [
    { id: 'first', file: 'nowhere.mp4', setup: 'gone' },
    { id: 'late', file: 'there.mp4', setup: 'good' },
  ],
});

it('shows the frame in which the response marker was marked; a clip that is gone costs its own picture only', async () => {
  const [good, gone, bare] = await setupPictures(test, testPath);
  expect(good).toMatchObject({
    setup: 'good',
    clip: 'late',
    frame: 4,
    displayedWidth: WIDTH,
    displayedHeight: HEIGHT,
  });
  const jpeg = good && 'jpeg' in good ? good.jpeg : new Uint8Array();
  expect([...jpeg.slice(0, 2)]).toEqual([0xff, 0xd8]); // start of image, ITU-T T.81
  expect(gone).toMatchObject({
    reason: expect.stringMatching(/no picture of camera setup gone: .*nowhere\.mp4/),
  });
  expect(bare).toMatchObject({ reason: expect.stringContaining('has no clip') });
});

it('stops when cancelled', async () => {
  await expect(setupPictures(test, testPath, AbortSignal.abort())).rejects.toThrow(CancelledError);
});
