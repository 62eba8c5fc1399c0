import { describe, expect, it } from 'vitest';
import { amplitudeFrequency } from '../../src/resonance/amplitude-frequency.ts';
import { backboneHz, duffingBranches, foldsOver } from '../../src/resonance/duffing-curve.ts';
import { fitDuffing } from '../../src/resonance/duffing-fit.ts';
import { unitAmplitude, unitResponse } from '../../src/resonance/models.ts';
import { findNonlinearity, type SteppedPoint } from '../../src/resonance/nonlinearity.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import { compareStepDirections } from '../../src/resonance/step-direction.ts';
import { DuffingRig, exactFreeRatio } from './duffing-motion.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const curve = { staticGain: 0.5, naturalHz: 5, dampingRatio: 0.02, hardening: 4e-4 };

describe('harmonic balance of the cubic spring (Nayfeh and Mook, from memory)', () => {
  it('without hardening it is the straight resonance', () => {
    for (const f of [4, 4.9, 5, 5.1, 7]) {
      const linear =
        0.5 * unitAmplitude(unitResponse({ excitation: 'force', damping: 'viscous' }, f, 5, 0.02));
      expect(duffingBranches({ ...curve, hardening: 0 }, f)[0]!.amplitude).toBeCloseTo(linear, 10);
      expect(duffingBranches({ ...curve, hardening: 1e-12 }, f)[0]!.amplitude).toBeCloseTo(linear, 6);
    }
  });

  it('every branch satisfies its equation, and its derivatives agree with central differences', () => {
    const strong = { ...curve, hardening: 3e-3 };
    let three = 0;
    for (const f of evenly(4.5, 6, 31)) {
      const branches = duffingBranches(strong, f);
      if (branches.length === 3) three++;
      branches.forEach((branch, k) => {
        const y = branch.amplitude ** 2;
        const w = (f / 5) ** 2;
        const left = y * ((1 + 3e-3 * y - w) ** 2 + 4 * 0.02 ** 2 * w);
        expect(left).toBeCloseTo(0.25, 9);
        for (const [key, slope] of [
          ['staticGain', branch.byStaticGain],
          ['naturalHz', branch.byNaturalHz],
          ['dampingRatio', branch.byDampingRatio],
          ['hardening', branch.byHardening],
        ] as const) {
          const h = strong[key] * 1e-6;
          const up = duffingBranches({ ...strong, [key]: strong[key] + h }, f);
          const down = duffingBranches({ ...strong, [key]: strong[key] - h }, f);
          if (up.length !== branches.length || down.length !== branches.length) continue;
          const numeric = (up[k]!.amplitude - down[k]!.amplitude) / (2 * h);
          expect(Math.abs(numeric - slope)).toBeLessThan(1e-4 * (Math.abs(slope) + 1e-3 / strong[key]));
        }
      });
    }
    expect(three).toBeGreaterThan(3);
  });

  it('folds over exactly where three amplitudes appear', () => {
    for (const factor of [0.9, 1.1]) {
      const hardening = (factor * 64 * 0.002 ** 3) / (3 * Math.sqrt(3)) / 0.25;
      const light = { ...curve, dampingRatio: 0.002, hardening };
      const folded = evenly(5, 5.05, 4001).some((f) => duffingBranches(light, f).length === 3);
      expect(folded).toBe(factor > 1);
      expect(foldsOver(light)).toBe(factor > 1);
    }
  });

  it('backbone against the exact free frequency (elliptic integral): relative error (h A^2)^2 / 48', () => {
    for (const beta of [0.05, 0.2, -0.1]) {
      const h = 0.75 * beta;
      const error = backboneHz(1, h, 1)! / exactFreeRatio(beta, 1) - 1;
      expect(Math.abs(error / ((h * h) / 48))).toBeGreaterThan(0.7);
      expect(Math.abs(error / ((h * h) / 48))).toBeLessThan(1.4);
    }
  });
});

/** Dwells of an integrated rig, 0.2 % uncertainty. */
function rigDwells(
  rig: DuffingRig,
  frequencies: readonly number[],
  direction: 'up' | 'down',
): SteppedPoint[] {
  return frequencies.map((driveHz) => {
    const value = rig.dwell(driveHz);
    return { driveHz, amplitude: { value, u: 0.002 * value }, lagDeg: null, direction };
  });
}

describe('a rig with a cubic spring, integrated in time', () => {
  // 3/4 beta A^2 is about 0.08 at the peak, zeta 0.03: bent, not folded
  const beta = 1.4e-3;
  const points = rigDwells(new DuffingRig(5, 0.03, beta, 0.5), evenly(4.6, 5.5, 13), 'up');

  it('natural frequency, damping and hardening come back within 0.1, 1 and 3 %', () => {
    const fit = fitDuffing(points);
    expect(fit.bent).toBe(true);
    expect(Math.abs(fit.naturalHz.value! / 5 - 1)).toBeLessThan(1e-3);
    expect(Math.abs(fit.dampingRatio.value! / 0.03 - 1)).toBeLessThan(0.01);
    expect(Math.abs(fit.hardening.value! / (0.75 * beta) - 1)).toBeLessThan(0.03);
    expect(fit.sentence).toContain('hardens');
    expect(fit.jumps).toBe(false);
  });

  it('is noticed through the whole check, and the straight fit misses the dwells', () => {
    const fit = fitResonance(points, { excitation: 'force' });
    expect(fit.lackOfFit!.pValue).toBeLessThan(1e-6);
    const found = findNonlinearity(points, fit);
    expect(found.noticed).toBe(true);
    expect(found.sentences[0]).toContain('The peak is bent');
  });

  it('a folded curve: jumps, and other amplitudes on the way down', () => {
    const frequencies = evenly(4.9, 6, 23);
    const rig = new DuffingRig(5, 0.02, 3e-3, 0.5);
    const up = rigDwells(rig, frequencies, 'up');
    const down = rigDwells(rig, [...frequencies].reverse(), 'down');
    const directions = compareStepDirections(up, down);
    expect(directions.pairs).toHaveLength(23);
    expect(directions.differs).toBe(true);
    expect(directions.sentence).toContain('Keep to one direction');
    const fit = fitDuffing([...up, ...down]);
    expect(fit.bent).toBe(true);
    expect(fit.jumps).toBe(true);
    expect(Math.abs(fit.hardening.value! / (0.75 * 3e-3) - 1)).toBeLessThan(0.05);
  });

  it('a softening spring softens', () => {
    const soft = rigDwells(new DuffingRig(5, 0.03, -1e-3, 0.5), evenly(4.5, 5.4, 13), 'up');
    const fit = fitDuffing(soft);
    expect(fit.hardening.value!).toBeLessThan(0);
    expect(fit.sentence).toContain('softens');
  });
});

describe('a straight resonance raises no alarm', () => {
  it('bending: at most 3 false alarms in 100 noisy tests at a chance of 1 in 100', () => {
    const noise = seededNormal(60);
    const truth = {
      model: { excitation: 'force', damping: 'viscous' } as const,
      staticGain: 0.5,
      naturalHz: 5,
      damping: 0.03,
    };
    let alarms = 0;
    for (let run = 0; run < 100; run++) {
      if (fitDuffing(simulatedDwells(truth, evenly(4.6, 5.4, 12), { noise })).bent !== false) alarms++;
    }
    expect(alarms).toBeLessThanOrEqual(3);
  });

  it('step directions that agree within their uncertainty', () => {
    const pair = (value: number) => [{ driveHz: 5, amplitude: { value, u: 0.1 }, lagDeg: null }];
    expect(compareStepDirections(pair(10), pair(10.1)).differs).toBe(false);
    expect(compareStepDirections(pair(10), pair(11)).differs).toBe(true);
    expect(compareStepDirections(pair(10), []).differs).toBeNull();
  });
});

describe('natural frequency against amplitude', () => {
  const exact = (amplitudeMm: number) => ({
    naturalHz: { value: 5 * exactFreeRatio(0.002, amplitudeMm), u: 0.002 },
    amplitudeMm,
  });

  it('two drive levels give the hardening of the exact free vibration within 1 %', () => {
    const found = amplitudeFrequency([exact(2), exact(8)]);
    expect(found.changes).toBe(true);
    expect(Math.abs(found.hardening.value! / 0.0015 - 1)).toBeLessThan(0.01);
    expect(Math.abs(found.smallAmplitudeHz.value! / 5 - 1)).toBeLessThan(1e-4);
    expect(found.sentence).toContain('rises (hardening)');
  });

  it('its uncertainty agrees with the spread of 2000 seeded draws within 5 %', () => {
    const noise = seededNormal(61);
    const levels = [1, 4, 6, 8].map(exact);
    const stated = amplitudeFrequency(levels);
    let [one, two] = [0, 0];
    for (let run = 0; run < 2000; run++) {
      const drawn = levels.map(({ naturalHz, amplitudeMm }) => ({
        naturalHz: { value: naturalHz.value + 0.002 * noise(), u: 0.002 },
        amplitudeMm,
      }));
      const off = amplitudeFrequency(drawn).hardening.value! - stated.hardening.value!;
      one += off;
      two += off * off;
    }
    expect(Math.abs(Math.sqrt(two / 2000 - (one / 2000) ** 2) / stated.hardening.u! - 1)).toBeLessThan(0.05);
  });

  it('the same at both levels: said so; one level: cannot be told', () => {
    const same = [2, 8].map((amplitudeMm) => ({ naturalHz: { value: 5, u: 0.01 }, amplitudeMm }));
    expect(amplitudeFrequency(same)).toMatchObject({ changes: false });
    expect(amplitudeFrequency(same.slice(1))).toMatchObject({
      changes: null,
      hardening: { value: null, u: null },
    });
  });
});
