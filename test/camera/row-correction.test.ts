import { describe, expect, test } from 'vitest';
import { rollingShutterEffect } from '../../src/camera/rolling-shutter.ts';
import { rowCorrection } from '../../src/camera/row-correction.ts';

const rows = {
  rowReadoutS: 0.015,
  undone: false,
  amplitudeFraction: 200 / 1080,
  fractionDifference: 400 / 1080,
};

describe('rolling shutter of a dwell', () => {
  test('known and not undone: fundamental / 0.997565039 and 16 degrees of lag (8 Hz, derived)', () => {
    const found = rowCorrection(8, 60, rows);
    expect((found.factor ?? 0) * 0.997565039).toBeCloseTo(1, 8);
    expect(found.lagShiftDeg).toBeCloseTo(16, 9);
    expect(found.lagUDeg).toBeCloseTo(0.8, 9);
  });

  test('the uncertainty is what 5 % of readout changes (numerical, 10 %)', () => {
    const { factor, u } = rowCorrection(8, 60, rows);
    const more = 1 / rollingShutterEffect(8, rows.amplitudeFraction, 0.015 * 1.05).fundamental;
    expect((u ?? 0) / (more - (factor ?? 0))).toBeGreaterThan(0.9);
    expect((u ?? 0) / (more - (factor ?? 0))).toBeLessThan(1.1);
  });

  test('undone: nothing to correct, only the doubt of the readout left', () => {
    const found = rowCorrection(8, 60, { ...rows, undone: true });
    expect(found).toMatchObject({ factor: 1, lagShiftDeg: 0 });
    expect(found.lagUDeg).toBeCloseTo(0.8, 9);
    expect(found.u).toBeLessThan(1e-5);
  });

  test('unknown: nothing corrected, and the budget covers any readout up to the frame interval', () => {
    const found = rowCorrection(8, 60, { ...rows, rowReadoutS: null });
    expect(found).toMatchObject({ factor: 1, lagShiftDeg: 0 });
    const worstLag = 360 * 8 * (1 / 60) * (400 / 1080);
    expect(2 * found.lagUDeg).toBeGreaterThan(worstLag);
    expect(found.warning?.code).toBe('rolling-shutter-unknown');
    expect(found.warning?.sentence).toContain('18 degrees');
  });

  test('unknown but harmless: a slow motion across the rows, markers in one row', () => {
    const harmless = { rowReadoutS: null, undone: false, amplitudeFraction: 0, fractionDifference: 0.02 };
    const found = rowCorrection(2, 60, harmless);
    expect(found.warning).toBeNull();
    expect(found.lagUDeg).toBeLessThan(0.2);
  });

  test('a global shutter, or rows nobody knows of, change nothing', () => {
    const nothing = { factor: 1, u: 0, lagShiftDeg: 0, lagUDeg: 0, warning: null };
    expect(rowCorrection(8, 60, { ...rows, rowReadoutS: 0 })).toEqual(nothing);
    expect(rowCorrection(8, 60, null)).toEqual(nothing);
  });

  test('a part that outruns the readout is refused, an unknown readout it might outrun stays a number', () => {
    const fast = { ...rows, amplitudeFraction: 0.5 };
    expect(rowCorrection(30, 60, fast)).toMatchObject({ factor: null, u: null });
    expect(rowCorrection(30, 60, fast).warning?.code).toBe('rolling-shutter-strong');
    const unknown = rowCorrection(30, 60, { ...fast, rowReadoutS: null });
    expect(unknown.factor).toBe(1);
    expect(unknown.u).toBeGreaterThan(0.05);
  });
});
