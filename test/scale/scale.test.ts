import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import {
  DEFAULT_CLICK_U_PX,
  defaultLengthUMm,
  scaleFromPoints,
  scaleInMotionPlane,
} from '../../src/scale/scale.ts';
import { seededNormal } from '../plan/seeded-random.ts';

describe('scale from two points', () => {
  test('a 300 mm rule over 829.402 px: s = L / d, and (u_s/s)^2 = (u_L/L)^2 + 2 (u_px/d)^2 (closed form)', () => {
    const scale = scaleFromPoints({
      fromPx: [212.4, 633],
      toPx: [1041.8, 631.2],
      lengthMm: 300,
      lengthUMm: 0.2,
      clickUPx: 0.5,
    });
    const d = Math.hypot(829.4, 1.8);
    expect(scale.mmPerPx).toBeCloseTo(300 / d, 12);
    expect(scale.uMmPerPx / scale.mmPerPx).toBeCloseTo(Math.sqrt((0.2 / 300) ** 2 + 2 * (0.5 / d) ** 2), 12);
    expect(scale.warning).toBeNull();
  });

  test('the stated uncertainty is the spread of the scale when clicks and length scatter (Monte Carlo, 4000 runs, 5 %)', () => {
    const normal = seededNormal(7);
    const point = (x: number, y: number): [number, number] => [x + 0.5 * normal(), y + 0.5 * normal()];
    const scales = Array.from(
      { length: 4000 },
      () =>
        scaleFromPoints({
          fromPx: point(100, 100),
          toPx: point(420, 340),
          lengthMm: 200 + 0.3 * normal(),
          lengthUMm: 0,
          clickUPx: 0,
        }).mmPerPx,
    );
    const mean = scales.reduce((a, b) => a + b, 0) / scales.length;
    const sd = Math.sqrt(scales.reduce((a, b) => a + (b - mean) ** 2, 0) / (scales.length - 1));
    const { uMmPerPx } = scaleFromPoints({
      fromPx: [100, 100],
      toPx: [420, 340],
      lengthMm: 200,
      lengthUMm: 0.3,
    });
    expect(DEFAULT_CLICK_U_PX).toBe(0.5);
    expect(sd / uMmPerPx).toBeGreaterThan(0.95);
    expect(sd / uMmPerPx).toBeLessThan(1.05);
  });

  test('identity: turning, moving or swapping the points changes nothing; a longer rule scales', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 6.28, noNaN: true }),
        fc.double({ min: -500, max: 500, noNaN: true }),
        fc.double({ min: 10, max: 2000, noNaN: true }),
        (turn, shift, lengthMm) => {
          const from = [shift, -shift] as const;
          const to = [shift + 640 * Math.cos(turn), -shift + 640 * Math.sin(turn)] as const;
          const one = scaleFromPoints({ fromPx: from, toPx: to, lengthMm });
          const swapped = scaleFromPoints({ fromPx: to, toPx: from, lengthMm: 2 * lengthMm });
          expect(one.mmPerPx / (lengthMm / 640)).toBeCloseTo(1, 10);
          expect(swapped.mmPerPx / one.mmPerPx).toBeCloseTo(2, 10);
        },
      ),
      { seed: 3, numRuns: 60 },
    );
  });

  test('an unstated length is taken as good to 0.05 %, at least 0.1 mm', () => {
    expect(defaultLengthUMm(50)).toBe(0.1);
    expect(defaultLengthUMm(1000)).toBe(0.5);
    expect(scaleFromPoints({ fromPx: [0, 0], toPx: [500, 0], lengthMm: 50 }).relULength).toBeCloseTo(
      0.002,
      12,
    );
  });

  test('scale points close together are measured, with a caution', () => {
    const scale = scaleFromPoints({ fromPx: [10, 10], toPx: [60, 10], lengthMm: 20 });
    expect(scale.mmPerPx).toBeCloseTo(0.4, 12);
    expect(scale.warning?.code).toBe('scale-short');
    expect(scale.warning?.sentence).toContain('50 px');
  });

  test('carried to the motion plane, the relative uncertainties stay', () => {
    const scale = scaleFromPoints({ fromPx: [0, 0], toPx: [1000, 0], lengthMm: 300 });
    const nearer = scaleInMotionPlane(scale, 0.96);
    expect(nearer.mmPerPx).toBeCloseTo(0.288, 12);
    expect(nearer.uMmPerPx / nearer.mmPerPx).toBeCloseTo(scale.uMmPerPx / scale.mmPerPx, 12);
  });

  test.each([
    ['length 0', { fromPx: [0, 0], toPx: [9, 9], lengthMm: 0 }, /length is 0 mm/],
    ['length negative', { fromPx: [0, 0], toPx: [9, 9], lengthMm: -3 }, /above 0/],
    ['length not a number', { fromPx: [0, 0], toPx: [9, 9], lengthMm: Number.NaN }, /above 0/],
    ['points alike', { fromPx: [5, 5], toPx: [5, 5], lengthMm: 10 }, /alike/],
    ['a coordinate missing', { fromPx: [5, Number.NaN], toPx: [5, 5], lengthMm: 10 }, /two numbers/],
    ['negative click', { fromPx: [0, 0], toPx: [9, 9], lengthMm: 3, clickUPx: -1 }, /clickU/],
  ] as const)("%s is the user's to correct", (_, points, message) => {
    expect(() => scaleFromPoints(points)).toThrow(InputError);
    expect(() => scaleFromPoints(points)).toThrow(message);
  });
});
