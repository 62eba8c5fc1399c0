import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import {
  axisAngleRelU,
  axisFromMotion,
  axisFromPoints,
  compareAxes,
  signedAxisAngleDeg,
} from '../../src/scale/motion-axis.ts';
import type { PointTrack } from '../../src/scale/point-track.ts';
import { seededNormal } from '../plan/seeded-random.ts';

interface Scene {
  readonly angleDeg: number;
  readonly amplitude?: number;
  readonly frequencyHz?: number;
  readonly frameRateHz?: number;
  readonly frames?: number;
  readonly noise?: number;
  readonly seed?: number;
  /** Motion that is none of the part's, added to both coordinates. */
  readonly extra?: (t: number) => readonly [number, number];
}

function trackOf(scene: Scene): PointTrack {
  const { amplitude = 20, frequencyHz = 2.3, frameRateHz = 60, frames = 240, noise = 0 } = scene;
  const normal = seededNormal(scene.seed ?? 1);
  const angle = (scene.angleDeg * Math.PI) / 180;
  const timesS = Float64Array.from({ length: frames }, (_, i) => i / frameRateHz);
  const along = timesS.map((t) => amplitude * Math.cos(2 * Math.PI * frequencyHz * t + 0.4));
  const other = (k: 0 | 1): Float64Array =>
    timesS.map((t) => (scene.extra?.(t)[k] ?? 0) + (noise > 0 ? noise * normal() : 0));
  const [ex, ey] = [other(0), other(1)];
  return {
    timesS,
    x: along.map((s, i) => 300 + s * Math.cos(angle) + ex[i]!),
    y: along.map((s, i) => 200 + s * Math.sin(angle) + ey[i]!),
  };
}

/** Angle between two lines, degrees. */
function apart(a: number, b: number): number {
  const turn = (((a - b) % 180) + 180) % 180;
  return Math.min(turn, 180 - turn);
}

describe('motion axis found from the motion', () => {
  test('any direction comes back, with and without a known frequency, in the range of the sign rule', () => {
    fc.assert(
      fc.property(fc.double({ min: -180, max: 180, noNaN: true }), (angleDeg) => {
        for (const frequencyHz of [2.3, null]) {
          const axis = axisFromMotion(trackOf({ angleDeg }), frequencyHz);
          expect(apart(axis?.angleDeg ?? Number.NaN, angleDeg)).toBeLessThan(1e-6);
          expect(axis?.angleDeg).toBeGreaterThan(-67.5 - 1e-9);
          expect(axis?.angleDeg).toBeLessThanOrEqual(112.5 + 1e-9);
        }
      }),
      { seed: 2, numRuns: 60 },
    );
  });

  test.each([
    [0, 1, 0],
    [180, 1, 0],
    [90, 0, 1],
    [-90, 0, 1],
    [89, Math.cos((89 * Math.PI) / 180), Math.sin((89 * Math.PI) / 180)],
    [-88, -Math.cos((88 * Math.PI) / 180), Math.sin((88 * Math.PI) / 180)],
    [-45, Math.SQRT1_2, -Math.SQRT1_2],
    [135, Math.SQRT1_2, -Math.SQRT1_2],
  ])('motion at %d degrees is positive toward +x, or +y where it stands upright', (angleDeg, x, y) => {
    const axis = axisFromMotion(trackOf({ angleDeg }), 2.3);
    expect(axis?.directionX).toBeCloseTo(x, 9);
    expect(axis?.directionY).toBeCloseTo(y, 9);
  });

  test('drift and sway across the motion turn the plain scatter by degrees, the fit at the drive frequency by under half a degree', () => {
    const extra = (t: number): readonly [number, number] => [
      2 * t,
      6 * t * t + 8 * Math.sin(2 * Math.PI * 0.5 * t),
    ];
    const track = trackOf({ angleDeg: 10, extra });
    expect(apart(axisFromMotion(track, 2.3)?.angleDeg ?? Number.NaN, 10)).toBeLessThan(0.5);
    expect(apart(axisFromMotion(track, null)?.angleDeg ?? Number.NaN, 10)).toBeGreaterThan(2);
  });

  test('a frequency above half the frame rate serves as it is: 35 Hz at 60 frames/s', () => {
    const axis = axisFromMotion(trackOf({ angleDeg: 25, frequencyHz: 35 }), 35);
    expect(axis?.angleDeg).toBeCloseTo(25, 8);
  });

  test('gaps are left out, not filled', () => {
    const track = trackOf({ angleDeg: 33 });
    for (let i = 40; i < 90; i++) [track.x[i], track.y[i]] = [Number.NaN, Number.NaN];
    expect(axisFromMotion(track, 2.3)?.angleDeg).toBeCloseTo(33, 8);
  });

  test.each([
    ['at a known frequency', 2.3],
    ['from the scatter alone', null],
  ])(
    'the stated uncertainty of the angle is its spread in white noise %s (Monte Carlo, 300 runs, 12 %%)',
    (_, frequencyHz) => {
      let square = 0;
      let stated = 0;
      for (let seed = 1; seed <= 300; seed++) {
        const axis = axisFromMotion(trackOf({ angleDeg: 0, noise: 0.4, seed, amplitude: 8 }), frequencyHz);
        square += (axis?.angleDeg ?? Number.NaN) ** 2 / 300;
        stated += (axis?.uAngleDeg ?? Number.NaN) / 300;
      }
      expect(Math.sqrt(square) / stated).toBeGreaterThan(0.88);
      expect(Math.sqrt(square) / stated).toBeLessThan(1.12);
    },
  );

  test('an ellipse is told, a line with noise is not', () => {
    const ellipse = trackOf({
      angleDeg: 0,
      extra: (t) => [0, 4 * Math.sin(2 * Math.PI * 2.3 * t + 0.4)],
    });
    const axis = axisFromMotion(ellipse, 2.3);
    expect(axis?.ellipticity).toBeCloseTo(0.2, 6);
    expect(axis?.warning?.code).toBe('axis-not-straight');
    expect(axisFromMotion(trackOf({ angleDeg: 0, noise: 0.3 }), 2.3)?.warning).toBeNull();
  });

  test('too small a motion gives an axis that says it is uncertain', () => {
    const axis = axisFromMotion(trackOf({ angleDeg: 0, amplitude: 0.5, noise: 0.5 }), 2.3);
    expect(axis?.warning?.code).toBe('axis-uncertain');
  });

  test('no motion, or hardly a frame, gives no axis', () => {
    expect(axisFromMotion(trackOf({ angleDeg: 0, amplitude: 0 }), null)).toBeNull();
    expect(axisFromMotion(trackOf({ angleDeg: 0, amplitude: 0 }), 2.3)).toBeNull();
    expect(axisFromMotion(trackOf({ angleDeg: 0, frames: 7 }), 2.3)).toBeNull();
    expect(() => axisFromMotion(trackOf({ angleDeg: 0 }), 0)).toThrow(InputError);
    expect(() => axisFromMotion(trackOf({ angleDeg: 0 }), -2)).toThrow(InputError);
  });
});

describe('motion axis through two marked points', () => {
  test('the angle, and sqrt(2) u / length as its uncertainty', () => {
    const axis = axisFromPoints([100, 100], [400, 500], 0.5);
    expect(axis.angleDeg).toBeCloseTo(53.130102354, 8);
    expect(axis.uAngleDeg).toBeCloseTo(((Math.SQRT2 * 0.5) / 500) * (180 / Math.PI), 6);
    expect([axis.directionX, axis.directionY]).toEqual([expect.closeTo(0.6, 12), expect.closeTo(0.8, 12)]);
    expect(axis.origin).toBe('given');
  });

  test('either order of the points gives one sign', () => {
    const [a, b] = [axisFromPoints([0, 0], [9, 2], 0.5), axisFromPoints([9, 2], [0, 0], 0.5)];
    expect(a.directionX).toBeCloseTo(b.directionX, 12);
    expect(a.directionX).toBeGreaterThan(0);
  });

  test('points alike are refused, points close together give a caution', () => {
    expect(() => axisFromPoints([5, 5], [5, 5], 0.5)).toThrow(InputError);
    expect(axisFromPoints([0, 0], [10, 0], 0.5).warning?.code).toBe('axis-uncertain');
  });
});

describe('response axis against drive axis', () => {
  test('three degrees apart is told, also across the jump of the sign rule', () => {
    const at = (deg: number) => {
      const a = (deg * Math.PI) / 180;
      return axisFromPoints([0, 0], [2000 * Math.cos(a), 2000 * Math.sin(a)], 0.5);
    };
    expect(compareAxes(at(0), at(1)).warning).toBeNull();
    expect(compareAxes(at(0), at(3)).warning?.code).toBe('axis-disagrees');
    expect(compareAxes(at(112), at(-67)).differenceDeg).toBeCloseTo(1, 9);
  });
});

test('the sign rule is a true two-way one: half a turn changes nothing', () => {
  fc.assert(
    fc.property(fc.integer({ min: -3600, max: 3600 }), (tenths) => {
      const angle = tenths / 10;
      expect(signedAxisAngleDeg(angle + 180)).toBeCloseTo(signedAxisAngleDeg(angle), 9);
      expect(apart(signedAxisAngleDeg(angle), angle)).toBeLessThan(1e-9);
    }),
    { seed: 4, numRuns: 200 },
  );
});

test('an angle known to 1 degree leaves 0.026 % of the amplitude uncertain (sqrt(3)/2 u^2)', () => {
  const axis = axisFromPoints([0, 0], [1, 0], Math.tan(Math.PI / 180) / Math.SQRT2);
  expect(axisAngleRelU(axis)).toBeCloseTo((Math.sqrt(3) / 2) * (Math.PI / 180) ** 2, 12);
});
