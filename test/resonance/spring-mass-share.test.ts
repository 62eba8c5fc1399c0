import { describe, expect, it } from 'vitest';
import {
  HEAVY_LOAD_SHARE,
  loadedSpringHz,
  NO_LOAD_SHARE,
  springMassShare,
} from '../../src/resonance/spring-mass-share.ts';

describe("a spring's own mass", () => {
  // Root and effective fraction for load over spring mass, from scipy.optimize.brentq on x tan x = ms / M.
  it.each([
    [10, 0.3110528482, 0.3355034],
    [5, 0.4328407199, 0.3375724],
    [2, 0.6532711871, 0.3432196],
    [1, 0.860333589, 0.3510339],
    [0.5, 1.0768739863, 0.3623235],
    [0.1, 1.4288700112, 0.3897952],
  ])(
    'load over spring mass %d: root of x tan x = ms / M and share as Galloni and Kohen (1979) have it',
    (load, root, share) => {
      const result = springMassShare(0.06, 0.06 * load);
      expect(result.root).toBeCloseTo(root, 9);
      expect(result.share).toBeCloseTo(share, 7);
      expect(result.effectiveKg).toBeCloseTo(0.06 * share, 8);
    },
  );

  it('limits: a third under a heavy load, 4 / pi^2 under none', () => {
    expect(springMassShare(1, 1e9).share).toBeCloseTo(HEAVY_LOAD_SHARE, 9);
    expect(springMassShare(1, 0).share).toBe(NO_LOAD_SHARE);
    expect(NO_LOAD_SHARE).toBeCloseTo(0.4052847, 7);
    expect(springMassShare(1, 0).root).toBeCloseTo(Math.PI / 2, 14);
  });

  it('is continuous where the series takes over from the root', () => {
    const above = springMassShare(1.0001e-3, 1).share;
    const below = springMassShare(0.9999e-3, 1).share;
    expect(Math.abs(above - below)).toBeLessThan(1e-8);
    expect(above).toBeGreaterThan(below);
  });

  it('identity: the frequency is x sqrt(k / ms) of the wave equation', () => {
    const { root } = springMassShare(0.06, 0.1);
    expect(loadedSpringHz(120, 0.06, 0.1)).toBeCloseTo((root * Math.sqrt(120 / 0.06)) / (2 * Math.PI), 12);
  });

  it('refuses a spring without mass as a mistake of the caller', () => {
    expect(() => springMassShare(0, 1)).toThrow(/above 0/);
    expect(() => springMassShare(1, -1)).toThrow(/0 or more/);
  });
});
