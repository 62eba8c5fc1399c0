import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import {
  localMmPerPx,
  localScaleRelU,
  type PlanePoint,
  planeMapping,
  planePointMm,
  trackToPlane,
} from '../../src/scale/perspective.ts';
import type { PointPx } from '../../src/scale/point-track.ts';
import { seededNormal } from '../plan/seeded-random.ts';

/** A pinhole camera: where the plane point (X, Y) mm is seen when the plane is turned about its vertical and horizontal axes. */
function seenThroughPinhole(yawDeg: number, pitchDeg: number): (mm: PointPx) => PointPx {
  const [focalPx, distanceMm] = [1500, 1200];
  const [yaw, pitch] = [(yawDeg * Math.PI) / 180, (pitchDeg * Math.PI) / 180];
  return ([X, Y]) => {
    const x = X * Math.cos(yaw);
    const depth = X * Math.sin(yaw);
    const y = Y * Math.cos(pitch) - depth * Math.sin(pitch);
    const z = distanceMm + Y * Math.sin(pitch) + depth * Math.cos(pitch);
    return [960 + (focalPx * x) / z, 540 + (focalPx * y) / z];
  };
}

const CORNERS: readonly PointPx[] = [
  [-220, -100],
  [230, -110],
  [210, 120],
  [-200, 130],
];
const MORE: readonly PointPx[] = [...CORNERS, [10, -60], [-90, 40], [120, 30]];

function marked(points: readonly PointPx[], seen: (mm: PointPx) => PointPx): PlanePoint[] {
  return points.map((mm) => ({ at: seen(mm), mm }));
}

describe('plane seen by a pinhole camera', () => {
  test('round trip: four points give back the true place of any other point of the plane', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -50, max: 50, noNaN: true }),
        fc.double({ min: -40, max: 40, noNaN: true }),
        fc.double({ min: -200, max: 200, noNaN: true }),
        fc.double({ min: -100, max: 100, noNaN: true }),
        (yaw, pitch, X, Y) => {
          const seen = seenThroughPinhole(yaw, pitch);
          const [x, y] = planePointMm(planeMapping(marked(CORNERS, seen)), seen([X, Y]));
          expect(x).toBeCloseTo(X, 7);
          expect(y).toBeCloseTo(Y, 7);
        },
      ),
      { seed: 5, numRuns: 80 },
    );
  });

  test('a mirrored plane (mm counted upward, as rules are) works alike', () => {
    const seen = seenThroughPinhole(25, 0);
    const upward = CORNERS.map(([X, Y]): PlanePoint => ({ at: seen([X, Y]), mm: [X, -Y] }));
    const [x, y] = planePointMm(planeMapping(upward), seen([50, 70]));
    expect(x).toBeCloseTo(50, 8);
    expect(y).toBeCloseTo(-70, 8);
  });

  test('local scale is the true millimetres of a small motion over the pixels it covers', () => {
    const seen = seenThroughPinhole(40, 15);
    const mapping = planeMapping(marked(MORE, seen));
    const direction: PointPx = [0.6, 0.8];
    const [a, b] = [seen([50, -20]), seen([50 + 1e-4 * 0.6, -20 + 1e-4 * 0.8])];
    const expected = 1e-4 / Math.hypot(b[0] - a[0], b[1] - a[1]);
    expect(localMmPerPx(mapping, a, direction) / expected).toBeCloseTo(1, 6);
  });

  test('a square view agrees with a uniform scale everywhere', () => {
    const mapping = planeMapping(marked(CORNERS, seenThroughPinhole(0, 0)));
    for (const at of [
      [300, 300],
      [960, 540],
      [1500, 800],
    ] as const) {
      expect(localMmPerPx(mapping, at, [1, 0])).toBeCloseTo(0.8, 10);
      expect(localMmPerPx(mapping, at, [0, 1])).toBeCloseTo(0.8, 10);
    }
  });

  test('the uncertainty of the local scale is its spread when clicks scatter by 0.5 px (Monte Carlo, 300 runs, 15 %)', () => {
    const normal = seededNormal(21);
    const seen = seenThroughPinhole(35, 10);
    const at = seen([40, 10]);
    const scales = Array.from({ length: 300 }, () => {
      const points = marked(MORE, seen).map((p) => ({
        ...p,
        at: [p.at[0] + 0.5 * normal(), p.at[1] + 0.5 * normal()] as PointPx,
      }));
      return localMmPerPx(planeMapping(points), at, [1, 0]);
    });
    const mean = scales.reduce((a, b) => a + b, 0) / scales.length;
    const sd = Math.sqrt(scales.reduce((a, b) => a + (b - mean) ** 2, 0) / (scales.length - 1));
    const stated = localScaleRelU(planeMapping(marked(MORE, seen), 0.5), at, [1, 0]);
    expect(sd / mean / stated).toBeGreaterThan(0.85);
    expect(sd / mean / stated).toBeLessThan(1.15);
  });

  test('with more than four points a wrong one is named, and counted in the uncertainty', () => {
    const points = marked(MORE, seenThroughPinhole(30, 5));
    const good = planeMapping(points);
    expect(good.residual.rmsPx).toBeLessThan(1e-6);
    expect(good.warning).toBeNull();
    const wrong = points.map((p, k) => (k === 5 ? { ...p, mm: [p.mm[0] + 10, p.mm[1]] as const } : p));
    const mapping = planeMapping(wrong);
    expect(mapping.warning?.code).toBe('plane-residual');
    expect(mapping.warning?.sentence).toContain('point 6');
    expect(mapping.pointUPx).toBeGreaterThan(1);
  });

  test('four points alone cannot be checked, and say so', () => {
    expect(planeMapping(marked(CORNERS, seenThroughPinhole(30, 5))).residual).toEqual({
      rmsPx: null,
      worstPoint: null,
    });
  });

  test('a track keeps its times and gaps', () => {
    const seen = seenThroughPinhole(20, 0);
    const [x, y] = seen([12, -7]);
    const track = {
      timesS: Float64Array.of(0, 0.1, 0.2),
      x: Float64Array.of(x, Number.NaN, x),
      y: Float64Array.of(y, Number.NaN, y),
    };
    const mm = trackToPlane(track, planeMapping(marked(CORNERS, seen)));
    expect(mm.timesS).toBe(track.timesS);
    expect(mm.x[0]).toBeCloseTo(12, 9);
    expect(mm.y[2]).toBeCloseTo(-7, 9);
    expect(mm.x[1]).toBeNaN();
  });
});

describe('plane points that cannot be used', () => {
  const seen = seenThroughPinhole(20, 0);
  const line: PointPx[] = [
    [0, 0],
    [10, 10],
    [20, 20],
    [30, 30],
    [50, 50],
  ];
  const swapped = marked(CORNERS, seen).map((p, k, all) =>
    k === 0 ? { ...p, mm: all[1]!.mm } : k === 1 ? { ...p, mm: all[0]!.mm } : p,
  );
  test.each([
    ['three points', marked(CORNERS.slice(0, 3), seen), /has 3 points/],
    ['all in line', marked(line, seen), /in line/],
    [
      'three of four in line',
      marked(
        [
          [0, 0],
          [50, 0],
          [100, 0],
          [0, 80],
        ],
        seen,
      ),
      /in line/,
    ],
    [
      'a point twice',
      marked(
        [
          [0, 0],
          [100, 0],
          [0, 80],
          [0, 80],
        ],
        seen,
      ),
      /repeat/,
    ],
    ['two swapped', swapped, /swapped/],
    [
      'a number missing',
      [...marked(CORNERS, seen), { at: [1, Number.NaN], mm: [0, 0] } as PlanePoint],
      /complete/,
    ],
  ] as const)('%s', (_, points, message) => {
    expect(() => planeMapping(points)).toThrow(InputError);
    expect(() => planeMapping(points)).toThrow(message);
  });
});
