import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  exposureAttenuation,
  exposureCorrection,
  exposureStampLagDeg,
  unknownExposure,
} from '../../src/camera/exposure-blur.ts';
import { fitSine } from './fit-sine.ts';

/** Mean of cos(2 pi f t) over an exposure centred on t, by 200 midpoints: no closed form used. */
function averaged(frequencyHz: number, exposureS: number, t: number): number {
  let sum = 0;
  for (let k = 0; k < 200; k++) {
    sum += Math.cos(2 * Math.PI * frequencyHz * (t + exposureS * ((k + 0.5) / 200 - 0.5))) / 200;
  }
  return sum;
}

describe('exposure blur', () => {
  test.each([
    [10, 1 / 60, 0.954929659],
    [10, 1 / 120, 0.988615929],
    [20, 1 / 60, 0.826993343],
  ])('%d Hz at %d s: amplitude times %d (derived, sin(pi f Te) / (pi f Te))', (f, te, expected) => {
    expect(exposureAttenuation(f, te)).toBeCloseTo(expected, 9);
    const correction = exposureCorrection(f, te);
    expect((correction.factor ?? 0) * expected).toBeCloseTo(1, 8);
  });

  test('agrees with averaging the motion over the exposure, frame by frame', () => {
    const timesS = Float64Array.from({ length: 240 }, (_, i) => i / 60);
    const seen = timesS.map((t) => averaged(10, 1 / 60, t));
    expect(fitSine(timesS, seen, 10).amplitude).toBeCloseTo(0.954929659, 5);
  });

  test('stamping the start of the exposure adds a lag of pi f Te: 30 degrees at 10 Hz and 1/60 s', () => {
    expect(exposureStampLagDeg(10, 1 / 60)).toBeCloseTo(30, 9);
    const timesS = Float64Array.from({ length: 240 }, (_, i) => i / 60);
    const seen = timesS.map((t) => averaged(10, 1 / 60, t + 1 / 120));
    expect((-fitSine(timesS, seen, 10).lagRad * 180) / Math.PI).toBeCloseTo(30, 6);
  });

  test('no exposure, no change; and no jump where the series takes over', () => {
    expect(exposureCorrection(10, 0)).toEqual({ factor: 1, u: 0, warning: null });
    expect(exposureAttenuation(1, 3e-9)).toBe(1);
    expect(exposureAttenuation(1, 4e-9)).toBeCloseTo(1, 12);
  });

  test('the uncertainty is the change of the factor for one standard uncertainty of the exposure', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 0.7, noNaN: true }), (fraction) => {
        const u = 1e-5;
        const change =
          ((exposureCorrection(1, fraction + u).factor ?? 0) -
            (exposureCorrection(1, fraction - u).factor ?? 0)) /
          2;
        expect((exposureCorrection(1, fraction, u).u ?? 0) / change).toBeCloseTo(1, 5);
      }),
      { seed: 9, numRuns: 60 },
    );
  });

  test('a third of a period is corrected quietly, half a period with a caution, near the zero not at all', () => {
    expect(exposureCorrection(20, 1 / 60).warning).toBeNull();
    expect(exposureCorrection(30, 1 / 60).warning?.code).toBe('exposure-long');
    for (const fraction of [0.76, 0.999, 1, 1.4, 2]) {
      const refused = exposureCorrection(1, fraction);
      expect(refused).toMatchObject({ factor: null, u: null });
      expect(refused.warning?.code).toBe('exposure-too-long');
    }
    expect(exposureCorrection(48, 1 / 60).warning?.sentence).toContain('1/500 s');
  });
});

describe('an exposure nobody stated', () => {
  test('two standard uncertainties cover every exposure up to the frame interval', () => {
    for (const [f, interval] of [
      [2, 1 / 30],
      [10, 1 / 60],
      [20, 1 / 60],
    ] as const) {
      const { factor, u } = unknownExposure(f, interval);
      expect(factor).toBe(1);
      expect(1 + 2 * u).toBeGreaterThan(1 / exposureAttenuation(f, interval));
    }
  });

  test('u is the root mean square loss over losses spread evenly up to the worst (numerical)', () => {
    const worst = 1 / exposureAttenuation(10, 1 / 60) - 1;
    let square = 0;
    for (let k = 0; k < 10000; k++) square += ((worst * (k + 0.5)) / 10000) ** 2 / 10000;
    expect(unknownExposure(10, 1 / 60).u).toBeCloseTo(Math.sqrt(square), 8);
  });

  test('negligible at 2 Hz and 60 frames/s: no word of it; told at 10 Hz', () => {
    expect(unknownExposure(2, 1 / 60)).toMatchObject({ factor: 1, warning: null });
    expect(unknownExposure(2, 1 / 60).u).toBeLessThan(0.0012);
    expect(unknownExposure(10, 1 / 60).warning?.code).toBe('exposure-unknown');
    expect(unknownExposure(10, 1 / 60).warning?.sentence).toContain('4.7 %');
  });

  test('above the frame rate it stays a number, and a large one', () => {
    const { factor, u } = unknownExposure(61, 1 / 60);
    expect(factor).toBe(1);
    expect(u).toBeGreaterThan(1);
    expect(Number.isFinite(u)).toBe(true);
  });
});
