import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { LeastSquaresProblem } from '../../src/numeric/least-squares-problem.ts';
import { solveLeastSquares } from '../../src/numeric/levenberg-marquardt.ts';
import { NIST_MODELS, nistProblem, readNist } from './nist-problems.ts';

/** Correct digits: -log10 of the relative error, 15 at most. */
function digits(found: number, certified: number): number {
  return -Math.log10(Math.max(1e-15, Math.abs(found - certified) / Math.abs(certified)));
}

function standardDeviations(solution: ReturnType<typeof solveLeastSquares>): number[] {
  const n = solution.parameters.length;
  const variance = solution.residualSumOfSquares! / solution.degreesOfFreedom;
  return Array.from({ length: n }, (_, j) => Math.sqrt(solution.unscaledCovariance![j * n + j]! * variance));
}

const SETS = Object.keys(NIST_MODELS);

describe('formula at the certified parameters (NIST StRD): residual sum of squares to the digits printed', () => {
  it.each(SETS)('%s', (name) => {
    const set = readNist(name);
    const out = new Float64Array(set.x.length);
    nistProblem(name, set).residuals(Float64Array.from(set.certified), out);
    const sum = out.reduce((total, value) => total + value * value, 0);
    // Lanczos3: residuals of 1e-5 on values near 1, so 11-digit parameters leave 4 digits of the sum
    expect(digits(sum, set.residual_sum_of_squares)).toBeGreaterThan(name === 'lanczos3' ? 4 : 9);
  });

  it.each(SETS)('%s: Jacobian agrees with central differences', (name) => {
    const set = readNist(name);
    const problem = nistProblem(name, set);
    const p = Float64Array.from(set.certified);
    const n = p.length;
    const jacobian = new Float64Array(set.x.length * n);
    problem.jacobian(p, jacobian);
    const up = new Float64Array(set.x.length);
    const down = new Float64Array(set.x.length);
    for (let j = 0; j < n; j++) {
      const h = 1e-5 * Math.abs(p[j]!);
      const size = Math.max(...set.x.map((_, i) => Math.abs(jacobian[i * n + j]!)));
      problem.residuals(
        p.map((value, k) => (k === j ? value + h : value)),
        up,
      );
      problem.residuals(
        p.map((value, k) => (k === j ? value - h : value)),
        down,
      );
      for (let i = 0; i < up.length; i++) {
        expect(Math.abs((up[i]! - down[i]!) / (2 * h) - jacobian[i * n + j]!)).toBeLessThan(1e-6 * size);
      }
    }
  });
});

describe('NIST StRD non-linear sets: certified parameters and standard deviations', () => {
  const cases: [string, 'start1' | 'start2', number, number][] = [
    ['enso', 'start1', 6, 5],
    ['enso', 'start2', 6, 5],
    ['eckerle4', 'start1', 6, 5],
    ['eckerle4', 'start2', 6, 5],
    ['gauss1', 'start1', 6, 5],
    ['gauss1', 'start2', 6, 5],
    ['lanczos3', 'start1', 4, 4],
    ['lanczos3', 'start2', 4, 4],
    ['mgh09', 'start1', 6, 5],
    ['mgh09', 'start2', 6, 5],
    ['roszman1', 'start1', 5, 5],
    ['roszman1', 'start2', 5, 5],
  ];
  it.each(cases)(
    '%s from %s: at least %d digits of value, %d of standard deviation',
    (name, start, value, sd) => {
      const set = readNist(name);
      const solution = solveLeastSquares(nistProblem(name, set), set[start]);
      expect(solution.converged).toBe(true);
      expect(['gradient', 'step', 'reduction']).toContain(solution.stopReason);
      const deviations = standardDeviations(solution);
      // Eckerle4: both of its first two parameters negative is the same curve
      const sign = name === 'eckerle4' && solution.parameters[0]! < 0 ? -1 : 1;
      set.certified.forEach((certified, j) => {
        const found = solution.parameters[j]! * (j < 2 ? sign : 1);
        expect(digits(found, certified)).toBeGreaterThan(value);
        expect(digits(deviations[j]!, set.certified_sd[j]!)).toBeGreaterThan(sd);
      });
    },
  );

  it('Eckerle4 from starts where the peak lies outside the data: a run-off is never called converged', () => {
    const set = readNist('eckerle4');
    let failures = 0;
    for (const centre of [300, 350, 550, 600, 700, 900]) {
      for (const width of [1, 3, 8]) {
        const solution = solveLeastSquares(nistProblem('eckerle4', set), [1, width, centre]);
        const right = digits(solution.residualSumOfSquares!, set.residual_sum_of_squares) > 6;
        expect(solution.converged).toBe(right);
        if (!right) failures++;
      }
    }
    expect(failures).toBeGreaterThan(0);
  });

  it('Norris straight line: certified values to 1e-9, of standard deviations to 1e-9', () => {
    const norris = JSON.parse(readFileSync(new URL('../data/norris.json', import.meta.url), 'utf8')) as {
      x: number[];
      y: number[];
      certified: number[];
      certified_sd: number[];
    };
    const solution = solveLeastSquares(
      {
        parameterCount: 2,
        residualCount: norris.x.length,
        residuals(p, out) {
          norris.x.forEach((x, i) => {
            out[i] = p[0]! + p[1]! * x - norris.y[i]!;
          });
        },
        jacobian(_, out) {
          norris.x.forEach((x, i) => {
            out.set([1, x], 2 * i);
          });
        },
      },
      [0, 0],
    );
    const deviations = standardDeviations(solution);
    for (const j of [0, 1]) {
      expect(digits(solution.parameters[j]!, norris.certified[j]!)).toBeGreaterThan(9);
      expect(digits(deviations[j]!, norris.certified_sd[j]!)).toBeGreaterThan(9);
    }
  });
});

describe('identities', () => {
  it('units of parameters and of residuals change neither the path nor the answer', () => {
    const set = readNist('roszman1');
    const plain = nistProblem('roszman1', set);
    const unit = [1e6, 1e-9, 1e3, 1e-3];
    const inUnits: LeastSquaresProblem = {
      ...plain,
      residuals(p, out) {
        plain.residuals(
          p.map((value, j) => value * unit[j]!),
          out,
        );
        out.forEach((value, i) => {
          out[i] = value * 1e-7;
        });
      },
      jacobian(p, out) {
        plain.jacobian(
          p.map((value, j) => value * unit[j]!),
          out,
        );
        out.forEach((value, i) => {
          out[i] = value * 1e-7 * unit[i % 4]!;
        });
      },
    };
    const first = solveLeastSquares(plain, set.start1);
    const second = solveLeastSquares(
      inUnits,
      set.start1.map((value, j) => value / unit[j]!),
    );
    expect(Math.abs(second.iterations - first.iterations)).toBeLessThanOrEqual(2);
    first.parameters.forEach((value, j) => {
      expect(digits(second.parameters[j]! * unit[j]!, value)).toBeGreaterThan(9);
    });
  });

  it('exact data: parameters to 1e-10 and converged, though the residuals are only rounding', () => {
    const set = readNist('gauss1');
    const exact = {
      ...set,
      y: set.x.map((x) => NIST_MODELS['gauss1']!(x, Float64Array.from(set.certified)).value),
    };
    const solution = solveLeastSquares(nistProblem('gauss1', exact), set.start1);
    expect(solution.converged).toBe(true);
    set.certified.forEach((value, j) => {
      expect(digits(solution.parameters[j]!, value)).toBeGreaterThan(10);
    });
  });
});

describe('what cannot be solved is said', () => {
  const twin: LeastSquaresProblem = {
    parameterCount: 2,
    residualCount: 3,
    residuals: (p, out) => out.set([p[0]! + p[1]! - 1, p[0]! + p[1]! - 2, p[0]! + p[1]! - 3]),
    jacobian: (_, out) => out.fill(1),
  };

  it('two parameters that do the same thing: singular, no covariance', () => {
    const solution = solveLeastSquares(twin, [0.3, 0.9]);
    expect(solution).toMatchObject({ stopReason: 'singular', converged: false, unscaledCovariance: null });
  });

  it('a start where the model has no value: not-finite, no sum', () => {
    const solution = solveLeastSquares(twin, [Number.NaN, 0]);
    expect(solution).toMatchObject({
      stopReason: 'not-finite',
      converged: false,
      residualSumOfSquares: null,
    });
  });

  it('evaluations run out: said, with the best point so far', () => {
    const set = readNist('mgh09');
    const solution = solveLeastSquares(nistProblem('mgh09', set), set.start1, { maxEvaluations: 10 });
    expect(solution).toMatchObject({ stopReason: 'max-evaluations', converged: false, evaluations: 10 });
  });

  it('a wrong Jacobian: stuck far from a right angle is not called converged', () => {
    const set = readNist('gauss1');
    const right = nistProblem('gauss1', set);
    const wrong: LeastSquaresProblem = {
      ...right,
      jacobian(p, out) {
        right.jacobian(p, out);
        out.forEach((value, i) => {
          out[i] = -value;
        });
      },
    };
    expect(solveLeastSquares(wrong, set.start1).converged).toBe(false);
  });

  it('fewer residuals than parameters is our own mistake', () => {
    expect(() => solveLeastSquares({ ...twin, residualCount: 1 }, [0, 0])).toThrow('1 residuals for 2');
  });
});
