import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { cloudFromFit } from '../../src/plan/cloud-from-fit.ts';
import { cloudFromKnowledge } from '../../src/plan/knowledge-cloud.ts';
import { type NextDwellTask, nextDwell } from '../../src/plan/next-dwell.ts';
import { expectedNoise, type PlanPoint, type PlanSetting } from '../../src/plan/plan-points.ts';
import { predictAmplitude } from '../../src/plan/predicted-amplitude.ts';
import { seededNormal } from './seeded-random.ts';
import { FORCE, fitDwells, measureDwell, type SimulatedRig } from './simulated-test.ts';

const rig: SimulatedRig = { gainMm: 1, naturalHz: 5, dampingRatio: 0.02, relative: 0.005, floorMm: 0.1 };
const setting: PlanSetting = {
  model: FORCE,
  observed: 'amplitude',
  noise: { relative: 0.005, floorMm: 0.1 },
};
const start = {
  naturalHz: { value: 5.1, u: 0.1 },
  dampingRatio: { value: 0.03, low: 0.015, high: 0.06 },
  notes: [],
};
const exact = (frequencies: number[]) => frequencies.map((hz) => measureDwell(rig, hz, () => 0));

function taskFor(points: PlanPoint[], changes: Partial<NextDwellTask> = {}): NextDwellTask {
  const fit = points.length >= 4 ? fitDwells(points, rig) : null;
  return {
    setting,
    cloud: fit === null ? cloudFromKnowledge(FORCE, start, measured(1, 0.1), points) : cloudFromFit(fit),
    points,
    fit,
    resolutionHz: 0.01,
    allowed: () => true,
    ...changes,
  };
}

describe('next dwell', () => {
  it('nothing measured: far below resonance, where the swing is small', () => {
    const next = nextDwell(taskFor([]));
    expect(next.purpose).toBe('begin');
    expect(next.driveHz!).toBeLessThan(4.5);
    expect(next.sentence).toMatch(/Begin far below resonance/);
  });

  it('one or two dwells: a step that narrows, never one that may swing more than three times as far as any so far', () => {
    const points = exact([4]);
    const next = nextDwell(taskFor(points));
    expect(next.purpose).toBe('narrow');
    const likely = predictAmplitude(FORCE, taskFor(points).cloud, next.driveHz!)!;
    expect(likely.upperMm).toBeLessThanOrEqual(3 * points[0]!.amplitudeMm);
    expect(next.naturalHz.after!).toBeLessThan(next.naturalHz.before!);
    expect(nextDwell(taskFor(exact([4, 4.8]))).driveHz!).toBeGreaterThan(4.8);
  });

  it('with dwells at peak and lower half-power point: the upper half-power point, 5.097 Hz (D-optimal)', () => {
    const constant = { ...setting, noise: { relative: 0, floorMm: 0.1 } };
    const points = exact([4.2, 4.9, 4.9, 5, 5]).map((point) => ({ ...point, uAmplitudeMm: 0.1 }));
    const next = nextDwell(taskFor(points, { setting: constant, goal: 'all' }));
    expect(Math.abs(next.driveHz! - 5.097)).toBeLessThan(0.03);
  });

  it('identity: the uncertainty it promises is what a fit with that dwell has', () => {
    const points = exact([4.2, 4.85, 4.95, 5.05]);
    const next = nextDwell(taskFor(points));
    const before = fitDwells(points, rig)!;
    const after = fitDwells([...points, ...exact([next.driveHz!])], rig)!;
    const u = (fit: typeof before) => Math.sqrt(fit.covariance[4]!) / fit.naturalHz;
    expect(next.naturalHz.before).toBeCloseTo(u(before), 9);
    expect(next.naturalHz.after! / u(after)).toBeCloseTo(1, 2);
    const uDamping = (fit: typeof before) => Math.sqrt(fit.covariance[8]!) / fit.dampingRatio;
    expect(next.dampingRatio.after! / uDamping(after)).toBeCloseTo(1, 2);
    // and no other step of the generator would have done better for both together
    const area = (hz: number) => {
      const { covariance: c } = fitDwells([...points, ...exact([hz])], rig)!;
      return c[4]! * c[8]! - c[5]! ** 2;
    };
    const found = area(next.driveHz!);
    for (let hz = 4.3; hz < 5.7; hz += 0.02)
      expect(area(Number(hz.toFixed(2)))).toBeGreaterThan(0.97 * found);
  });

  it('for the damping alone it goes to the peak or the flanks, for the frequency alone to a flank', () => {
    const points = exact([4.2, 4.85, 4.95, 5.05]);
    const best = (goal: NextDwellTask['goal']) => nextDwell(taskFor(points, { goal: goal! }));
    const frequency = best('natural-frequency');
    const damping = best('damping-ratio');
    expect(frequency.naturalHz.after!).toBeLessThanOrEqual(damping.naturalHz.after! + 1e-12);
    expect(damping.dampingRatio.after!).toBeLessThanOrEqual(frequency.dampingRatio.after! + 1e-12);
  });

  it('stays below the travel limit', () => {
    const points = exact([4.2, 4.6, 4.8, 5.4]);
    const task = taskFor(points);
    const allowed = (hz: number) => predictAmplitude(FORCE, task.cloud, hz)!.upperMm < 20;
    const next = nextDwell({ ...task, allowed });
    expect(predictAmplitude(FORCE, task.cloud, next.driveHz!)!.upperMm).toBeLessThan(20);
    const free = nextDwell(task);
    expect(predictAmplitude(FORCE, task.cloud, free.driveHz!)!.upperMm).toBeGreaterThan(20);
    const none = nextDwell({ ...task, allowed: () => false });
    expect(none).toMatchObject({ driveHz: null, purpose: 'none', enough: false });
    expect(none.sentence).toMatch(/lower the drive/);
  });

  it('ends when the wanted uncertainties are reached, proposing a flank that has no dwell as a check', () => {
    const points = exact([4.2, 4.9, 4.95, 5, 5.05, 5.1]);
    const next = nextDwell(
      taskFor(points, { targets: { naturalHzRelativeU: 0.001, dampingRatioRelativeU: 0.05 } }),
    );
    expect(next).toMatchObject({ enough: true, purpose: 'check-model' });
    expect(next.driveHz!).toBeGreaterThan(5.5);
    expect(next.sentence).toMatch(/wanted uncertainties are reached.*check that the model holds/);
    const both = nextDwell(
      taskFor([...points, ...exact([5.8])], {
        targets: { naturalHzRelativeU: 0.001, dampingRatioRelativeU: 0.05 },
      }),
    );
    expect(both).toMatchObject({
      enough: true,
      purpose: 'none',
      sentence: 'The wanted uncertainties are reached.',
    });
    const sharper = nextDwell(taskFor(points, { targets: { naturalHzRelativeU: 1e-5 } }));
    expect(sharper.enough).toBe(false);
  });

  it('ends when a further dwell gains less than the stated fraction', () => {
    const many = exact([4.2, 5.8, ...Array.from({ length: 30 }, (_, i) => 4.86 + 0.009 * i)]);
    const next = nextDwell(taskFor(many));
    expect(next.enough).toBe(true);
    expect(next.sentence).toMatch(/neither uncertainty by more than 5 %/);
    expect(nextDwell(taskFor(many, { leastGain: 0.001 })).enough).toBe(false);
  });

  it('seeded simulation: dwells all on one flank lead over the peak to the other side', () => {
    const normal = seededNormal(13);
    const points = [4, 4.3, 4.5].map((hz) => measureDwell(rig, hz, normal));
    const next = nextDwell(taskFor(points));
    expect(next.driveHz!).toBeGreaterThan(4.7);
  });
});

describe('noise to expect', () => {
  it('is that of the dwells so far: floor from the smallest, the rest in proportion', () => {
    const points = exact([4, 4.9, 5]);
    const noise = expectedNoise(points, 25);
    expect(noise.floorMm).toBeCloseTo(0.1, 2);
    expect(noise.relative).toBeGreaterThan(0.003);
    expect(noise.relative).toBeLessThan(0.006);
    expect(expectedNoise([], 25)).toEqual({ relative: 0.01, floorMm: 0.125 });
    expect(expectedNoise([{ driveHz: 4, amplitudeMm: 2, uAmplitudeMm: null }], 25, 0.02).relative).toBe(0.02);
  });
});
