import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { solveFit, solveFrom } from '../../src/resonance/fit-solve.ts';
import { DAMPINGS, EXCITATIONS } from '../../src/resonance/models.ts';
import { gatherObservations } from '../../src/resonance/observations.ts';
import { layoutParameters } from '../../src/resonance/parameter-layout.ts';
import type { FitMode } from '../../src/resonance/resonance-points.ts';
import { evaluateStart, startsFromGrid } from '../../src/resonance/start-grid.ts';
import { startFromAmplitudes, startFromLags } from '../../src/resonance/start-quadratic.ts';
import { evenly, simulatedDwells } from './simulated-dwells.ts';

const MODELS = EXCITATIONS.flatMap((excitation) => DAMPINGS.map((damping) => ({ excitation, damping })));
const NO_TERMS = { rigidOffset: false, slowResidual: false };

describe('linear start values are exact on exact dwells', () => {
  it.each(MODELS.filter((model) => model.excitation !== 'base'))('$excitation, $damping', (model) => {
    const truth = { model, staticGain: 0.7, naturalHz: 31, damping: 0.08 };
    const observations = gatherObservations(
      simulatedDwells(truth, [27, 30, 33.5], { withLag: true }),
      'complex',
    );
    const byAmplitude = startFromAmplitudes(model, observations)!;
    expect(byAmplitude.naturalHz).toBeCloseTo(31, 7);
    expect(byAmplitude.damping).toBeCloseTo(0.08, 8);
    const byLag = startFromLags(model, observations)!;
    expect(byLag.naturalHz).toBeCloseTo(31, 7);
    expect(byLag.damping).toBeCloseTo(0.08, 8);
    const { gain, cost } = evaluateStart(model, observations, byLag)!;
    expect(gain).toBeCloseTo(0.7, 8);
    expect(cost).toBeLessThan(1e-9);
  });
});

it('the grid alone comes near enough for the solver, for every model', () => {
  for (const model of MODELS) {
    const truth = { model, staticGain: 0.7, naturalHz: 31, damping: 0.05 };
    const observations = gatherObservations(simulatedDwells(truth, evenly(26, 37, 9)), 'amplitude');
    const start = startsFromGrid(model, observations)[0]!;
    const layout = layoutParameters(model, 'amplitude', NO_TERMS, 31);
    const { solution } = solveFrom(
      layout,
      observations,
      Float64Array.of(start.gain, start.naturalHz, start.damping),
    );
    expect(solution.converged).toBe(true);
    expect(Math.abs(solution.parameters[1]! / 31 - 1)).toBeLessThan(1e-8);
  }
});

describe('our own start values never end in a worse minimum than starting from the truth does', () => {
  it.each(['amplitude', 'lag', 'complex'] as const)('150 random noisy tests, %s', (mode: FitMode) => {
    const random = seededRandom(mode.length);
    let compared = 0;
    for (let run = 0; run < 150; run++) {
      const model = MODELS[run % MODELS.length]!;
      const damping = 0.002 * 100 ** random.uniform();
      const naturalHz = 1 + 40 * random.uniform();
      const count = 4 + Math.floor(9 * random.uniform());
      // dwells from five half-widths below to five above, at random
      const frequencies = Array.from(
        { length: count },
        () => naturalHz * Math.exp((random.uniform() - 0.5) * 10 * damping),
      );
      const points = simulatedDwells({ model, staticGain: 0.3, naturalHz, damping }, frequencies, {
        withLag: true,
        uAmplitude: (a) => 0.02 * a,
        uLagDeg: 1.2,
        noise: random.normal,
      });
      const observations = gatherObservations(points, mode);
      const layout = layoutParameters(model, mode, NO_TERMS, naturalHz);
      const truth = mode === 'lag' ? [naturalHz, damping] : [0.3, naturalHz, damping];
      const fromTruth = solveFrom(layout, observations, Float64Array.from(truth)).solution;
      const own = solveFit(layout, observations)!.solution;
      if (!fromTruth.converged) continue;
      compared++;
      expect(own.converged).toBe(true);
      expect(own.residualSumOfSquares!).toBeLessThan(fromTruth.residualSumOfSquares! * (1 + 1e-6) + 1e-9);
    }
    expect(compared).toBeGreaterThan(120);
  });
});
