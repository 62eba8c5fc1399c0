import { expect, it } from 'vitest';
import type { EngineCalls, FramePicture } from '../../../app/shared/engine.ts';
import { packFrame, unpackFrame } from '../../../app/shared/frame-bytes.ts';
import { type FrameSource, FrameStore } from '../../../app/shared/frame-store.ts';
import { CancelledError, InputError } from '../../../src/errors.ts';
import { FakeEngine } from '../fake-engine.ts';

type Run = EngineCalls['frames']['args'];

const CLIP: FrameSource = { path: '/a.mp4', frameCount: 600, widthPx: 1920 };
const jpegOf = (frame: number): Uint8Array => Uint8Array.from([frame & 255, frame >> 8]);

/** An engine that gives a run's frames only as far as it is let. */
function steppedEngine(): { engine: FakeEngine; runs: Run[]; give: (run: number, frames: number) => void } {
  const runs: Run[] = [];
  const outputs: { send: (picture: FramePicture) => void; at: number; end: number; done: () => void }[] = [];
  const engine = new FakeEngine({
    frames: (args, { signal, onProgress }) =>
      new Promise((resolve, reject) => {
        runs.push(args);
        signal?.addEventListener('abort', () => reject(new CancelledError()));
        outputs.push({
          send: (picture) => onProgress?.(picture),
          at: args.first,
          end: args.first + args.count,
          done: () => resolve(args.count),
        });
      }),
  });
  const give = (run: number, frames: number): void => {
    const output = outputs[run];
    if (!output) throw new Error(`run ${run} was not begun`);
    for (let k = 0; k < frames && output.at < output.end; k++, output.at++)
      output.send({ frame: output.at, jpeg: jpegOf(output.at) });
    if (output.at === output.end) output.done();
  };
  return { engine, runs, give };
}

it('stepping on finds its frames in the run that the first one began', async () => {
  const { engine, runs, give } = steppedEngine();
  const store = new FrameStore(engine);
  const first = store.get(CLIP, 100);
  give(0, 6);
  expect(await first).toEqual({ frame: 100, jpeg: jpegOf(100) });
  for (let frame = 101; frame < 106; frame++) expect((await store.get(CLIP, frame)).frame).toBe(frame);
  const waited = store.get(CLIP, 106); // on its way in the same run
  expect(runs).toEqual([{ path: '/a.mp4', first: 100, count: 20, widthPx: 1920, onlyKeyFrames: false }]);
  give(0, 1);
  expect((await waited).frame).toBe(106);
});

it('stepping back reads some frames before along', async () => {
  const { engine, runs } = steppedEngine();
  const store = new FrameStore(engine);
  store.get(CLIP, 100).catch(() => undefined);
  store.get(CLIP, 60).catch(() => undefined);
  expect(runs.at(-1)).toMatchObject({ first: 52, count: 9 });
});

it('a wish elsewhere ends the run, and who waited for it is told so', async () => {
  const { engine, give } = steppedEngine();
  const store = new FrameStore(engine);
  const overtaken = store.get(CLIP, 100);
  const wanted = store.get(CLIP, 400);
  await expect(overtaken).rejects.toThrow(CancelledError);
  give(1, 1);
  expect((await wanted).frame).toBe(400);
});

it('a frame beyond the end is refused', async () => {
  await expect(new FrameStore(new FakeEngine()).get(CLIP, 600)).rejects.toThrow(InputError);
});

it('a hand on its way is answered with the nearest picture at once, the key frames having been read first', async () => {
  const { engine, runs, give } = steppedEngine();
  const store = new FrameStore(engine);
  const small = { ...CLIP, widthPx: 640 };
  const first = store.near(small, 300);
  expect(runs[0]).toMatchObject({ first: 0, count: 600, onlyKeyFrames: true });
  give(0, 3); // frames 0 to 2 stand for the key frames here
  expect((await first).frame).toBe(0);
  expect((await store.near(small, 5)).frame).toBe(2);
  expect((await store.near(small, 599)).frame).toBe(2);
});

it('identity: a frame is unpacked as it was packed, from the middle of a larger buffer too', () => {
  const packed = packFrame(70_000, jpegOf(7));
  const inside = new Uint8Array(packed.length + 3);
  inside.set(packed, 3);
  expect(unpackFrame(inside.subarray(3))).toEqual({ frame: 70_000, jpeg: jpegOf(7) });
});
