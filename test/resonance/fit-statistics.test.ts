import { describe, expect, it } from 'vitest';
import { invertSymmetric } from '../../src/numeric/linear-algebra.ts';
import { bootstrapCheck } from '../../src/resonance/bootstrap-check.ts';
import { fitProblem } from '../../src/resonance/fit-problem.ts';
import { gatherObservations } from '../../src/resonance/observations.ts';
import { layoutParameters } from '../../src/resonance/parameter-layout.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import type { FitMode, ResonancePoint } from '../../src/resonance/resonance-points.ts';
import { evenly, type SimulatedTruth, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const truth: SimulatedTruth = {
  model: { excitation: 'force', damping: 'viscous' },
  staticGain: 0.5,
  naturalHz: 5,
  damping: 0.03,
};
const VALUES = [0.5, 5, 0.03];
const U_MM = 0.06; // 0.7 % of the peak amplitude
const frequencies = evenly(4.6, 5.4, 12);

function simulate(seed: number, runs: number): ResonancePoint[][] {
  const noise = seededNormal(seed);
  return Array.from({ length: runs }, () =>
    simulatedDwells(truth, frequencies, { withLag: true, uAmplitude: () => U_MM, noise }),
  );
}

/** Cramer-Rao bound: standard deviations from the Fisher information at the true parameters. */
function cramerRao(mode: FitMode): number[] {
  const points = simulatedDwells(truth, frequencies, { withLag: true, uAmplitude: () => U_MM });
  const observations = gatherObservations(points, mode);
  const layout = layoutParameters(truth.model, mode, { rigidOffset: false, slowResidual: false }, 5);
  const rows = observations.value.length;
  const jacobian = new Float64Array(rows * 3);
  fitProblem(layout, observations).jacobian(Float64Array.from(VALUES), jacobian);
  const information = new Float64Array(9);
  for (let i = 0; i < rows; i++) {
    for (let k = 0; k < 9; k++)
      information[k]! += jacobian[3 * i + Math.floor(k / 3)]! * jacobian[3 * i + (k % 3)]!;
  }
  const bound = invertSymmetric(information, 3)!;
  return [0, 4, 8].map((k) => Math.sqrt(bound[k]!));
}

describe('1500 simulated tests against the Cramer-Rao bound: RMS error at most 1.05 times it', () => {
  it.each([
    ['amplitude', 200],
    ['complex', 201],
  ] as const)('%s', (mode, seed) => {
    const squares = [0, 0, 0];
    const tests = simulate(seed, 1500);
    for (const points of tests) {
      const fit = fitResonance(points, { excitation: 'force', mode, intervals: false });
      fit.parameters.forEach(({ value }, j) => {
        squares[j]! += (value! - VALUES[j]!) ** 2;
      });
    }
    cramerRao(mode).forEach((bound, j) => {
      const ratio = Math.sqrt(squares[j]! / tests.length) / bound;
      expect(ratio).toBeLessThan(1.05);
      expect(ratio).toBeGreaterThan(0.95); // better than the bound would mean that the test is wrong
    });
  });
});

describe('500 simulated tests: 95 % intervals hold the truth in 92 to 98 %', () => {
  it.each([
    ['amplitude, own uncertainties', 'amplitude', true, 300],
    ['amplitude, uncertainty from scatter', 'amplitude', false, 301],
    ['complex, own uncertainties', 'complex', true, 302],
  ] as const)('%s', (_, mode, keepU, seed) => {
    const byProfile = [0, 0, 0];
    const byCovariance = [0, 0, 0];
    for (const points of simulate(seed, 500)) {
      const given = keepU
        ? points
        : points.map((point) => ({ ...point, amplitude: { value: point.amplitude.value, u: null } }));
      const { intervals, parameters, coverageFactor } = fitResonance(given, { excitation: 'force', mode });
      [intervals.staticGain, intervals.naturalHz, intervals.damping].forEach((interval, j) => {
        const { value, u } = parameters[j]!;
        if (interval!.lower! <= VALUES[j]! && VALUES[j]! <= interval!.upper!) byProfile[j]!++;
        if (Math.abs(value! - VALUES[j]!) <= coverageFactor! * u!) byCovariance[j]!++;
      });
    }
    for (const count of [...byProfile, ...byCovariance]) {
      expect(count / 500).toBeGreaterThanOrEqual(0.92);
      expect(count / 500).toBeLessThanOrEqual(0.98);
    }
  });
});

describe('profile intervals', () => {
  const points = simulate(400, 1)[0]!;

  it('the sum of squares at a bound, minimised over the others, is higher by k^2', () => {
    const fit = fitResonance(points, { excitation: 'force', mode: 'amplitude' });
    // scan of the other two parameters on a fine grid: slow, and free of our solver
    const bound = fit.intervals.naturalHz!.upper!;
    const sum = (gain: number, zeta: number) =>
      points.reduce((total, { driveHz, amplitude }) => {
        const r = driveHz / bound;
        const model = gain / Math.hypot(1 - r * r, 2 * zeta * r);
        return total + ((model - amplitude.value!) / U_MM) ** 2;
      }, 0);
    let least = Number.POSITIVE_INFINITY;
    const [gain, zeta] = [fit.parameters[0]!, fit.parameters[2]!];
    for (let a = -3; a <= 3; a += 0.02) {
      for (let b = -3; b <= 3; b += 0.02) {
        least = Math.min(least, sum(gain.value! + a * gain.u!, zeta.value! + b * zeta.u!));
      }
    }
    expect(Math.abs(least - fit.chi2! - 1.959964 ** 2)).toBeLessThan(0.02);
  });

  it('are asymmetric where the data make it so: few, noisy dwells', () => {
    const noise = seededNormal(9);
    const few = simulatedDwells(truth, [4.7, 4.9, 5.1, 5.3], { uAmplitude: (a) => 0.08 * a, noise });
    const { intervals, quantities } = fitResonance(few, { excitation: 'force' });
    const below = quantities.dampingRatio.value! - intervals.damping!.lower!;
    const above = intervals.damping!.upper! - quantities.dampingRatio.value!;
    expect(Math.abs(above / below - 1)).toBeGreaterThan(0.05);
  });
});

describe('bootstrap check', () => {
  it('agrees with the covariance on a good test, and is repeatable', () => {
    const points = simulate(500, 1)[0]!;
    const fit = fitResonance(points, { excitation: 'force' });
    const check = bootstrapCheck(fit, points, 400, 7)!;
    expect(check.agrees).toBe(true);
    check.standardDeviations.forEach((deviation, j) => {
      expect(Math.abs(deviation / fit.parameters[j]!.u! - 1)).toBeLessThan(0.15); // 400 repeats: 3.5 % each
    });
    expect(bootstrapCheck(fit, points, 400, 7)).toEqual(check);
  });

  it('warns where the covariance is not to be trusted', () => {
    const weak = simulatedDwells(truth, [4.5, 4.8, 5.2, 5.5], { uAmplitude: (a) => 0.11 * a });
    const fit = fitResonance(weak, { excitation: 'force' });
    const check = bootstrapCheck(fit, weak, 400, 7)!;
    expect(check.agrees).toBe(false);
    expect(check.sentence).toContain('trust the intervals');
  });

  it('has nothing to say about a fit without numbers', () => {
    expect(bootstrapCheck(fitResonance([], { excitation: 'force' }), [])).toBeNull();
  });
});
