import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { tiltCorrection, tiltLoss, unknownTiltRelU } from '../../src/scale/tilt.ts';
import { seededNormal } from '../plan/seeded-random.ts';

describe('tilt of the motion against the measuring direction', () => {
  test.each([
    [1, 0.0152305],
    [2, 0.0609173],
    [5, 0.3805302],
    [10, 1.5192247],
  ])('%d degrees lose %d %% (1 - cos)', (tiltDeg, percent) => {
    expect(100 * tiltLoss(tiltDeg)).toBeCloseTo(percent, 6);
    expect(tiltCorrection(tiltDeg).factor * (1 - tiltLoss(tiltDeg))).toBeCloseTo(1, 12);
  });

  test('an unknown tilt of 3 degrees: root mean square loss sqrt(3)/2 u^2 (Monte Carlo, 20000 draws, 5 %)', () => {
    const normal = seededNormal(11);
    let square = 0;
    for (let k = 0; k < 20000; k++) square += tiltLoss(3 * normal()) ** 2 / 20000;
    expect(Math.sqrt(square) / unknownTiltRelU(3)).toBeGreaterThan(0.95);
    expect(Math.sqrt(square) / unknownTiltRelU(3)).toBeLessThan(1.05);
  });

  test('a known tilt known to 1 degree: u / factor is tan(tilt) u and the one-sided rest', () => {
    const { factor, u } = tiltCorrection(20, 1);
    const rad = Math.PI / 180;
    expect(u / factor).toBeCloseTo(Math.hypot(Math.tan(20 * rad) * rad, (Math.sqrt(3) / 2) * rad * rad), 12);
  });

  test('a large tilt is told, an impossible one refused', () => {
    expect(tiltCorrection(5).warning).toBeNull();
    expect(tiltCorrection(-15).warning?.code).toBe('tilt-large');
    expect(() => tiltCorrection(85)).toThrow(InputError);
    expect(() => tiltCorrection(Number.NaN)).toThrow(InputError);
    expect(() => tiltCorrection(5, -1)).toThrow(InputError);
  });
});
