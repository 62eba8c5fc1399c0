import { describe, expect, it } from 'vitest';
import { planTest } from '../../src/engine/plan-test.ts';
import { readTest } from '../../src/testfile/read-test.ts';

const test = (plan: object, configuration: object = {}) =>
  readTest(
    JSON.stringify({
      format: 'dwellbook-test',
      version: 1,
      configurations: [{ id: 'a', excitation: 'spring-end', travelLimit: 40, ...configuration }],
      plan,
    }),
    'plan',
  );

function only(file: ReturnType<typeof test>) {
  const [first] = planTest(file);
  if (!first) throw new Error('no plan');
  return first.plan;
}

describe('a plan from the test file', () => {
  it('a timed period gives the first guess: 20 cycles in 8 s are 2.5 Hz (common practice, no source)', () => {
    const plan = only(
      test({
        timed: { cycles: 20, seconds: 8 },
        dampingRatio: 0.03,
        staticDeflection: 1,
        resolutionHz: 0.001,
      }),
    );
    expect(plan.naturalHz.value).toBeCloseTo(2.5, 1);
    expect(plan.rows).toHaveLength(9);
    for (const row of plan.rows) {
      expect(Math.abs(row.driveHz * 1000 - Math.round(row.driveHz * 1000))).toBeLessThan(1e-6);
      expect(row.aboveLimit).toBe(false);
    }
    // leftover 1 % of a rig of damping ratio 0.03 takes ln(100) / (2 pi 0.03) = 24.4 cycles
    expect(plan.rows[4]?.waitS).toBeGreaterThan(8);
  });

  it('stiffness and moving mass give it too: sqrt(k/m) / 2 pi', () => {
    const plan = only(test({ stiffness: 400, dampingRatio: 0.05 }, { movingMass: 1.6 }));
    expect(plan.naturalHz.value).toBeCloseTo(Math.sqrt(400 / 1.6) / (2 * Math.PI), 1);
  });

  it('a ring-down measured before comes before everything else', () => {
    const ringdowns = [
      {
        id: 'r',
        clip: 'c',
        measured: { naturalHz: 3.3, naturalHzU: 0.001, dampingRatio: 0.04, dampingRatioU: 0.0005 },
      },
    ];
    const plan = only(test({ naturalHz: 9 }, { ringdowns }));
    expect(plan.naturalHz.value).toBeCloseTo(3.3, 2);
    expect(plan.dampingRatio.value).toBeCloseTo(0.04, 3);
  });

  it('steps that would pass the travel limit are not proposed', () => {
    const plan = only(
      test(
        { naturalHz: 2.5, naturalHzU: 0.02, dampingRatio: 0.01, staticDeflection: 2 },
        { travelLimit: 30 },
      ),
    );
    expect(plan.rows.length).toBeGreaterThan(0);
    for (const row of plan.rows) expect(row.predictedAmplitudeMm?.upperMm).toBeLessThanOrEqual(30);
    expect(plan.warnings.join(' ')).toMatch(/travel limit/);
  });

  it('as dwells come in the next one is proposed with what it brings', () => {
    const dwells = [2.2, 2.4, 2.6, 2.8].map((driveHz, k) => {
      const r = driveHz / 2.5;
      return { id: `d${k}`, driveHz, typed: { amplitude: 2 / Math.hypot(1 - r * r, 2 * 0.04 * r), u: 0.02 } };
    });
    const plan = only(test({ resolutionHz: 0.001 }, { dwells, travelLimit: 60 }));
    expect(plan.naturalHz.value).toBeCloseTo(2.5, 2);
    expect(plan.next?.driveHz).toBeGreaterThan(2.3);
    expect(plan.next?.driveHz).toBeLessThan(2.7);
    expect(plan.next?.sentence.length).toBeGreaterThan(20);
  });

  it('magnets on the rig call for their caution', () => {
    const texts = (situations: string[]) =>
      only(test({ naturalHz: 2.5, dampingRatio: 0.03, situations }))
        .cautions.map((each) => each.text)
        .join(' ');
    expect(texts(['magnets'])).toMatch(/pacemaker/i);
    expect(texts([])).not.toMatch(/pacemaker/i);
  });

  it('with nothing to start from it says what is missing', () => {
    const plan = only(test({}));
    expect(plan.rows).toEqual([]);
    expect(plan.reason).toMatch(/natural frequency|ring-down|timed/i);
  });
});
