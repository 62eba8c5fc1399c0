import { describe, expect, it } from 'vitest';
import {
  chooseFrequencies,
  type FrequencyChoice,
  refineFrequencies,
} from '../../src/plan/choose-frequencies.ts';
import { promisedU } from '../../src/plan/design-criterion.ts';
import { addDwell, informationOf, noInformation, type Oscillator } from '../../src/plan/dwell-information.ts';
import type { PlanSetting } from '../../src/plan/plan-points.ts';
import reference from '../data/resonance_fit.json' with { type: 'json' };

const oscillator = (dampingRatio: number): Oscillator => ({ gain: 1, naturalHz: 1, dampingRatio });

const setting = (
  relative: number,
  floorMm: number,
  observed: PlanSetting['observed'] = 'amplitude',
): PlanSetting => ({
  model: { excitation: 'force', damping: 'viscous' },
  observed,
  noise: { relative, floorMm },
});

/** Candidates well around the resonance; what is held is next to nothing, so that three dwells decide. */
function best(
  zeta: number,
  count: number,
  plan: PlanSetting,
  goal: FrequencyChoice['goal'] = 'all',
): number[] {
  const candidates = Array.from({ length: 161 }, (_, i) => 1 + zeta * (-4 + i / 20));
  const faint = noInformation(plan.observed);
  for (let i = 0; i < 16; i += 5) faint[i]! += 1e-9;
  const choice: FrequencyChoice = {
    setting: plan,
    oscillators: [oscillator(zeta)],
    held: [faint],
    goal,
    candidates,
    count,
    leastSpacingHz: 0,
  };
  const rangeHz = [candidates[0]!, candidates.at(-1)!] as const;
  const how = { reachHz: zeta / 10, toleranceHz: 1e-7, rounds: 60, rangeHz };
  return refineFrequencies(choice, chooseFrequencies(choice), how);
}

describe('most telling frequencies', () => {
  it.each([
    [0.02, [0.979392, 0.9996, 1.019408]],
    [0.1, [0.883743, 0.989949, 1.085817]],
  ])(
    'damping %d, constant noise: the half-power points and the peak (derived; scipy Nelder-Mead agrees)',
    (zeta, wanted) => {
      const found = best(zeta, 3, setting(0, 0.01));
      found.forEach((driveHz, i) => {
        expect(Math.abs(driveHz - wanted[i]!)).toBeLessThan(2e-5);
      });
    },
  );

  it('noise in proportion to amplitude: three frequencies 120 degrees apart on the response circle (derived)', () => {
    const zeta = 0.02;
    const span = 2 * zeta * Math.sqrt(1 - zeta ** 2);
    const angles = best(zeta, 3, setting(0.01, 0)).map(
      (f) => (2 * Math.atan((f ** 2 - (1 - 2 * zeta ** 2)) / span) * 180) / Math.PI,
    );
    expect(angles[1]! - angles[0]!).toBeCloseTo(120, 0);
    expect(angles[2]! - angles[1]!).toBeCloseTo(120, 0);
  });

  it('amplitude and lag from an unknown zero: two dwells at 0.577 half-bandwidths, lag 30 degrees off (derived)', () => {
    const zeta = 0.005;
    const found = best(zeta, 2, setting(0, 10, 'amplitude-and-lag-from-unknown-zero'));
    const halfWidths = (Math.abs(found[0]! - 1) + Math.abs(found[1]! - 1)) / 2 / zeta;
    expect(Math.abs(halfWidths - 1 / Math.sqrt(3))).toBeLessThan(2e-3);
  });
});

describe('promised uncertainties', () => {
  // nine dwells, damping 0.02, noise 1 % of the peak: relative sd of gain, natural frequency and damping
  const even = (span: number) => Array.from({ length: 9 }, (_, i) => 1 + span * (i / 4 - 1));
  it.each([
    ['evenly over +-20 %', even(0.2), [0.017395, 0.001048, 0.020616]],
    ['evenly over +-2 zeta', even(0.04), [0.012336, 0.000239, 0.017303]],
    [
      'three each at 1 - zeta, 1, 1 + zeta',
      [0.98, 0.98, 0.98, 1, 1, 1, 1.02, 1.02, 1.02],
      [0.012902, 0.000231, 0.016329],
    ],
  ])('%s (derived; numpy with central differences agrees)', (_, frequencies, wanted) => {
    const information = noInformation('amplitude');
    for (const driveHz of frequencies) addDwell(information, setting(0, 0.25), oscillator(0.02), driveHz);
    const u = promisedU(information)!;
    expect(Math.abs(u.gain - wanted[0]!)).toBeLessThan(2e-6);
    expect(Math.abs(u.naturalHz - wanted[1]!)).toBeLessThan(2e-6);
    expect(Math.abs(u.dampingRatio - wanted[2]!)).toBeLessThan(2e-6);
  });

  it('at a fitted resonance they are the uncertainties of the fit, amplitude only (resonance_fit.json, scipy)', () => {
    const { Y, fn, zeta, u } = reference.fit_amplitude_only;
    const points = reference.f.map((driveHz, i) => ({
      driveHz,
      amplitudeMm: reference.amp[i]!,
      uAmplitudeMm: reference.u_amp[i]!,
    }));
    const information = informationOf(setting(0, 1), { gain: Y, naturalHz: fn, dampingRatio: zeta }, points);
    const promised = promisedU(information)!;
    expect((promised.gain * Y) / u[0]!).toBeCloseTo(1, 3);
    expect((promised.naturalHz * fn) / u[1]!).toBeCloseTo(1, 3);
    expect((promised.dampingRatio * zeta) / u[2]!).toBeCloseTo(1, 3);
  });

  it('with the lag: those of the fit with amplitude and phase, to the 2 milliradians kept back', () => {
    const { Y, fn, zeta, u } = reference.fit_amplitude_and_phase;
    const points = reference.f.map((driveHz, i) => ({
      driveHz,
      amplitudeMm: reference.amp[i]!,
      uAmplitudeMm: reference.u_amp[i]!,
      lagDeg: (-reference.phase[i]! * 180) / Math.PI,
      uLagDeg: (reference.u_phase[i]! * 180) / Math.PI,
    }));
    const promised = promisedU(
      informationOf(setting(0, 1), { gain: Y, naturalHz: fn, dampingRatio: zeta }, points),
    )!;
    expect((promised.naturalHz * fn) / u[1]!).toBeGreaterThan(0.99);
    expect((promised.naturalHz * fn) / u[1]!).toBeLessThan(1.05);
    expect((promised.dampingRatio * zeta) / u[2]!).toBeLessThan(1.05);
  });

  it('two dwells do not determine three parameters: null', () => {
    const information = noInformation('amplitude');
    for (const driveHz of [0.98, 1.02]) addDwell(information, setting(0, 0.25), oscillator(0.02), driveHz);
    expect(promisedU(information)).toBeNull();
  });
});
