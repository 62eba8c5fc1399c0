import { describe, expect, it } from 'vitest';
import { fitTest } from '../../src/engine/fit-test.ts';
import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { compareConfigurations } from '../../src/report/comparison.ts';
import { massTrendData, overlayOf, quantityTrendData } from '../../src/report/comparison-data.ts';
import { viewConfiguration } from '../../src/report/configuration-view.ts';
import { lengthUnit } from '../../src/report/length-unit.ts';
import { testSchema } from '../../src/testfile/schema.ts';

interface Made {
  readonly id: string;
  readonly massKg?: number;
  readonly setting?: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
}

/** Configurations with typed dwells on the exact curve of a driven oscillator, 0.2 % seeded noise, u stated. */
function views(made: readonly Made[]) {
  const random = seededRandom(3);
  const test = testSchema.parse({
    format: 'dwellbook-test',
    version: 1,
    configurations: made.map(({ id, massKg, setting, naturalHz, dampingRatio }) => ({
      id,
      excitation: 'force',
      ...(massKg === undefined ? {} : { movingMass: massKg }),
      ...(setting === undefined ? {} : { setting }),
      dwells: [0.8, 0.9, 0.95, 0.98, 1, 1.02, 1.05, 1.1, 1.25].map((ratio, k) => {
        const exact = 2 / Math.hypot(1 - ratio ** 2, 2 * dampingRatio * ratio);
        const u = 0.002 * exact;
        return {
          id: `${id}${k}`,
          driveHz: ratio * naturalHz,
          typed: { amplitude: exact + u * random.normal(), u },
        };
      }),
    })),
  });
  const results = fitTest(test);
  return test.configurations.map((configuration) => viewConfiguration(configuration, results));
}

// f = sqrt(k / (m + m0)) / (2 pi), the textbook oscillator
const STIFFNESS = 580;
const BESIDE_KG = 0.13;
const frequencyOf = (massKg: number) => Math.sqrt(STIFFNESS / (massKg + BESIDE_KG)) / (2 * Math.PI);

describe('compareConfigurations', () => {
  it('1/f^2 against mass gives back stiffness and the mass beside within 3 u (f = sqrt(k/m)/2pi)', () => {
    const { masses, settings } = compareConfigurations(
      views(
        [1, 1.5, 2, 2.5].map((massKg) => ({
          id: `m${massKg}`,
          massKg,
          naturalHz: frequencyOf(massKg),
          dampingRatio: 0.04,
        })),
      ),
    );
    expect(settings).toEqual([]);
    expect(masses).toHaveLength(1);
    const { comparison } = masses[0]?.outcome ?? {};
    const { value: k, u: uK } = comparison?.stiffnessNPerM ?? { value: null, u: null };
    const { value: m, u: uM } = comparison?.effectiveMassKg ?? { value: null, u: null };
    expect(Math.abs((k ?? 0) - STIFFNESS)).toBeLessThan(3 * (uK ?? 0));
    expect(Math.abs((m ?? 0) - BESIDE_KG)).toBeLessThan(3 * (uM ?? 0));
    const data = masses[0] ? massTrendData(masses[0]) : null;
    expect(data?.points.map((point) => point.x)).toEqual([1, 1.5, 2, 2.5]);
    expect(data?.points[0]?.y).toBeCloseTo(frequencyOf(1) ** -2, 4);
  });

  it('settings are compared among equal masses only, and each quantity by its own trend', () => {
    const all = views([
      { id: 'a', massKg: 1, setting: 2, naturalHz: 3, dampingRatio: 0.02 },
      { id: 'b', massKg: 1, setting: 4, naturalHz: 3, dampingRatio: 0.03 },
      { id: 'c', massKg: 1, setting: 6, naturalHz: 3, dampingRatio: 0.04 },
      { id: 'd', massKg: 2, setting: 6, naturalHz: 2, dampingRatio: 0.09 },
    ]);
    const { settings, masses } = compareConfigurations(all);
    expect(settings.map((trend) => trend.quantity)).toEqual([
      'damping ratio',
      'damping coefficient',
      'half-power bandwidth',
    ]);
    expect(settings[0]?.views.map((view) => view.name)).toEqual(['a', 'b', 'c']);
    const slope = settings[0]?.outcome.result?.slopeAtCentre ?? { value: null, u: null };
    expect(Math.abs((slope.value ?? 0) - 0.005)).toBeLessThan(3 * (slope.u ?? 0));
    expect(masses[0]?.views.map((view) => view.name)).toEqual(['c', 'd']);
    expect(settings[0] ? quantityTrendData(settings[0]).trend.length : 0).toBeGreaterThan(10);
  });

  it('tells a real difference from none: damping 0.02 and 0.03 differ, equal frequencies do not', () => {
    const { parameters } = compareConfigurations(
      views([
        { id: 'a', naturalHz: 3, dampingRatio: 0.02 },
        { id: 'b', naturalHz: 3, dampingRatio: 0.03 },
      ]),
    );
    const significant = Object.fromEntries(
      parameters.parameters.map(({ key, pairs }) => [key, pairs[0]?.significant]),
    );
    expect(significant).toMatchObject({ naturalHz: false, dampingRatio: true });
    expect(Object.keys(significant)).not.toContain('stiffness');
  });
});

it('overlayOf: one unit for all keeps it; the overlay of nothing is empty', () => {
  const all = views([{ id: 'a', naturalHz: 3, dampingRatio: 0.02 }]);
  expect(overlayOf(all, lengthUnit(false)).title).toBe('amplitude, mm (zero to peak)');
  expect(overlayOf(all, lengthUnit(true)).title).toBe('amplitude, in (zero to peak)');
  expect(overlayOf([], lengthUnit(false))).toEqual({ responses: [], title: '' });
});
