import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { DAMPINGS, type Damping, EXCITATIONS, type Excitation } from '../../src/resonance/models.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import type { FitMode, ResonancePoint } from '../../src/resonance/resonance-points.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const DEG = 180 / Math.PI;
const data = (name: string): unknown =>
  JSON.parse(readFileSync(new URL(`../data/${name}.json`, import.meta.url), 'utf8'));
const relative = (found: number | null | undefined, expected: number) =>
  Math.abs((found ?? Number.NaN) / expected - 1);

interface ReferenceSet {
  readonly f: number[];
  readonly amp: number[];
  readonly u_amp: number[];
  readonly phase: number[];
  readonly u_phase: number[];
  readonly fit_amplitude_only: ReferenceFit;
  readonly fit_amplitude_and_phase: ReferenceFit;
}
interface ReferenceFit {
  readonly Y: number;
  readonly fn: number;
  readonly zeta: number;
  readonly u: number[];
  readonly chi2: number;
  readonly dof: number;
  readonly corr_Y_zeta?: number;
}
const reference = data('resonance_fit') as ReferenceSet;
const referencePoints: ResonancePoint[] = reference.f.map((driveHz, i) => ({
  driveHz,
  amplitude: { value: reference.amp[i]!, u: reference.u_amp[i]! },
  lagDeg: { value: -reference.phase[i]! * DEG, u: reference.u_phase[i]! * DEG },
}));

describe('twelve dwells with a reference fit by scipy and a Gauss-Newton polish, to 1e-6', () => {
  it.each([
    ['amplitude', reference.fit_amplitude_only],
    ['complex', reference.fit_amplitude_and_phase],
  ] as const)('%s', (mode, expected) => {
    const fit = fitResonance(referencePoints, { excitation: 'force', mode });
    const { staticGain, naturalHz, dampingRatio } = fit.quantities;
    expect(relative(staticGain.value, expected.Y)).toBeLessThan(1e-6);
    expect(relative(naturalHz.value, expected.fn)).toBeLessThan(1e-6);
    expect(relative(dampingRatio.value, expected.zeta)).toBeLessThan(1e-6);
    [staticGain, naturalHz, dampingRatio].forEach(({ u }, j) => {
      expect(relative(u, expected.u[j]!)).toBeLessThan(1e-6);
    });
    expect(relative(fit.chi2, expected.chi2)).toBeLessThan(1e-6);
    expect(fit.dof).toBe(expected.dof);
    if (expected.corr_Y_zeta !== undefined) {
      expect(fit.correlation[0]![2]).toBeCloseTo(expected.corr_Y_zeta, 6);
    }
  });

  it('the lag halves the uncertainty of the natural frequency', () => {
    const u = (mode: FitMode) =>
      fitResonance(referencePoints, { excitation: 'force', mode }).quantities.naturalHz.u!;
    expect(u('complex') / u('amplitude')).toBeLessThan(0.55);
  });
});

interface ScipySet {
  readonly name: string;
  readonly excitation: Excitation;
  readonly damping: Damping;
  readonly mode: FitMode;
  readonly absolute_sigma: boolean;
  readonly driveHz: number[];
  readonly amplitude: number[];
  readonly u_amplitude: number[];
  readonly lag_rad: number[] | null;
  readonly u_lag_rad: number[] | null;
  readonly fit: {
    readonly parameters: number[];
    readonly covariance: number[][];
    readonly chi2: number;
    readonly profile_95: [number, number][] | null;
  };
}

describe('scipy.optimize.curve_fit (make_resonance_scipy.py): values and covariance, started by ourselves', () => {
  const { sets } = data('resonance_scipy') as { sets: ScipySet[] };
  it.each(sets)('$name', (set) => {
    const points = set.driveHz.map((driveHz, i) => ({
      driveHz,
      amplitude: { value: set.amplitude[i]!, u: set.u_amplitude[i]! },
      lagDeg: set.lag_rad === null ? null : { value: set.lag_rad[i]! * DEG, u: set.u_lag_rad![i]! * DEG },
    }));
    const fit = fitResonance(points, {
      excitation: set.excitation,
      damping: set.damping,
      mode: set.mode,
      weighting: set.absolute_sigma ? 'absolute' : 'scatter',
    });
    expect(fit.missing).toBeNull();
    set.fit.parameters.forEach((value, j) => {
      expect(relative(fit.parameters[j]!.value, value)).toBeLessThan(1e-6);
      // curve_fit takes its Jacobian by forward differences, good to some 1e-5
      expect(relative(fit.parameters[j]!.u, Math.sqrt(set.fit.covariance[j]![j]!))).toBeLessThan(1e-4);
    });
    expect(relative(fit.chi2, set.fit.chi2)).toBeLessThan(1e-8);
    // profile bounds (scipy: brentq over least_squares) to a thousandth of the standard uncertainty
    const { staticGain, naturalHz, damping } = fit.intervals;
    set.fit.profile_95?.forEach(([lower, upper], j) => {
      const found = [staticGain, naturalHz, damping][j]!;
      const accuracy = 1e-3 * fit.parameters[j]!.u!;
      expect(Math.abs(found.lower! - lower)).toBeLessThan(accuracy);
      expect(Math.abs(found.upper! - upper)).toBeLessThan(accuracy);
    });
  });
});

describe('exact dwells give back the truth, whatever the model', () => {
  const models = EXCITATIONS.flatMap((excitation) => DAMPINGS.map((damping) => ({ excitation, damping })));
  const modes: FitMode[] = ['amplitude', 'lag', 'complex'];
  it.each(models.flatMap((model) => modes.map((mode) => ({ ...model, mode }))))(
    '$excitation, $damping, $mode',
    ({ excitation, damping, mode }) => {
      for (const loss of [0.004, 0.05, 0.2]) {
        const truth = { model: { excitation, damping }, staticGain: 1.7, naturalHz: 7.3, damping: loss };
        const width = Math.max(2.5 * loss, 0.02);
        const points = simulatedDwells(truth, evenly(7.3 * (1 - width), 7.3 * (1 + width), 9), {
          withLag: true,
        });
        const fit = fitResonance(points, { excitation, damping, mode });
        expect(fit.missing).toBeNull();
        const { naturalHz, dampingRatio, lossFactor, staticGain } = fit.quantities;
        expect(relative(naturalHz.value, 7.3)).toBeLessThan(1e-8);
        expect(relative((damping === 'viscous' ? dampingRatio : lossFactor).value, loss)).toBeLessThan(1e-6);
        if (mode === 'lag') expect(staticGain).toEqual({ value: null, u: null });
        else expect(relative(staticGain.value, 1.7)).toBeLessThan(1e-6);
      }
    },
  );

  it('three dwells are enough for amplitudes, two with lag', () => {
    const truth = {
      model: { excitation: 'force', damping: 'viscous' } as const,
      staticGain: 0.4,
      naturalHz: 4,
      damping: 0.03,
    };
    const three = fitResonance(simulatedDwells(truth, [3.8, 4.02, 4.15]), { excitation: 'force' });
    expect(relative(three.quantities.dampingRatio.value, 0.03)).toBeLessThan(1e-8);
    expect(three.warnings.join(' ')).toContain('cannot be checked');
    const two = fitResonance(simulatedDwells(truth, [3.9, 4.1], { withLag: true }), { excitation: 'force' });
    expect(relative(two.quantities.naturalHz.value, 4)).toBeLessThan(1e-8);
  });

  it('rigid offset and slow residual are found beside the resonance', () => {
    const truth = {
      model: { excitation: 'force', damping: 'viscous' } as const,
      staticGain: 0.4,
      naturalHz: 4,
      damping: 0.03,
    };
    const points = simulatedDwells(truth, evenly(3, 5, 15), { withLag: true }).map((point) => {
      const angle = -point.lagDeg!.value! / DEG;
      const re = point.amplitude.value! * Math.cos(angle) + 0.3 + 0.2 * (point.driveHz / 4 - 1);
      const im = point.amplitude.value! * Math.sin(angle) - 0.2 - 0.1 * (point.driveHz / 4 - 1);
      return {
        ...point,
        amplitude: { value: Math.hypot(re, im), u: 0.01 },
        lagDeg: { value: -Math.atan2(im, re) * DEG, u: 0.3 },
      };
    });
    const fit = fitResonance(points, { excitation: 'force', rigidOffset: true, slowResidual: true });
    const expected = [0.4, 4, 0.03, 0.3, -0.2, 0.2, -0.1];
    fit.parameters.forEach(({ value }, j) => {
      expect(relative(value, expected[j]!)).toBeLessThan(1e-6);
    });
    expect(fit.formula).toContain('+ R + S · (f/fm − 1)');
    expect(fitResonance(points, { excitation: 'force' }).lackOfFit!.pValue).toBeLessThan(1e-6);
  });
});

describe('identities', () => {
  const noise = seededNormal(41);
  const truth = {
    model: { excitation: 'force', damping: 'viscous' } as const,
    staticGain: 0.7,
    naturalHz: 12,
    damping: 0.04,
  };
  const points = simulatedDwells(truth, evenly(10, 14, 12), { withLag: true, noise });
  const fit = fitResonance(points, { excitation: 'force' });
  const scaled = (amplitude: number, frequency: number) =>
    points.map((point) => ({
      ...point,
      driveHz: point.driveHz * frequency,
      amplitude: { value: point.amplitude.value! * amplitude, u: point.amplitude.u! * amplitude },
    }));

  it('amplitudes in other units move the static gain alone', () => {
    const other = fitResonance(scaled(1e-6, 1), { excitation: 'force' });
    expect(relative(other.quantities.staticGain.value, fit.quantities.staticGain.value! * 1e-6)).toBeLessThan(
      1e-9,
    );
    expect(relative(other.quantities.naturalHz.value, fit.quantities.naturalHz.value!)).toBeLessThan(1e-10);
    expect(relative(other.quantities.dampingRatio.u, fit.quantities.dampingRatio.u!)).toBeLessThan(1e-8);
  });

  it('ten times the frequency is ten times the natural frequency and the same damping', () => {
    const other = fitResonance(scaled(1, 10), { excitation: 'force' });
    expect(relative(other.quantities.naturalHz.value, 10 * fit.quantities.naturalHz.value!)).toBeLessThan(
      1e-10,
    );
    expect(relative(other.quantities.dampingRatio.value, fit.quantities.dampingRatio.value!)).toBeLessThan(
      1e-9,
    );
  });

  it('twice the uncertainty is twice the standard error at the same values', () => {
    const wider = points.map((point) => ({
      ...point,
      amplitude: { ...point.amplitude, u: 2 * point.amplitude.u! },
      lagDeg: { value: point.lagDeg!.value, u: 2 * point.lagDeg!.u! },
    }));
    const other = fitResonance(wider, { excitation: 'force' });
    expect(relative(other.quantities.naturalHz.u, 2 * fit.quantities.naturalHz.u!)).toBeLessThan(1e-6);
    expect(relative(other.quantities.naturalHz.value, fit.quantities.naturalHz.value!)).toBeLessThan(1e-10);
  });

  it('the order of the dwells and whole turns of the lag change nothing', () => {
    const turned = [...points]
      .reverse()
      .map((point) => ({ ...point, lagDeg: { value: point.lagDeg!.value! - 360, u: point.lagDeg!.u } }));
    const other = fitResonance(turned, { excitation: 'force' });
    expect(relative(other.quantities.naturalHz.value, fit.quantities.naturalHz.value!)).toBeLessThan(1e-10);
  });

  it('an error common to all amplitudes enters static gain and peak amplitude only', () => {
    const other = fitResonance(points, { excitation: 'force', commonRelativeU: 0.02 });
    const own = fit.quantities;
    const both = other.quantities;
    const expected = Math.hypot(own.staticGain.u!, 0.02 * own.staticGain.value!);
    expect(relative(both.staticGain.u, expected)).toBeLessThan(1e-9);
    expect(both.peakAmplitude.u!).toBeGreaterThan(1.5 * own.peakAmplitude.u!);
    for (const key of ['naturalHz', 'dampingRatio', 'q', 'bandwidthHz', 'peakHz'] as const) {
      expect(both[key]).toEqual(own[key]);
    }
    expect(other.covariance).toEqual(fit.covariance);
    const width = (f: typeof fit) => f.intervals.staticGain!.upper! - f.intervals.staticGain!.lower!;
    expect(width(other)).toBeGreaterThan(1.5 * width(fit));
  });

  it('excluded dwells are shown beside the curve and not fitted', () => {
    const bumped = { ...points[3]!, amplitude: { value: 99, u: 0.01 }, excluded: 'bumped the bench' };
    const all = [...points, bumped];
    const other = fitResonance(all, { excitation: 'force' });
    expect(other.quantities).toEqual(fit.quantities);
    expect(other.points).toHaveLength(all.length);
    expect(other.points.at(-1)).toMatchObject({ used: false, weight: 0, amplitudeResidual: null });
    expect(other.points.at(-1)!.amplitude).toBeGreaterThan(0);
  });
});

it('an option out of range is refused by name', () => {
  expect(() => fitResonance([], { excitation: 'force', commonRelativeU: -1 })).toThrow(InputError);
  expect(() => fitResonance([], { excitation: 'force', confidence: 95 })).toThrow('between 0 and 1');
  expect(() => fitResonance([], { excitation: 'force', movingMassKg: { value: 0, u: null } })).toThrow(
    '0 kg',
  );
});
