import { describe, expect, it } from 'vitest';
import { EXCITATIONS } from '../../src/resonance/models.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import type { FitMode, ResonancePoint } from '../../src/resonance/resonance-points.ts';
import { evenly, type SimulatedTruth, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const truth: SimulatedTruth = {
  model: { excitation: 'force', damping: 'viscous' },
  staticGain: 0.5,
  naturalHz: 5,
  damping: 0.03,
};

/** Walks a result and fails at the first number that is NaN. */
function expectNoNaN(value: unknown, path = 'fit'): void {
  if (typeof value === 'number') expect(value, path).not.toBeNaN();
  else if (value !== null && typeof value === 'object') {
    for (const [key, part] of Object.entries(value)) expectNoNaN(part, `${path}.${key}`);
  }
}

/** The refusal: a sentence, and not one number anywhere in the result. */
function refused(points: readonly ResonancePoint[], mode?: FitMode): string {
  const fit = fitResonance(points, { excitation: 'force', ...(mode === undefined ? {} : { mode }) });
  expect(fit.missing).not.toBeNull();
  for (const quantity of Object.values(fit.quantities)) expect(quantity).toEqual({ value: null, u: null });
  for (const parameter of fit.parameters) expect(parameter).toEqual({ value: null, u: null });
  expect([fit.covariance, fit.chi2, fit.dof, fit.aicc, fit.scatter, fit.coverageFactor]).toEqual(
    Array(6).fill(null),
  );
  expect(fit.points.every((point) => point.amplitude === null)).toBe(true);
  expectNoNaN(fit);
  return fit.missing!;
}

describe('what is missing is said, and nothing else', () => {
  it('no dwells, one, two', () => {
    expect(refused([])).toContain('3 different drive frequencies or more; there are none');
    expect(refused(simulatedDwells(truth, [5]))).toContain('there is 1');
    expect(refused(simulatedDwells(truth, [4.9, 5.1]))).toContain('there are 2');
  });

  it('one dwell with lag', () => {
    expect(refused(simulatedDwells(truth, [5], { withLag: true }), 'complex')).toContain('2 different');
  });

  it('all dwells at one drive frequency', () => {
    expect(refused(simulatedDwells(truth, [5, 5, 5, 5, 5]))).toContain('repeats at one frequency count once');
  });

  it('amplitudes all equal', () => {
    const flat = evenly(4, 6, 7).map((driveHz) => ({
      driveHz,
      amplitude: { value: 2, u: 0.01 },
      lagDeg: null,
    }));
    expect(refused(flat)).toContain('The amplitudes do not differ by more than their uncertainty');
    expect(refused(flat.map((point) => ({ ...point, amplitude: { value: 2, u: null } })))).toContain(
      'do not differ',
    );
  });

  it('amplitudes that are noise about a constant', () => {
    const noise = seededNormal(3);
    const flat = evenly(4, 6, 9).map((driveHz) => ({
      driveHz,
      amplitude: { value: 2 + 0.1 * noise(), u: 0.1 },
      lagDeg: null,
    }));
    expect(refused(flat)).toContain('no resonance shows there');
  });

  it.each([
    ['below', evenly(3, 4.6, 8), 'Add dwells above'],
    ['above', evenly(5.5, 8, 8), 'Add dwells below'],
  ] as const)('all dwells %s the resonance, exact or noisy', (_, frequencies, advice) => {
    expect(refused(simulatedDwells(truth, frequencies))).toContain(advice);
    const noise = seededNormal(4);
    for (let run = 0; run < 20; run++) {
      expect(refused(simulatedDwells(truth, frequencies, { noise }))).toContain(advice);
    }
  });

  it('all excluded', () => {
    const points = simulatedDwells(truth, evenly(4, 6, 9)).map((point) => ({ ...point, excluded: true }));
    expect(refused(points)).toContain('there are none');
  });

  it('amplitudes missing or not positive count as not measured', () => {
    const points = simulatedDwells(truth, [4.8, 5, 5.2]).map((point, i) =>
      i === 1 ? { ...point, amplitude: { value: null, u: null } } : point,
    );
    expect(refused(points)).toContain('there are 2');
  });

  it('lags of the wrong sign are recognised', () => {
    const points = simulatedDwells(truth, evenly(4.5, 5.5, 9), { withLag: true }).map((point) => ({
      ...point,
      lagDeg: { value: -point.lagDeg!.value!, u: point.lagDeg!.u },
    }));
    expect(refused(points, 'complex')).toContain('the response seems to lead');
    expect(refused(points, 'lag')).toContain('the response seems to lead');
  });

  it('rigid offset and slow residual need more dwells, and the number is said', () => {
    const points = simulatedDwells(truth, evenly(4.5, 5.5, 6));
    const fit = fitResonance(points, { excitation: 'force', rigidOffset: true, slowResidual: true });
    expect(fit.missing).toContain('7 different drive frequencies or more; there are 6');
  });
});

describe('what is enough is fitted', () => {
  it('lag places the resonance from one side once it has turned far', () => {
    const points = simulatedDwells(truth, evenly(4.5, 4.95, 8), { withLag: true });
    expect(fitResonance(points, { excitation: 'force' }).quantities.naturalHz.value).toBeCloseTo(5, 6);
  });

  it('three dwells with the peak between the last two', () => {
    const fit = fitResonance(simulatedDwells(truth, [4.6, 4.95, 5.02]), { excitation: 'force' });
    expect(fit.quantities.naturalHz.value).toBeCloseTo(5, 6);
  });

  it('dwells far from the peak on both sides: natural frequency yes, damping no', () => {
    const noise = seededNormal(8);
    const light = { ...truth, damping: 0.002 };
    const points = simulatedDwells(light, [4, 4.2, 4.4, 5.6, 5.8, 6], { noise, uAmplitude: (a) => 0.03 * a });
    expect(refused(points)).toContain('do not come close enough to the peak, near 4.98');
  });

  it('a damping lost in its uncertainty is not given, the natural frequency is', () => {
    const light = { ...truth, damping: 0.01 };
    const points = simulatedDwells(light, [4, 4.4, 4.75, 5.25, 5.6, 6], { uAmplitude: (a) => 0.05 * a });
    const fit = fitResonance(points, { excitation: 'force' });
    expect(fit.missing).toBeNull();
    expect(fit.quantities.naturalHz.value).toBeCloseTo(5, 6);
    for (const key of ['dampingRatio', 'q', 'peakAmplitude', 'bandwidthHz'] as const) {
      expect(fit.quantities[key]).toEqual({ value: null, u: null });
    }
    expect(fit.intervals.damping!.lower).toBe(0);
    expect(fit.intervals.damping!.upper!).toBeGreaterThan(0.01);
    expect(fit.warnings.join(' ')).toContain('damping cannot be told from zero');
  });
});

it('no random test ends in NaN or a number without grounds (200 seeded tests of all kinds)', () => {
  const noise = seededNormal(77);
  const half = () => Math.abs(noise());
  for (let run = 0; run < 200; run++) {
    const excitation = EXCITATIONS[run % 5]!;
    const naturalHz = 2 + half();
    const frequencies = Array.from({ length: 2 + (run % 7) }, () => naturalHz * Math.exp(0.2 * noise()));
    const points = simulatedDwells(
      {
        model: { excitation, damping: 'viscous' },
        staticGain: half(),
        naturalHz,
        damping: 0.02 + 0.1 * half(),
      },
      frequencies,
      { withLag: run % 3 === 0, noise, uAmplitude: (a) => 0.3 * a },
    );
    const fit = fitResonance(points, { excitation });
    expectNoNaN(fit);
    if (fit.missing === null) {
      expect(fit.quantities.naturalHz.u!).toBeLessThanOrEqual(0.2 * fit.quantities.naturalHz.value!);
    } else {
      expect(fit.missing).toMatch(/^[A-Z].*\.$/);
      expect(fit.quantities.naturalHz.value).toBeNull();
    }
  }
});
