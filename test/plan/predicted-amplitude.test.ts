import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { cloudFromFit } from '../../src/plan/cloud-from-fit.ts';
import { cloudFromKnowledge, quantileOf } from '../../src/plan/knowledge-cloud.ts';
import type { PlanPoint } from '../../src/plan/plan-points.ts';
import { planResponse } from '../../src/plan/plan-response.ts';
import { predictAmplitude, relativeAmplitude } from '../../src/plan/predicted-amplitude.ts';
import type { StartingKnowledge } from '../../src/plan/starting-knowledge.ts';
import type { ResonanceModel } from '../../src/resonance/models.ts';
import reference from '../data/resonance_fit.json' with { type: 'json' };
import { seededNormal } from './seeded-random.ts';

const FORCE: ResonanceModel = { excitation: 'force', damping: 'viscous' };
const BASE: ResonanceModel = { excitation: 'base', damping: 'viscous' };

const knowledge = (hz: number, u: number, zeta: number, factor = 2): StartingKnowledge => ({
  naturalHz: { value: hz, u },
  dampingRatio: { value: zeta, low: zeta / factor, high: zeta * factor },
  notes: [],
});

const sharp = (hz: number, zeta: number) => knowledge(hz, 1e-7 * hz, zeta, 1.00001);

describe('predicted amplitude from a known oscillator', () => {
  it('Rao, rough road of 0.05 m: 0.0550481 m at 20 km/h, 0.0424660 m at 100 km/h (published 0.0550, 0.042)', () => {
    const naturalHz = Math.sqrt(400e3 / 1200) / (2 * Math.PI);
    const cloud = cloudFromKnowledge(BASE, sharp(naturalHz, 0.5), measured(50, 1e-7), []);
    expect(predictAmplitude(BASE, cloud, 20 / 3.6 / 6)!.medianMm).toBeCloseTo(55.0481, 3);
    expect(predictAmplitude(BASE, cloud, 100 / 3.6 / 6)!.medianMm).toBeCloseTo(42.466, 3);
  });

  it('Inman, same road: 1007 kg, 40 kN/m, 2000 N s/m, 0.01 m give 0.0319 m at 20 km/h (from memory)', () => {
    const omega = Math.sqrt(40e3 / 1007);
    const zeta = 2000 / (2 * 1007 * omega);
    expect(zeta).toBeCloseTo(0.15756, 5);
    const driveHz = (0.92308 * omega) / (2 * Math.PI);
    const cloud = cloudFromKnowledge(BASE, sharp(omega / (2 * Math.PI), zeta), measured(10, 1e-7), []);
    expect(predictAmplitude(BASE, cloud, driveHz)!.medianMm).toBeCloseTo(31.9133, 3);
  });

  it('without a gain there is no millimetre, but ratios of steps are known', () => {
    const cloud = cloudFromKnowledge(FORCE, sharp(5, 0.05), null, []);
    expect(predictAmplitude(FORCE, cloud, 4)).toBeNull();
    expect(relativeAmplitude(FORCE, cloud, 5)).toBeCloseTo(10, 3); // 1 / (2 zeta)
  });
});

describe('knowledge joined with measured dwells', () => {
  const truth = { gain: 0.8, hz: 4.873, zeta: 0.0312 };
  const dwell = (driveHz: number): PlanPoint => ({
    driveHz,
    amplitudeMm: truth.gain * planResponse(FORCE, driveHz, truth.hz, truth.zeta).amplitude,
    uAmplitudeMm: 0.02,
  });
  const start = knowledge(5, 0.15, 0.02);

  it('nothing measured: median and range are those of the starting knowledge', () => {
    const { naturalHz, dampingRatio } = cloudFromKnowledge(FORCE, start, null, []);
    expect(quantileOf(naturalHz, 0.5)).toBeCloseTo(5, 2);
    expect(quantileOf(naturalHz, 0.95)).toBeCloseTo(5 + 1.645 * 0.15, 2);
    expect(quantileOf(dampingRatio, 0.05)).toBeCloseTo(0.01, 3);
    expect(quantileOf(dampingRatio, 0.95)).toBeCloseTo(0.04, 2);
  });

  it('one dwell far below resonance tells the gain and little else', () => {
    const cloud = cloudFromKnowledge(FORCE, start, null, [dwell(2)]);
    expect(quantileOf(cloud.gainMm!, 0.5)).toBeCloseTo(0.8, 1);
    const spread = (quantileOf(cloud.naturalHz, 0.84) - quantileOf(cloud.naturalHz, 0.16)) / 2;
    expect(spread).toBeGreaterThan(0.12);
    expect(predictAmplitude(FORCE, cloud, 2)!.medianMm).toBeCloseTo(dwell(2).amplitudeMm, 1);
  });

  it('dwells on the way up narrow the frequency, and their prediction of the next holds the truth', () => {
    const points = [2, 4, 4.5].map(dwell);
    const cloud = cloudFromKnowledge(FORCE, start, null, points);
    const spread = (quantileOf(cloud.naturalHz, 0.84) - quantileOf(cloud.naturalHz, 0.16)) / 2;
    expect(spread).toBeLessThan(0.08);
    const next = predictAmplitude(FORCE, cloud, 4.65)!;
    expect(next.lowMm).toBeLessThan(dwell(4.65).amplitudeMm);
    expect(next.upperMm).toBeGreaterThan(dwell(4.65).amplitudeMm);
  });

  it('a lag tells on which side of resonance a dwell lies', () => {
    const one = { ...dwell(4.8), lagDeg: 65, uLagDeg: 1 };
    const above = quantileOf(cloudFromKnowledge(FORCE, start, null, [one]).naturalHz, 0.02);
    expect(above).toBeGreaterThan(4.8);
  });

  it('seeded simulation: the 95 % upper bound is passed by about 5 % of true amplitudes', () => {
    const normal = seededNormal(31);
    const runs = 250;
    let passed = 0;
    for (let run = 0; run < runs; run++) {
      const hz = 5 + 0.15 * normal();
      const zeta = 0.02 * Math.exp((Math.log(2) / 1.645) * normal());
      const points: PlanPoint[] = [3, 4.2].map((driveHz) => {
        const amplitudeMm = planResponse(FORCE, driveHz, hz, zeta).amplitude * (1 + 0.03 * normal());
        return { driveHz, amplitudeMm, uAmplitudeMm: null };
      });
      const cloud = cloudFromKnowledge(FORCE, start, null, points);
      if (planResponse(FORCE, 4.6, hz, zeta).amplitude > predictAmplitude(FORCE, cloud, 4.6)!.upperMm)
        passed++;
    }
    expect(passed / runs).toBeGreaterThan(0.015);
    expect(passed / runs).toBeLessThan(0.1);
  });

  it('a fit: estimates and uncertainties of the reference fit come back (resonance_fit.json, scipy)', () => {
    const { Y, fn, zeta, u, corr_Y_zeta } = reference.fit_amplitude_only;
    const [uY, uFn, uZeta] = u as [number, number, number];
    const shared = corr_Y_zeta * uY * uZeta;
    const cloud = cloudFromFit({
      gainMm: Y,
      naturalHz: fn,
      dampingRatio: zeta,
      covariance: [uY ** 2, 0, shared, 0, uFn ** 2, 0, shared, 0, uZeta ** 2],
    });
    expect(quantileOf(cloud.naturalHz, 0.5)).toBeCloseTo(fn, 4);
    const sd = (v: Float64Array) => (quantileOf(v, 0.95) - quantileOf(v, 0.05)) / (2 * 1.645);
    expect(Math.abs(sd(cloud.naturalHz) / uFn - 1)).toBeLessThan(0.03);
    expect(Math.abs(sd(cloud.dampingRatio) / uZeta - 1)).toBeLessThan(0.03);
    // gain and damping vary together: at the peak their errors cancel, as the amplitude measured there says
    const peak = predictAmplitude(FORCE, cloud, fn)!;
    expect((peak.upperMm - peak.lowMm) / (2 * 1.645) / peak.medianMm).toBeLessThan(0.6 * (uZeta / zeta));
  });
});

describe('quantile of equally likely values', () => {
  it('is the middle one at one half and the ends at the ends', () => {
    expect(quantileOf([5, 1, 3], 0.5)).toBe(3);
    expect(quantileOf([5, 1, 3], 0)).toBe(1);
    expect(quantileOf([5, 1, 3], 1)).toBe(5);
    expect(quantileOf([1, 2], 0.5)).toBe(1.5);
  });
});
