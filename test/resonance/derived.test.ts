import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { deriveQuantities } from '../../src/resonance/derived.ts';
import { motionAmplitudes } from '../../src/resonance/motion-amplitudes.ts';

const FORCE = { excitation: 'force', damping: 'viscous' } as const;
const fitted = {
  staticGain: 2,
  naturalHz: 5,
  damping: 0.05,
  // u 0.02, 0.004, 0.0006; static gain and damping correlated 0.8
  covariance: Float64Array.of(4e-4, 0, 0.8 * 0.02 * 0.0006, 0, 1.6e-5, 0, 0.8 * 0.02 * 0.0006, 0, 3.6e-7),
};

describe('values from closed forms (Den Hartog, Thomson, Rao; from memory)', () => {
  const derived = deriveQuantities(FORCE, fitted);
  it.each([
    ['q', 10],
    ['lossFactor', 0.1],
    ['logDecrement', 0.3145527023],
    ['peakHz', 5 * 0.99749687],
    ['peakAmplitude', 2 * 10.01252349],
    ['lowerHalfPowerHz', 5 * 0.9461105],
    ['upperHalfPowerHz', 5 * 1.04636271],
    ['bandwidthHz', 5 * (1.04636271 - 0.9461105)],
    ['classicBandwidthHz', 0.5],
  ] as const)('%s', (key, expected) => {
    expect(Math.abs(derived[key].value! / expected - 1)).toBeLessThan(1e-7);
  });

  it('Thomson: 10 lb, 30 lb/in, 0.12 lb s/in: zeta 0.06806, decrement 0.4286 (from memory)', () => {
    const massKg = 10 * 0.45359237;
    const stiffness = 30 * 175.126835;
    const dampingNsPerM = 0.12 * 175.126835;
    const zeta = dampingNsPerM / (2 * Math.sqrt(stiffness * massKg));
    const naturalHz = Math.sqrt(stiffness / massKg) / (2 * Math.PI);
    expect(Math.abs(zeta / 0.06806 - 1)).toBeLessThan(1e-4);
    const found = deriveQuantities(
      FORCE,
      { staticGain: null, naturalHz, damping: zeta, covariance: null },
      { movingMassKg: { value: massKg, u: null } },
    );
    expect(Math.abs(found.logDecrement.value! - 0.4286)).toBeLessThan(1e-4);
    expect(found.stiffnessNPerM.value! / stiffness).toBeCloseTo(1, 12);
    expect(found.dampingNsPerM.value! / dampingNsPerM).toBeCloseTo(1, 12);
    expect(found.staticGain).toEqual({ value: null, u: null });
    expect(found.q.u).toBeNull();
  });

  it('Rao: 200 kg falling to 1/4 every half cycle of 2 s: k 2358.283 N/m, c 554.518 N s/m', () => {
    const found = deriveQuantities(
      FORCE,
      { staticGain: null, naturalHz: 3.433863 / (2 * Math.PI), damping: 0.403713, covariance: null },
      { movingMassKg: { value: 200, u: null } },
    );
    expect(Math.abs(found.stiffnessNPerM.value! / 2358.283 - 1)).toBeLessThan(1e-6);
    expect(Math.abs(found.dampingNsPerM.value! / 554.518 - 1)).toBeLessThan(2e-6);
    expect(Math.abs(found.logDecrement.value! / 2.772589 - 1)).toBeLessThan(2e-6);
  });
});

describe('uncertainties', () => {
  it('q: u(q) = q u(zeta)/zeta; 2 zeta fn: relative parts in quadrature', () => {
    const derived = deriveQuantities(FORCE, fitted);
    expect(derived.q.u).toBeCloseTo((10 * 0.0006) / 0.05, 8);
    expect(derived.classicBandwidthHz.u).toBeCloseTo(0.5 * Math.hypot(0.0006 / 0.05, 0.004 / 5), 8);
  });

  it('all agree with the spread of 20000 seeded draws within 2 %', () => {
    const random = seededRandom(6);
    const inputs = { commonRelativeU: 0.004, movingMassKg: { value: 0.4, u: 0.003 } };
    const derived = deriveQuantities(FORCE, fitted, inputs);
    const keys = Object.keys(derived) as (keyof typeof derived)[];
    const runs = 20000;
    const sums = new Map(keys.map((key) => [key, { one: 0, two: 0 }]));
    for (let run = 0; run < runs; run++) {
      const [a, b] = [random.normal(), random.normal()];
      const scale = 1 + 0.004 * random.normal();
      const drawn = deriveQuantities(
        FORCE,
        {
          staticGain: (2 + 0.02 * a) * scale,
          naturalHz: 5 + 0.004 * random.normal(),
          damping: 0.05 + 0.0006 * (0.8 * a + 0.6 * b),
          covariance: null,
        },
        { movingMassKg: { value: 0.4 + 0.003 * random.normal(), u: null } },
      );
      for (const key of keys) {
        const off = drawn[key].value! - derived[key].value!;
        sums.get(key)!.one += off;
        sums.get(key)!.two += off * off;
      }
    }
    for (const key of keys) {
      const { one, two } = sums.get(key)!;
      const spread = Math.sqrt(two / runs - (one / runs) ** 2);
      expect(Math.abs(derived[key].u! / spread - 1), key).toBeLessThan(0.02);
    }
  });

  it('damping too heavy for a peak: no peak, no bandwidth, no NaN', () => {
    const derived = deriveQuantities(FORCE, { ...fitted, damping: 0.8 });
    for (const key of ['peakHz', 'peakAmplitude', 'bandwidthHz', 'lowerHalfPowerHz'] as const) {
      expect(derived[key]).toEqual({ value: null, u: null });
    }
    expect(derived.naturalHz.value).toBe(5);
  });
});

describe('velocity and acceleration', () => {
  it('1 g at 15.76 Hz is 1 mm zero to peak (the usual shaker rule: g = 4.024e-3 f^2 X)', () => {
    const found = motionAmplitudes({ value: 1, u: 0.01 }, { value: 15.76, u: null });
    expect(found.accelerationG.value).toBeCloseTo(1, 3);
    expect(found.velocityMmPerS.value).toBeCloseTo(2 * Math.PI * 15.76, 10);
    expect(found.accelerationG.value! / (15.76 ** 2 * 4.0256e-3)).toBeCloseTo(1, 4);
    expect(found.accelerationMPerS2.u! / found.accelerationMPerS2.value!).toBeCloseTo(0.01, 10);
  });

  it('frequency counts once for velocity, twice for acceleration', () => {
    const found = motionAmplitudes({ value: 2, u: 0 }, { value: 10, u: 0.1 });
    expect(found.velocityMmPerS.u! / found.velocityMmPerS.value!).toBeCloseTo(0.01, 10);
    expect(found.accelerationG.u! / found.accelerationG.value!).toBeCloseTo(0.02, 10);
  });

  it('nothing measured gives nothing', () => {
    const found = motionAmplitudes({ value: null, u: null }, { value: 10, u: null });
    expect(found.accelerationG).toEqual({ value: null, u: null });
  });
});
