import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { fitTest } from '../../src/engine/fit-test.ts';
import { readTest } from '../../src/testfile/read-test.ts';
import { top } from '../house/source-files.ts';

const data = JSON.parse(readFileSync(join(top, 'test/data/resonance_fit.json'), 'utf8'));
const DEG = 180 / Math.PI;

function typedTest(withLag: boolean, extra: object = {}) {
  const dwells = data.f.map((driveHz: number, k: number) => ({
    id: `d${k}`,
    driveHz,
    typed: {
      amplitude: data.amp[k],
      u: data.u_amp[k],
      ...(withLag ? { lag: -data.phase[k] * DEG, lagU: data.u_phase[k] * DEG } : {}),
    },
  }));
  return readTest(
    JSON.stringify({
      format: 'dwellbook-test',
      version: 1,
      configurations: [{ id: 'a', excitation: 'force', dwells, ...extra }],
    }),
    'typed',
  );
}

describe('amplitudes typed in are fitted without a clip', () => {
  it('amplitudes alone: the values of scipy 1.10 with a Gauss-Newton polish on the same twelve dwells', () => {
    const [fit] = fitTest(typedTest(false)).resonances;
    expect(fit).toMatchObject({ quantity: 'amplitude', points: 12, dof: 9, error: null });
    expect(fit?.naturalHz.value).toBeCloseTo(4.87447847, 6);
    expect(fit?.naturalHz.u).toBeCloseTo(0.000961, 6);
    expect(fit?.dampingRatio.value).toBeCloseTo(0.03103317, 7);
    expect(fit?.staticGain.value).toBeCloseTo(0.80079824, 6);
    expect(fit?.chi2).toBeCloseTo(4.940781, 4);
  });

  it('with lags: phase halves the uncertainty of the natural frequency', () => {
    const [fit] = fitTest(typedTest(true)).resonances;
    expect(fit?.quantity).toBe('amplitude and lag');
    expect(fit?.naturalHz.value).toBeCloseTo(4.87324227, 6);
    expect(fit?.naturalHz.u).toBeCloseTo(0.000494, 6);
    expect(fit?.dampingRatio.value).toBeCloseTo(0.03111817, 7);
    expect(fit?.chi2).toBeCloseTo(19.205746, 3);
    expect(fit?.opinions?.circle?.naturalHz.value).toBeCloseTo(4.873, 2);
  });

  it('a moving mass gives stiffness and damping coefficient: k = m (2 pi fn)^2, c = 2 zeta m 2 pi fn', () => {
    const [fit] = fitTest(typedTest(false, { movingMass: 0.5, movingMassU: 0.002 })).resonances;
    const omega = 2 * Math.PI * 4.87447847;
    expect(fit?.stiffness.value).toBeCloseTo(0.5 * omega * omega, 3);
    expect(fit?.dampingCoefficient.value).toBeCloseTo(2 * 0.03103317 * 0.5 * omega, 5);
    expect((fit?.stiffness.u ?? 0) / (fit?.stiffness.value ?? 1)).toBeCloseTo(
      Math.hypot(0.002 / 0.5, (2 * 0.000961) / 4.87447847),
      6,
    );
  });

  it('an excluded dwell is shown and not fitted', () => {
    const test = typedTest(false);
    const dwell = test.configurations[0]?.dwells[6];
    if (!dwell) throw new Error('seven dwells at least');
    dwell.excluded = 'bumped the bench';
    dwell.typed = { amplitude: 3, u: 0.05 };
    const results = fitTest(test);
    expect(results.dwells[6]).toMatchObject({ excluded: 'bumped the bench', amplitude: { value: 3 } });
    expect(results.resonances[0]).toMatchObject({ points: 11, dof: 8 });
    expect(results.resonances[0]?.naturalHz.value).toBeCloseTo(4.874, 2);
    expect(results.resonances[0]?.fitted[6]?.used).toBe(false);
  });
});

describe('what cannot be fitted is said, with nulls for numbers', () => {
  it.each([
    [{ amplitude: -1 }, 2, /typed amplitude is -1 mm/],
    [{ amplitude: 1 }, 0, /no drive frequency above 0/],
  ])('%j at %d Hz', (typed, driveHz, pattern) => {
    const test = readTest(
      JSON.stringify({
        format: 'dwellbook-test',
        version: 1,
        configurations: [{ id: 'a', dwells: [{ id: 'd', driveHz, typed }] }],
      }),
      'typed',
    );
    const { dwells, resonances } = fitTest(test);
    expect(dwells[0]?.error).toMatch(pattern);
    expect(resonances[0]?.error).toMatch(/3 different drive frequencies/);
    expect(resonances[0]?.naturalHz).toEqual({ value: null, u: null });
    expect(JSON.stringify({ dwells, resonances })).not.toMatch(/NaN|Infinity/);
  });

  it('a test without configurations gives empty results', () => {
    const results = fitTest(readTest('{"format":"dwellbook-test","version":1}', 'empty'));
    expect(results).toMatchObject({ dwells: [], resonances: [], ringdowns: [], clips: [] });
  });
});
