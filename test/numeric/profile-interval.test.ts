import { describe, expect, it } from 'vitest';
import type { LeastSquaresProblem } from '../../src/numeric/least-squares-problem.ts';
import { solveLeastSquares } from '../../src/numeric/levenberg-marquardt.ts';
import { profileInterval } from '../../src/numeric/profile-interval.ts';

const x = [0.5, 1, 2, 3, 4.5, 6];
const y = [1.1, 1.9, 4.2, 5.8, 9.1, 12.2];

/** y = a + b x, residuals model - observed. */
const line: LeastSquaresProblem = {
  parameterCount: 2,
  residualCount: x.length,
  residuals(p, out) {
    x.forEach((at, i) => {
      out[i] = p[0]! + p[1]! * at - y[i]!;
    });
  },
  jacobian(_, out) {
    x.forEach((at, i) => {
      out.set([1, at], 2 * i);
    });
  },
};

describe('linear problems, where the profile is the ellipse of the covariance', () => {
  it('bounds are k standard deviations away, within a thousandth', () => {
    const solution = solveLeastSquares(line, [0, 1]);
    for (const j of [0, 1]) {
      const half = 1.96 * Math.sqrt(solution.unscaledCovariance![3 * j]!);
      const { lower, upper } = profileInterval(line, solution, j, 1.96 ** 2);
      expect(Math.abs((solution.parameters[j]! - lower!) / half - 1)).toBeLessThan(2e-3);
      expect(Math.abs((upper! - solution.parameters[j]!) / half - 1)).toBeLessThan(2e-3);
    }
  });

  it('a floor ends the lower side', () => {
    const solution = solveLeastSquares(line, [0, 1]);
    const floor = solution.parameters[1]! - 1e-3;
    expect(profileInterval(line, solution, 1, 1.96 ** 2, floor).lower).toBeCloseTo(floor, 12);
  });

  it('a single parameter needs no inner fit', () => {
    const mean: LeastSquaresProblem = {
      parameterCount: 1,
      residualCount: 4,
      residuals: (p, out) => out.set([p[0]! - 1, p[0]! - 2, p[0]! - 3, p[0]! - 4]),
      jacobian: (_, out) => {
        out.fill(1);
      },
    };
    const { lower, upper } = profileInterval(mean, solveLeastSquares(mean, [0]), 0, 4);
    expect(lower).toBeCloseTo(2.5 - 1, 2); // k = 2, sd = 1/sqrt 4
    expect(upper).toBeCloseTo(2.5 + 1, 2);
  });
});

describe('non-linear problems', () => {
  // exp(-b) observed as 0.1 with u 0.05: the sum of squares rises to (0.1 / 0.05)^2 = 4 as b grows, never beyond
  const decay: LeastSquaresProblem = {
    parameterCount: 1,
    residualCount: 1,
    residuals: (p, out) => {
      out[0] = (Math.exp(-p[0]!) - 0.1) / 0.05;
    },
    jacobian: (p, out) => {
      out[0] = -Math.exp(-p[0]!) / 0.05;
    },
  };

  it('bounds are where the likelihood says: exp(-b) = 0.1 +- 0.05', () => {
    const { lower, upper } = profileInterval(decay, solveLeastSquares(decay, [1]), 0, 1);
    expect(lower!).toBeCloseTo(-Math.log(0.15), 3);
    expect(upper!).toBeCloseTo(-Math.log(0.05), 3);
  });

  it('a side on which the sum never rises enough is null', () => {
    const { lower, upper } = profileInterval(decay, solveLeastSquares(decay, [1]), 0, 5);
    expect(lower!).toBeCloseTo(-Math.log(0.1 + 0.05 * Math.sqrt(5)), 2);
    expect(upper).toBeNull();
  });
});
