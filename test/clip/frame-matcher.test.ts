import { describe, expect, test } from 'vitest';
import { doubtfulFrames } from '../../src/clip/doubtful-frames.ts';
import { FrameMatcher, type FrameTable } from '../../src/clip/frame-matcher.ts';

/** Frames every ten ticks, a key frame at each multiple of `group`. */
function table(frameCount: number, group: number, reorderDepth = 0): FrameTable {
  return {
    ...{ frameCount, reorderDepth },
    ticks: Float64Array.from({ length: frameCount }, (_, i) => 10 * i),
    keyFrames: Uint8Array.from({ length: frameCount }, (_, i) => (i % group === 0 ? 1 : 0)),
  };
}

test('frames that all come have their indices, and none is lost', () => {
  const matcher = new FrameMatcher(table(4, 2), 0, false);
  expect([0, 10, 20, 30].map((t) => matcher.match(t))).toEqual([0, 1, 2, 3]);
  matcher.finish(4);
  expect(matcher.lost).toEqual([]);
});

test('frames left out are lost, at the end too', () => {
  const matcher = new FrameMatcher(table(6, 6), 0, false);
  expect([0, 30].map((t) => matcher.match(t))).toEqual([0, 3]);
  matcher.finish(5);
  expect(matcher.lost).toEqual([1, 2, 4]);
});

test('frames before the range are passed over, not lost and not unlisted', () => {
  const matcher = new FrameMatcher(table(6, 6), 3, false);
  expect([0, 10, 20, 30, 40].map((t) => matcher.match(t))).toEqual([null, null, null, 3, 4]);
  expect([matcher.lost, matcher.unlisted]).toEqual([[], 0]);
});

test('timestamps the container does not list are counted and given no index', () => {
  const matcher = new FrameMatcher(table(3, 3), 0, false);
  expect([0, 5, 10, 20, 99].map((t) => matcher.match(t))).toEqual([0, null, 1, 2, null]);
  expect([matcher.lost, matcher.unlisted]).toEqual([[], 2]);
});

test('repeated timestamps that the muxer moved on tick by tick keep their order', () => {
  const repeated = { ...table(5, 5), ticks: Float64Array.of(0, 10, 10, 10, 20) };
  const matcher = new FrameMatcher(repeated, 0, false);
  expect([0, 10, 11, 12, 20].map((t) => matcher.match(t))).toEqual([0, 1, 2, 3, 4]);
  expect(matcher.lost).toEqual([]);
});

test('when only key frames are decoded, only key frames can be lost', () => {
  const matcher = new FrameMatcher(table(10, 3), 0, true);
  expect([0, 60].map((t) => matcher.match(t))).toEqual([0, 6]);
  matcher.finish(10);
  expect(matcher.lost).toEqual([3, 9]);
});

describe('doubt after damage', () => {
  test('lasts from the loss to the next key frame', () => {
    const clip = table(12, 4);
    const matcher = new FrameMatcher(clip, 0, false);
    const doubtful = [0, 10, 30, 40, 50].map((t) => [matcher.match(t), matcher.afterDamage]);
    expect(doubtful).toEqual([
      [0, false],
      [1, false],
      [3, true],
      [4, false],
      [5, false],
    ]);
    expect(doubtfulFrames(clip, [2])).toEqual([3]);
  });

  test('with B-frames begins earlier, and a key frame right behind the loss is not yet trusted', () => {
    expect(doubtfulFrames(table(20, 5, 2), [4])).toEqual([2, 3, 5, 6, 7, 8, 9]);
    expect(doubtfulFrames(table(20, 5, 2), [6, 8])).toEqual([5, 7, 9, 10, 11, 12, 13, 14]);
  });

  test('never reaches before a key frame', () => {
    expect(doubtfulFrames(table(20, 5, 3), [6])).toEqual([5, 7, 8, 9]);
  });

  test('a clip of key frames only has none', () => {
    expect(doubtfulFrames(table(10, 1), [3, 4])).toEqual([]);
  });
});
