import { describe, expect, test } from 'vitest';
import { type LumaPatch, markerQuality } from '../../src/camera/marker-quality.ts';
import { seededUniform } from '../plan/seeded-random.ts';

const SIZE = 61;

/** Gaussian blobs of one width at seeded places: correlation length sqrt(2) times their width (closed form for dense blobs). */
function speckle(widthPx: number, count: number): LumaPatch {
  const uniform = seededUniform(31);
  const luma = new Float64Array(SIZE * SIZE).fill(120);
  for (let k = 0; k < count; k++) {
    const [cx, cy] = [uniform() * (SIZE + 20) - 10, uniform() * (SIZE + 20) - 10];
    const height = uniform() < 0.5 ? -25 : 25;
    luma.forEach((_, p) => {
      const d2 = ((p % SIZE) - cx) ** 2 + (Math.floor(p / SIZE) - cy) ** 2;
      luma[p]! += height * Math.exp(-d2 / (2 * widthPx * widthPx));
    });
  }
  return { luma, widthPx: SIZE, heightPx: SIZE, black: 16, white: 235 };
}

describe('quality of a marker', () => {
  test('a speckle of blobs 2.5 px wide: correlation length 2.5 sqrt(2) px (15 %), nothing to complain of', () => {
    const quality = markerQuality(speckle(2.5, 300), 100, 0.004);
    expect((quality.featurePx ?? 0) / (2.5 * Math.SQRT2)).toBeGreaterThan(0.85);
    expect((quality.featurePx ?? 0) / (2.5 * Math.SQRT2)).toBeLessThan(1.15);
    expect(quality.smearPx).toBeCloseTo(0.4, 12);
    expect(quality.warnings).toEqual([]);
  });

  test('a gradual shade is too smooth, and so is a patch of one value', () => {
    const ramp = {
      ...speckle(2, 0),
      luma: Float64Array.from({ length: SIZE * SIZE }, (_, k) => 60 + (k % SIZE)),
    };
    expect(markerQuality(ramp, 0, null).warnings.map((w) => w.code)).toEqual(['marker-smooth']);
    const flat = markerQuality(speckle(2, 0), 0, null);
    expect(flat.featurePx).toBeNull();
    expect(flat.warnings.map((w) => w.code)).toEqual(['marker-smooth']);
  });

  test('clipped to white over a quarter of the patch is saturated', () => {
    const patch = speckle(2.5, 300);
    const luma = Float64Array.from(patch.luma, (v, k) => (k % 4 === 0 ? 240 : v));
    const quality = markerQuality({ ...patch, luma }, 0, null);
    expect(quality.saturatedFraction).toBeGreaterThan(0.25);
    expect(quality.warnings.map((w) => w.code)).toContain('marker-saturated');
  });

  test('a marker that crosses 12 px in one exposure is smeared; without an exposure nothing is claimed', () => {
    const fast = markerQuality(speckle(2.5, 300), 1200, 0.01);
    expect(fast.smearPx).toBeCloseTo(12, 12);
    expect(fast.warnings.map((w) => w.code)).toEqual(['marker-smeared']);
    expect(markerQuality(speckle(2.5, 300), 1200, null)).toMatchObject({ smearPx: null, warnings: [] });
  });

  test('a patch of the wrong size is our own mistake', () => {
    expect(() => markerQuality({ ...speckle(2, 0), widthPx: 60 }, 0, null)).toThrow(/disagree/);
  });
});
