import { describe, expect, test } from 'vitest';
import { interpolateAt } from '../../src/scale/interpolate-track.ts';
import type { PointTrack } from '../../src/scale/point-track.ts';

const TIMES = Float64Array.of(0, 0.033, 0.067, 0.1, 0.14, 0.166);
const cubic = (t: number): number => 3 - 20 * t + 400 * t * t - 900 * t ** 3;

function trackOf(x: (t: number) => number, lost: readonly number[] = []): PointTrack {
  const at = (f: (t: number) => number): Float64Array =>
    TIMES.map((t, i) => (lost.includes(i) ? Number.NaN : f(t)));
  return { timesS: TIMES, x: at(x), y: at((t) => 2 * t) };
}

describe('a marker at other times than its frames', () => {
  test('a cubic comes back exactly inside, a line everywhere, on uneven times', () => {
    const asked = TIMES.map((t) => t + 0.012);
    const { x, y } = interpolateAt(trackOf(cubic), asked);
    for (const i of [1, 2, 3]) expect(x[i]).toBeCloseTo(cubic(asked[i]!), 12);
    asked.forEach((t, i) => {
      expect(y[i]).toBeCloseTo(2 * t, 12);
    });
  });

  test('at the frames themselves nothing is touched', () => {
    const track = trackOf(cubic, [2]);
    expect(interpolateAt(track, TIMES).x).toEqual(track.x);
  });

  test('beside a lost frame it is linear, between lost neighbours a gap', () => {
    const asked = TIMES.map((t) => t + 0.01);
    const { x } = interpolateAt(trackOf(cubic, [3]), asked);
    const part = 0.01 / (TIMES[2]! - TIMES[1]!);
    expect(x[1]).toBeCloseTo((1 - part) * cubic(TIMES[1]!) + part * cubic(TIMES[2]!), 12);
    expect(x[2]).toBeNaN();
    expect(x[3]).toBeNaN();
  });

  test('more than a frame outside the track is not known', () => {
    expect(interpolateAt(trackOf(cubic), Float64Array.of(0.3)).x[0]).toBeNaN();
    expect(interpolateAt(trackOf(cubic), Float64Array.of(-0.2)).x[0]).toBeNaN();
  });
});
