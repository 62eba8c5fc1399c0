import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { frequencyRange, onSteps } from '../../src/plan/design-space.ts';
import { cloudFromKnowledge } from '../../src/plan/knowledge-cloud.ts';
import type { PlanSetting } from '../../src/plan/plan-points.ts';
import { predictAmplitude } from '../../src/plan/predicted-amplitude.ts';
import { makeRunSheet, type RunSheetTask } from '../../src/plan/run-sheet.ts';
import { FORCE } from './simulated-test.ts';

const setting: PlanSetting = {
  model: FORCE,
  observed: 'amplitude',
  noise: { relative: 0.005, floorMm: 0.1 },
};

const knowledge = (u: number, zeta = 0.02) => ({
  naturalHz: { value: 5, u },
  dampingRatio: { value: zeta, low: zeta / 1.5, high: zeta * 1.5 },
  notes: [],
});

const task = (u: number, changes: Partial<RunSheetTask> = {}): RunSheetTask => ({
  setting,
  cloud: cloudFromKnowledge(FORCE, knowledge(u), measured(1, 0.02), []),
  points: [],
  dwells: 9,
  resolutionHz: 0.01,
  allowed: () => true,
  ...changes,
});

describe('initial run sheet', () => {
  it('well-known frequency: two wide dwells, the rest about the half-power points and the peak (D-optimal)', () => {
    const constant = { ...setting, noise: { relative: 0, floorMm: 0.1 } };
    const { driveHz, notes } = makeRunSheet(task(0.005, { setting: constant }));
    expect(driveHz).toHaveLength(9);
    const [low, ...rest] = driveHz;
    const high = rest.pop();
    expect(low!).toBeLessThanOrEqual(4.25);
    expect(high!).toBeGreaterThanOrEqual(5.75);
    // half-power points 4.897 and 5.097 Hz, peak 4.998 Hz: every inner dwell within half a half-bandwidth of one
    for (const hz of rest)
      expect(Math.min(...[4.897, 4.998, 5.097].map((f) => Math.abs(hz - f)))).toBeLessThan(0.05);
    expect(notes).toEqual([]);
  });

  it('goes from low to high on the generator’s steps, each step once', () => {
    for (const resolutionHz of [0.001, 0.01, 0.05]) {
      const { driveHz } = makeRunSheet(task(0.1, { resolutionHz }));
      for (const hz of driveHz) expect(onSteps(hz, resolutionHz)).toBe(hz);
      expect(driveHz).toEqual([...new Set(driveHz)].sort((a, b) => a - b));
    }
    expect(onSteps(4.8700000001, 0.01)).toBe(4.87); // no dust of binary fractions
  });

  it('poorly known frequency: spreads over what it may be, and says that it searches first', () => {
    const { driveHz, notes } = makeRunSheet(task(0.3));
    const inner = driveHz.slice(1, -1);
    expect(inner[0]!).toBeLessThan(4.75);
    expect(inner.at(-1)!).toBeGreaterThan(5.25);
    expect(notes.join(' ')).toMatch(/searches first.*three or four dwells/);
  });

  it('says where the generator’s steps are coarse beside the peak (hundredths, then thousandths: common practice)', () => {
    const { notes } = makeRunSheet(task(0.05, { resolutionHz: 0.1 }));
    expect(notes.join(' ')).toMatch(/step of 0\.1 Hz is coarse beside the half-bandwidth of about 0\.1 Hz/);
    expect(makeRunSheet(task(0.05, { resolutionHz: null })).notes.join(' ')).toMatch(
      /not stated; 0\.001 Hz is assumed/,
    );
  });

  it('leaves out steps above the travel limit and says so', () => {
    const { cloud } = task(0.02);
    const allowed = (hz: number) => predictAmplitude(FORCE, cloud, hz)!.upperMm <= 15;
    const { driveHz, notes } = makeRunSheet(task(0.02, { cloud, allowed }));
    expect(driveHz.length).toBeGreaterThanOrEqual(6);
    for (const hz of driveHz) expect(predictAmplitude(FORCE, cloud, hz)!.upperMm).toBeLessThanOrEqual(15);
    expect(notes.join(' ')).toMatch(/Steps that would pass the travel limit are left out/);
    const none = makeRunSheet(task(0.02, { allowed: () => false }));
    expect(none).toMatchObject({ driveHz: [], promised: null });
    expect(none.notes.join(' ')).toMatch(/lower the drive/);
  });

  it('counts dwells measured already and puts no second one on a flank', () => {
    const points = [4.2, 5.05].map((driveHz) => ({ driveHz, amplitudeMm: 3, uAmplitudeMm: 0.03 }));
    const { driveHz } = makeRunSheet(task(0.02, { points }));
    expect(driveHz).toHaveLength(7);
    expect(driveHz[0]!).toBeGreaterThan(4.6);
    expect(driveHz.at(-1)!).toBeGreaterThan(5.6);
    expect(makeRunSheet(task(0.02, { points, dwells: 1 })).driveHz).toEqual([]);
  });

  it('with three dwells it spends none on the flanks, and warns', () => {
    const { driveHz, notes } = makeRunSheet(task(0.005, { dwells: 3 }));
    expect(driveHz).toHaveLength(3);
    expect(driveHz[0]!).toBeGreaterThan(4.85);
    expect(notes.join(' ')).toMatch(/no check that the model holds/);
  });

  it('range: holds nine in ten of the frequencies it may be and both flanks', () => {
    const cloud = cloudFromKnowledge(FORCE, knowledge(0.2), null, []);
    const { wide, candidates } = frequencyRange(cloud, 0.01);
    expect(wide[0]).toBeLessThan(5 - 1.645 * 0.2);
    expect(wide[1]).toBeGreaterThan(5 + 1.645 * 0.2);
    expect([candidates[0], candidates.at(-1)]).toEqual([...wide]);
  });
});
