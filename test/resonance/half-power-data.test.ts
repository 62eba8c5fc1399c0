import { describe, expect, it } from 'vitest';
import { readHalfPower } from '../../src/resonance/half-power-data.ts';
import { EXCITATIONS } from '../../src/resonance/models.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const FORCE = { excitation: 'force', damping: 'viscous' } as const;
const truth = { model: FORCE, staticGain: 0.5, naturalHz: 5, damping: 0.05 };

describe('read from exact dwells', () => {
  it('force: interpolation in f^2 is exact, so peak and half-power points are those of the closed forms', () => {
    const found = readHalfPower(simulatedDwells(truth, evenly(4.2, 5.8, 9)), FORCE);
    expect(found.missing).toBeNull();
    expect(Math.abs(found.peakHz.value! - 5 * 0.99749687)).toBeLessThan(1e-7);
    expect(Math.abs(found.peakAmplitude.value! - 0.5 * 10.01252349)).toBeLessThan(1e-7);
    expect(Math.abs(found.lowerHz.value! - 5 * 0.9461105)).toBeLessThan(1e-7);
    expect(Math.abs(found.upperHz.value! - 5 * 1.04636271)).toBeLessThan(1e-7);
    expect(found.damping.value).toBeCloseTo(0.05, 10);
    expect(found.naturalHz.value).toBeCloseTo(5, 9);
  });

  it('the classic reading is 0.504 % too high at zeta 0.05', () => {
    const found = readHalfPower(simulatedDwells(truth, evenly(4.2, 5.8, 9)), FORCE);
    expect(Math.abs(100 * (found.classicDamping.value! / 0.05 - 1) - 0.504)).toBeLessThan(1e-3);
  });

  it.each(EXCITATIONS)('%s: within 1 % with dwells a fifth of the bandwidth apart', (excitation) => {
    const model = { excitation, damping: 'viscous' } as const;
    const found = readHalfPower(simulatedDwells({ ...truth, model }, evenly(4.2, 6, 19)), model);
    expect(Math.abs(found.damping.value! / 0.05 - 1)).toBeLessThan(0.01);
    expect(Math.abs(found.naturalHz.value! / 5 - 1)).toBeLessThan(0.001);
  });
});

it('uncertainties agree with the spread of 1000 noisy tests within 10 %', () => {
  const noise = seededNormal(14);
  const at = evenly(4.3, 5.7, 11);
  const options = { uAmplitude: (a: number) => 0.003 * a };
  const stated = readHalfPower(simulatedDwells(truth, at, options), FORCE);
  const runs = 1000;
  for (const key of ['damping', 'naturalHz', 'bandwidthHz'] as const) {
    let [one, two] = [0, 0];
    for (let run = 0; run < runs; run++) {
      const found = readHalfPower(simulatedDwells(truth, at, { ...options, noise }), FORCE);
      const off = found[key].value! - stated[key].value!;
      one += off;
      two += off * off;
    }
    const spread = Math.sqrt(two / runs - (one / runs) ** 2);
    expect(Math.abs(stated[key].u! / spread - 1)).toBeLessThan(0.1);
  }
});

describe('what is missing is said', () => {
  const read = (frequencies: readonly number[]) => readHalfPower(simulatedDwells(truth, frequencies), FORCE);
  it.each([
    ['too few dwells', [4.8, 5, 5.2], 'needs 5 dwells'],
    ['one flank', evenly(4, 4.9, 6), 'both sides of the peak'],
    ['no half-power point below', [4.85, 4.9, 4.95, 5, 5.1, 5.2, 5.4], 'further below'],
    ['no half-power point above', [4.4, 4.6, 4.8, 4.95, 5, 5.1], 'further above'],
  ])('%s', (_, frequencies, sentence) => {
    const found = read(frequencies);
    expect(found.missing).toContain(sentence);
    expect(found.damping).toEqual({ value: null, u: null });
  });

  it('amplitudes without uncertainty: values, no uncertainty', () => {
    const found = readHalfPower(
      simulatedDwells(truth, evenly(4.2, 5.8, 9), { uAmplitude: () => null }),
      FORCE,
    );
    expect(found.damping.value).toBeCloseTo(0.05, 8);
    expect(found.damping.u).toBeNull();
  });
});
