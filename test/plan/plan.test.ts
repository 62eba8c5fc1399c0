import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { makePlan, type PlanInput } from '../../src/plan/plan.ts';
import type { PlanPoint } from '../../src/plan/plan-points.ts';
import reference from '../data/resonance_fit.json' with { type: 'json' };
import { seededNormal } from './seeded-random.ts';
import { FORCE, fitDwells, measureDwell, type SimulatedRig } from './simulated-test.ts';

const SPRING_END = { excitation: 'spring-end', damping: 'viscous' } as const;

const input: PlanInput = {
  model: SPRING_END,
  start: { kind: 'timed-period', cycles: 40, timeS: 20, uTimeS: 0.2 },
  damping: { ratio: 0.03 },
  gainMm: measured(2, 0.05),
  travelLimitMm: 80,
  resolutionHz: 0.01,
};

/** Every number in a value, however deep. */
function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value];
  if (value === null || typeof value !== 'object') return [];
  return Object.values(value).flatMap(numbersIn);
}

describe('plan of a configuration', () => {
  it('gives each step from low to high with waiting, filming, amplitude and pixels', () => {
    const plan = makePlan(input);
    expect(plan.reason).toBeNull();
    expect(plan.rows).toHaveLength(9);
    expect(plan.naturalHz.value).toBeCloseTo(2, 2);
    for (const row of plan.rows) {
      expect(row.aboveLimit).toBe(false);
      expect((row.filmS * row.driveHz) % 1).toBeCloseTo(Math.round((row.filmS * row.driveHz) % 1), 6);
      expect(row.frames).toBe(Math.round(row.filmS * plan.camera!.frameRateHz));
      expect(row.predictedAmplitudePx).toBeCloseTo(
        row.predictedAmplitudeMm!.medianMm * plan.camera!.pxPerMm!,
        9,
      );
      // damping may well be 0.018: ln(100) / (0.018 * 2 pi * 2 Hz) = 20 s, and more after a large swing
      expect(row.waitS).toBeGreaterThan(18);
      expect(row.waitS).toBeLessThan(35);
    }
    const frequencies = plan.rows.map((row) => row.driveHz);
    expect(frequencies).toEqual([...frequencies].sort((a, b) => a - b));
    const sum = (key: 'waitS' | 'filmS') => plan.rows.reduce((total, row) => total + row[key], 0);
    expect(plan.totals.benchS).toBeCloseTo(sum('waitS') + sum('filmS') + 9 * 20, 9);
    expect(plan.promised!.naturalHz).toBeLessThan(0.002);
  });

  it('is plain JSON without a NaN, whatever is missing', () => {
    const inputs: PlanInput[] = [
      input,
      { model: FORCE },
      { model: FORCE, start: { kind: 'stated', naturalHz: 30 }, observed: 'amplitude-and-lag' },
      { ...input, gainMm: null, travelLimitMm: null, resolutionHz: null },
      { ...input, travelLimitMm: 0.5 },
      { ...input, plannedHz: [] },
      { ...input, plannedHz: [1.9, Number.NaN, -2, 0] },
      { ...input, dwells: 0 },
      { ...input, damping: { ratio: 0.6 } },
      { ...input, model: { excitation: 'unbalance', damping: 'structural' } },
      { ...input, points: [{ driveHz: 1.5, amplitudeMm: 0, uAmplitudeMm: null }] },
    ];
    for (const each of inputs) {
      const plan = makePlan(each);
      for (const number of numbersIn(plan)) expect(Number.isFinite(number)).toBe(true);
      expect(JSON.parse(JSON.stringify(plan))).toEqual(plan);
    }
  });

  it('nothing to start from: says what is missing and still prints the cautions', () => {
    const plan = makePlan({ model: FORCE });
    expect(plan.reason).toMatch(/ring-down, time some free cycles, or give stiffness/);
    expect(plan).toMatchObject({ rows: [], next: null, naturalHz: { value: null, u: null } });
    expect(plan.cautions.map((caution) => caution.id)).toContain('no-limit');
  });

  it('shows the cautions at the first step toward the peak, and there only', () => {
    const { rows, cautions } = makePlan(input);
    expect(rows.map((row) => row.cautionsHere)).toEqual(rows.map((_, i) => i === 1));
    expect(cautions.map((caution) => caution.id)).toContain('peak');
  });

  it('a step planned by hand that may pass the limit is marked, not run and not counted', () => {
    const plan = makePlan({ ...input, travelLimitMm: 30, plannedHz: [2, 1.6] });
    expect(plan.rows.map((row) => [row.driveHz, row.aboveLimit])).toEqual([
      [1.6, false],
      [2, true],
    ]);
    const refused = plan.rows[1]!;
    expect(refused.predictedAmplitudeMm!.upperMm).toBeGreaterThan(30);
    expect(refused.advice.join(' ')).toMatch(
      /At 2 Hz the part may swing .* past its travel limit of 30 mm: do not run/,
    );
    expect(plan.totals.dwells).toBe(1);
    expect(plan.warnings.join(' ')).toMatch(/Not to be run.*: 2 Hz/);
    expect(plan.cautions.map((caution) => caution.id)).toContain('limit');
  });

  it('its own steps stay below the limit', () => {
    const { rows } = makePlan({ ...input, travelLimitMm: 30 });
    expect(rows.length).toBeGreaterThan(4);
    for (const row of rows) expect(row.predictedAmplitudeMm!.upperMm).toBeLessThanOrEqual(30);
  });

  it('a swing below half a pixel is told as codec-limited', () => {
    const { rows } = makePlan({
      ...input,
      gainMm: measured(0.05, 0.001),
      camera: { pxPerMm: 2 },
      plannedHz: [1.6],
    });
    expect(rows[0]!.predictedAmplitudePx!).toBeLessThan(0.5);
    expect(rows[0]!.advice.join(' ')).toMatch(/below the half pixel.*codec-limited/);
  });

  it('a drive frequency that meets the frame rate is told', () => {
    const { rows } = makePlan({
      model: FORCE,
      start: { kind: 'stated', naturalHz: 29, uHz: 0.5 },
      plannedHz: [30],
      camera: { frameRateHz: 60 },
    });
    expect(rows[0]!.advice.join(' ')).toMatch(/same one or two phases/);
  });

  it('without a static deflection sizes are null until a dwell is measured, and then predicted', () => {
    const blind = makePlan({ ...input, gainMm: null });
    expect(blind.rows[0]!.predictedAmplitudeMm).toBeNull();
    expect(blind.rows[0]!.predictedAmplitudePx).toBeNull();
    expect(blind.warnings.join(' ')).toMatch(/size of the motion is not known/);
    const points = [{ driveHz: 1.5, amplitudeMm: 4.5, uAmplitudeMm: 0.05 }];
    const seen = makePlan({ ...input, gainMm: null, points });
    expect(seen.rows).toHaveLength(8);
    expect(seen.rows.every((row) => row.predictedAmplitudeMm !== null)).toBe(true);
  });

  it('plans from the dwells alone where no first guess is given, and says so', () => {
    const points = [1.5, 1.9, 2.3].map((driveHz) => ({ driveHz, amplitudeMm: 4, uAmplitudeMm: 0.1 }));
    const plan = makePlan({ model: FORCE, points });
    expect(plan.reason).toBeNull();
    expect(plan.warnings.join(' ')).toMatch(/largest dwell so far is taken as a rough guess/);
  });

  it('with a fit it plans from the fit, and the next dwell improves on its uncertainties (resonance_fit.json)', () => {
    const { Y, fn, zeta, u, corr_Y_zeta } = reference.fit_amplitude_only;
    const [uY, uFn, uZeta] = u as [number, number, number];
    const shared = corr_Y_zeta * uY * uZeta;
    const plan = makePlan({
      model: FORCE,
      points: reference.f.map((driveHz, i) => ({
        driveHz,
        amplitudeMm: reference.amp[i]!,
        uAmplitudeMm: reference.u_amp[i]!,
      })),
      fit: {
        gainMm: Y,
        naturalHz: fn,
        dampingRatio: zeta,
        covariance: [uY ** 2, 0, shared, 0, uFn ** 2, 0, shared, 0, uZeta ** 2],
      },
      dwells: 12,
      targets: { naturalHzRelativeU: 1e-4 },
    });
    expect(plan.rows).toEqual([]);
    expect(plan.naturalHz.value).toBeCloseTo(fn, 4);
    expect(plan.next!.naturalHz.before).toBeCloseTo(uFn / fn, 9);
    expect(plan.next!.naturalHz.after!).toBeLessThan(uFn / fn);
    expect(plan.next!.enough).toBe(false);
  });

  it('a fit of few dwells that tells less than the start does not take its place', () => {
    const points = [1.5, 1.6, 1.7].map((driveHz) => ({ driveHz, amplitudeMm: 4, uAmplitudeMm: 0.1 }));
    const poor = { gainMm: 2, naturalHz: 3, dampingRatio: 0.1, covariance: [1, 0, 0, 0, 1, 0, 0, 0, 0.04] };
    expect(makePlan({ ...input, points, fit: poor }).naturalHz.value).toBeLessThan(2.2);
    const good = { ...poor, covariance: [0.01, 0, 0, 0, 0.0004, 0, 0, 0, 0.0001] };
    expect(makePlan({ ...input, points, fit: good }).naturalHz.value).toBeCloseTo(3, 2);
  });

  it('a rig 2.5 u above the guess: climbs dwell by dwell to the limit, never past it', () => {
    const rig: SimulatedRig = {
      gainMm: 2,
      naturalHz: 2.05,
      dampingRatio: 0.02,
      relative: 0.01,
      floorMm: 0.02,
    };
    const swings = climb(rig, () => 0);
    expect(swings).toHaveLength(7);
    expect(Math.max(...swings)).toBeLessThan(40); // the peak of this rig is at 50 mm
    expect(Math.max(...swings)).toBeGreaterThan(30);
  });

  it('seeded simulation: over rigs drawn from the starting knowledge at most one step in twenty passes the limit', () => {
    const normal = seededNormal(41);
    let steps = 0;
    let past = 0;
    for (let run = 0; run < 12; run++) {
      const dampingRatio = 0.03 * Math.exp((Math.log(2) / 1.645) * normal());
      const rig = { gainMm: 2, naturalHz: 2 + 0.02 * normal(), dampingRatio, relative: 0.01, floorMm: 0.02 };
      const swings = climb(rig, normal);
      steps += swings.length;
      past += swings.filter((swing) => swing > 40).length;
    }
    expect(steps).toBe(84);
    expect(past / steps).toBeLessThanOrEqual(0.05);
  });
});

/** Runs seven dwells as planned anew after each, travel limit 40 mm, and returns how far the part swung, mm. */
function climb(rig: SimulatedRig, normal: () => number): number[] {
  const points: PlanPoint[] = [];
  while (points.length < 7) {
    const fit = points.length >= 4 ? fitDwells(points, rig) : null;
    const { next } = makePlan({ ...input, gainMm: null, travelLimitMm: 40, dwells: 3, points, fit });
    if (next?.driveHz == null) break;
    points.push(measureDwell(rig, next.driveHz, normal));
  }
  return points.map((point) => point.amplitudeMm);
}
