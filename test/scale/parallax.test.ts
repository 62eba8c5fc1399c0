import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { outOfPlaneScaleError, parallaxFromDistances } from '../../src/scale/parallax.ts';

describe('parallax of a pinhole camera', () => {
  test('a marker 15 mm in front of a scale at 1 m measures 1.015228426 of its length (Z / (Z - d), pinhole geometry)', () => {
    const { factor, warning } = parallaxFromDistances({ cameraToScaleMm: 1000, cameraToMotionMm: 985 });
    expect(1 / factor).toBeCloseTo(1.015228426, 9);
    expect(warning).toBeNull();
  });

  test('projecting a rule and a moving part through a pinhole and correcting gives the true length', () => {
    const focalPx = 1400;
    const [zScale, zMotion, lengthMm] = [1560, 1500, 40];
    const mmPerPx = zScale / focalPx;
    const seenPx = (focalPx * lengthMm) / zMotion;
    const { factor } = parallaxFromDistances({ cameraToScaleMm: zScale, cameraToMotionMm: zMotion });
    expect(seenPx * mmPerPx * factor).toBeCloseTo(lengthMm, 10);
  });

  test('two readings good to 1 mm each: u = sqrt(1 + F^2) / Zs; the lens position nearly cancels', () => {
    const same = parallaxFromDistances({ cameraToScaleMm: 1000, cameraToMotionMm: 1000 });
    expect(same.factor).toBe(1);
    expect(same.u).toBeCloseTo(Math.SQRT2 / 1000, 12);
    const apart = parallaxFromDistances({ cameraToScaleMm: 1000, cameraToMotionMm: 900, distanceUMm: 0 });
    expect(apart.u).toBeCloseTo((5 * 0.1) / 1000, 12);
  });

  test('a rule far out of the plane of motion is told', () => {
    const { warning } = parallaxFromDistances({ cameraToScaleMm: 1000, cameraToMotionMm: 920 });
    expect(warning?.code).toBe('parallax-large');
    expect(warning?.sentence).toContain('8.0 %');
  });

  test('out-of-plane motion changes the scale by shift over distance (Sutton et al. 2008, from memory)', () => {
    const seen = 1000 / (1000 - 2) - 1;
    expect(outOfPlaneScaleError(2, 1000) / seen).toBeCloseTo(1, 2);
  });

  test.each([
    [{ cameraToScaleMm: 0, cameraToMotionMm: 900 }, /cameraToScale is 0/],
    [{ cameraToScaleMm: 900, cameraToMotionMm: -1 }, /cameraToMotion is -1/],
    [{ cameraToScaleMm: 900, cameraToMotionMm: 900, distanceUMm: -1 }, /uncertainty/],
  ] as const)('%o is refused', (distances, message) => {
    expect(() => parallaxFromDistances(distances)).toThrow(InputError);
    expect(() => parallaxFromDistances(distances)).toThrow(message);
  });
});
