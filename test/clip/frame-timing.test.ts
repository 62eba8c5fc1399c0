import { describe, expect, test } from 'vitest';
import { frameTiming } from '../../src/clip/frame-timing.ts';

/** Ticks of a camera clock: frame k at k/fps, rounded to ticks, some frames left out. */
function clock(
  fps: number,
  ticksPerS: number,
  frames: number,
  dropped: readonly number[] = [],
): Float64Array {
  const kept = Array.from({ length: frames }, (_, k) => k).filter((k) => !dropped.includes(k));
  return Float64Array.from(kept, (k) => Math.round((k * ticksPerS) / fps));
}

describe('an even clock, rounded to ticks', () => {
  test.each([
    [30, 15_360],
    [30_000 / 1001, 600],
    [60_000 / 1001, 90_000],
    [25, 1000],
    [240, 1000],
    [239.76, 600],
  ])(
    '%f frames/s in ticks of 1/%i s: the lattice has the rate, the jitter is the rounding',
    (fps, ticksPerS) => {
      const timing = frameTiming(clock(fps, ticksPerS, 2000), [1, ticksPerS]);
      const tickS = 1 / ticksPerS;
      // Rounding moves each time by at most half a tick; over 2000 frames the slope hardly notices.
      expect(Math.abs(1 / timing.regularity.latticeFps! - 1 / fps)).toBeLessThan(tickS / 1000);
      // Standard deviation of rounding: a tick over the square root of 12 at most (half a tick for two-valued residue).
      expect(timing.regularity.jitterRmsS).toBeLessThan(tickS / 2);
      expect(timing).toMatchObject({ gaps: [], duplicates: [], regularity: { variable: false } });
      expect(Math.abs(timing.medianIntervalS! - 1 / fps)).toBeLessThanOrEqual(tickS);
    },
  );

  test('rounding error of an incommensurate rate has the variance tick^2/12 (uniform distribution)', () => {
    const timing = frameTiming(clock(29.9731, 600, 5000), [1, 600]);
    expect(timing.regularity.jitterRmsS! * 600).toBeCloseTo(1 / Math.sqrt(12), 2);
  });
});

test('dropped frames are found where they are, and do not disturb the rate', () => {
  const timing = frameTiming(clock(60, 90_000, 600, [100, 300, 301, 302]), [1, 90_000]);
  expect(timing.gaps).toEqual([
    { afterFrame: 99, intervalS: 2 / 60, missingFrames: 1 },
    { afterFrame: 298, intervalS: 4 / 60, missingFrames: 3 },
  ]);
  expect(timing.regularity.latticeFps).toBeCloseTo(60, 9);
  expect(timing.regularity.variable).toBe(false);
});

test('a large start offset changes nothing (identity: shift of time)', () => {
  const ticks = clock(59.9, 90_000, 300, [7]);
  expect(
    frameTiming(
      ticks.map((t) => t + 2 ** 33),
      [1, 90_000],
    ),
  ).toEqual(frameTiming(ticks, [1, 90_000]));
});

test('repeated timestamps are listed', () => {
  const ticks = Float64Array.of(0, 512, 512, 1024, 1536, 1536, 1536, 2048);
  const timing = frameTiming(ticks, [1, 15_360]);
  expect(timing.duplicates).toEqual([2, 5, 6]);
  expect(timing.regularity.shortestIntervalS).toBe(0);
  expect(timing.medianIntervalS).toBe(512 / 15_360);
});

test('an uneven clock is called variable: intervals in turn 30 and 40 ms', () => {
  const ticks = Float64Array.from({ length: 100 }, (_, i) => 35 * i + (i % 2) * 5);
  const timing = frameTiming(ticks, [1, 1000]);
  expect(timing.regularity.variable).toBe(true);
  expect(timing.regularity.shortestIntervalS).toBe(0.03);
  expect(timing.regularity.longestIntervalS).toBe(0.04);
  // Alternating +2.5 and -2.5 ms about the lattice.
  expect(timing.regularity.jitterRmsS).toBeCloseTo(0.0025, 5);
});

test('what one or two frames cannot tell is null', () => {
  const nothing = { shortestIntervalS: null, longestIntervalS: null, jitterRmsS: null, latticeFps: null };
  expect(frameTiming(Float64Array.of(0), [1, 90])).toMatchObject({
    medianIntervalS: null,
    regularity: nothing,
  });
  expect(frameTiming(Float64Array.of(0, 3), [1, 90])).toMatchObject({
    medianIntervalS: 3 / 90,
    regularity: { latticeFps: 30, jitterRmsS: null },
  });
  expect(frameTiming(Float64Array.of(0, 0), [1, 90])).toMatchObject({
    medianIntervalS: null,
    duplicates: [1],
  });
});
