import { describe, expect, it } from 'vitest';
import { cloudFromFit } from '../../src/plan/cloud-from-fit.ts';
import { cloudFromKnowledge } from '../../src/plan/knowledge-cloud.ts';
import { nextDwell } from '../../src/plan/next-dwell.ts';
import { expectedNoise, type PlanPoint, type PlanSetting } from '../../src/plan/plan-points.ts';
import { makeRunSheet } from '../../src/plan/run-sheet.ts';
import type { StartingKnowledge } from '../../src/plan/starting-knowledge.ts';
import { seededNormal } from './seeded-random.ts';
import { FORCE, fitDwells, measureDwell, rms, type SimulatedRig } from './simulated-test.ts';

/*
 * What planning is worth, by simulation. Assumptions: nine dwells, amplitude only, generator steps of 0.001 Hz,
 * noise of 0.5 % of each amplitude and 0.5 % of the peak; the guess of the natural frequency is off by its own
 * uncertainty (drawn from it), the guess of the damping is off by 50 %, up and down in turn, and stated as good to a
 * factor of two. Compared with nine dwells evenly spaced over the span of the planned sheet, and over 20 % either
 * side of the guess.
 */
const DWELLS = 9;
const NATURAL_HZ = 5;

interface Case {
  readonly rig: SimulatedRig;
  readonly start: StartingKnowledge;
  readonly setting: PlanSetting;
}

function drawCase(dampingRatio: number, u: number, run: number, normal: () => number): Case {
  const rig = {
    gainMm: 1,
    naturalHz: NATURAL_HZ,
    dampingRatio,
    relative: 0.005,
    floorMm: 0.0025 / dampingRatio,
  };
  const guess = dampingRatio * (run % 2 === 0 ? 0.5 : 1.5);
  return {
    rig,
    start: {
      naturalHz: { value: NATURAL_HZ * (1 + u * normal()), u: u * NATURAL_HZ },
      dampingRatio: { value: guess, low: guess / 2, high: guess * 2 },
      notes: [],
    },
    setting: { model: FORCE, observed: 'amplitude', noise: { relative: 0.005, floorMm: 0.0025 / guess } },
  };
}

const even = (low: number, high: number) =>
  Array.from({ length: DWELLS }, (_, i) => low + ((high - low) * i) / (DWELLS - 1));

/** Errors of the natural frequency from repeats of a sheet; a fit that fails counts as an error of the guess's size. */
function errorsOf(
  frequencies: readonly number[],
  { rig, start }: Case,
  repeats: number,
  normal: () => number,
): number[] {
  return Array.from({ length: repeats }, () => {
    const fit = fitDwells(
      frequencies.map((hz) => measureDwell(rig, hz, normal)),
      rig,
    );
    return fit === null ? start.naturalHz.u : fit.naturalHz - NATURAL_HZ;
  });
}

const sheetOf = ({ setting, start }: Case) =>
  makeRunSheet({
    setting,
    cloud: cloudFromKnowledge(FORCE, start, null, []),
    points: [],
    dwells: DWELLS,
    resolutionHz: 0.001,
    allowed: () => true,
  }).driveHz;

describe('goal: at most 0.7 of the uncertainty of an evenly spaced sheet (seeded simulation)', () => {
  it.each([
    [0.02, 0.005],
    [0.02, 0.01],
    [0.05, 0.01],
    [0.05, 0.02],
  ])(
    'damping %d, natural frequency known to %d of itself, all nine dwells planned beforehand',
    (damping, u) => {
      const normal = seededNormal(1000 * damping + 1e5 * u);
      const planned: number[] = [];
      const sameSpan: number[] = [];
      for (let run = 0; run < 12; run++) {
        const drawn = drawCase(damping, u, run, normal);
        const sheet = sheetOf(drawn);
        planned.push(...errorsOf(sheet, drawn, 20, normal));
        sameSpan.push(...errorsOf(even(sheet[0]!, sheet.at(-1)!), drawn, 20, normal));
      }
      expect(rms(planned) / rms(sameSpan)).toBeLessThan(0.7);
    },
  );

  it('damping 0.02 against nine dwells evenly over 20 % either side of the guess', () => {
    const normal = seededNormal(77);
    const planned: number[] = [];
    const wide: number[] = [];
    for (let run = 0; run < 12; run++) {
      const drawn = drawCase(0.02, 0.01, run, normal);
      planned.push(...errorsOf(sheetOf(drawn), drawn, 20, normal));
      const guess = drawn.start.naturalHz.value;
      wide.push(...errorsOf(even(0.8 * guess, 1.2 * guess), drawn, 20, normal));
    }
    expect(rms(planned) / rms(wide)).toBeLessThan(0.5);
  });

  it.each([
    [0.01, 0.02],
    [0.02, 0.02],
    [0.02, 0.04],
    [0.05, 0.04],
  ])('damping %d, natural frequency known to %d, planned anew after every dwell', (damping, u) => {
    const normal = seededNormal(7 + 1000 * damping + 1e5 * u);
    const planned: number[] = [];
    const sameSpan: number[] = [];
    for (let run = 0; run < 10; run++) {
      const drawn = drawCase(damping, u, run, normal);
      const points = dwellByDwell(drawn, normal);
      const fit = fitDwells(points, drawn.rig);
      planned.push(fit === null ? drawn.start.naturalHz.u : fit.naturalHz - NATURAL_HZ);
      const sheet = sheetOf(drawn);
      sameSpan.push(...errorsOf(even(sheet[0]!, sheet.at(-1)!), drawn, 20, normal));
    }
    expect(rms(planned) / rms(sameSpan)).toBeLessThan(0.7);
  });
});

/** Runs nine dwells, each where the plan says after those before it. */
function dwellByDwell({ rig, start, setting }: Case, normal: () => number): PlanPoint[] {
  const points: PlanPoint[] = [];
  while (points.length < DWELLS) {
    const learnt = cloudFromKnowledge(FORCE, start, null, points);
    const middle = {
      gainMm: learnt.gainMm?.[256] ?? 1,
      naturalHz: learnt.naturalHz[256]!,
      dampingRatio: learnt.dampingRatio[256]!,
      covariance: [],
    };
    const fit = points.length >= 4 ? fitDwells(points, middle) : null;
    const next = nextDwell({
      setting: points.length === 0 ? setting : { ...setting, noise: expectedNoise(points, 1) },
      cloud: fit === null ? learnt : cloudFromFit(fit),
      points,
      fit,
      resolutionHz: 0.001,
      allowed: () => true,
      leastGain: 0,
    });
    points.push(measureDwell(rig, next.driveHz!, normal));
  }
  return points;
}
