import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  conditionNumber,
  eigenvalues,
  invertSymmetric,
  linearLeastSquares,
  solveSymmetric,
  thinSvd,
} from '../../src/numeric/linear-algebra.ts';

const norris = JSON.parse(readFileSync(new URL('../data/norris.json', import.meta.url), 'utf8')) as {
  x: number[];
  y: number[];
};

function straightLineDesign(x: readonly number[]): Float64Array {
  return Float64Array.from(x.flatMap((value) => [1, value]));
}

describe('linear least squares', () => {
  test('NIST StRD Norris: certified line, standard deviations and residual deviation', () => {
    const fit = linearLeastSquares(
      straightLineDesign(norris.x),
      norris.x.length,
      2,
      Float64Array.from(norris.y),
    );
    expect(fit).not.toBeNull();
    const variance = fit!.residualSumOfSquares / fit!.degreesOfFreedom;
    expect(fit!.degreesOfFreedom).toBe(34);
    expect(fit!.coefficients[0]! / -0.262323073774029).toBeCloseTo(1, 9);
    expect(fit!.coefficients[1]! / 1.00211681802045).toBeCloseTo(1, 9);
    expect(Math.sqrt(variance) / 0.884796396144373).toBeCloseTo(1, 9);
    expect(Math.sqrt(variance * fit!.unscaledCovariance[0]!) / 0.232818234301152).toBeCloseTo(1, 9);
    expect(Math.sqrt(variance * fit!.unscaledCovariance[3]!) / 4.29796848199937e-4).toBeCloseTo(1, 9);
  });

  test('scaling a column by 1e-9 scales its coefficient by 1e9 and changes nothing else', () => {
    const target = Float64Array.from(norris.y);
    const plain = linearLeastSquares(straightLineDesign(norris.x), 36, 2, target)!;
    const tiny = linearLeastSquares(straightLineDesign(norris.x.map((x) => x * 1e-9)), 36, 2, target)!;
    expect(tiny.coefficients[1]! / plain.coefficients[1]!).toBeCloseTo(1e9, -1);
    expect(tiny.coefficients[0]!).toBeCloseTo(plain.coefficients[0]!, 10);
    expect(tiny.residualSumOfSquares).toBeCloseTo(plain.residualSumOfSquares, 9);
  });

  test('dependent columns, too few rows and values that are not finite give null', () => {
    const dependent = Float64Array.of(1, 2, 2, 4, 3, 6);
    expect(linearLeastSquares(dependent, 3, 2, Float64Array.of(1, 2, 4))).toBeNull();
    expect(linearLeastSquares(Float64Array.of(1, 2), 1, 2, Float64Array.of(1))).toBeNull();
    expect(linearLeastSquares(Float64Array.of(1, 0, 1, 0), 2, 2, Float64Array.of(1, 2))).toBeNull();
    expect(linearLeastSquares(Float64Array.of(1, Number.NaN), 2, 1, Float64Array.of(1, 2))).toBeNull();
  });

  test('a design that does not fit its stated shape is refused', () => {
    expect(() => linearLeastSquares(Float64Array.of(1, 2, 3), 2, 2, Float64Array.of(1, 2))).toThrow(
      /design of 3 values for 2 x 2/,
    );
    expect(() => linearLeastSquares(Float64Array.of(1, 2), 2, 1, Float64Array.of(1))).toThrow(/target/);
  });
});

describe('symmetric systems', () => {
  // Hilbert matrix of order 4 and its inverse in whole numbers: Choi, Am. Math. Monthly 90 (1983) 301, from memory
  const hilbert = Float64Array.from({ length: 16 }, (_, k) => 1 / (Math.floor(k / 4) + (k % 4) + 1));
  const hilbertInverse = [
    16, -120, 240, -140, -120, 1200, -2700, 1680, 240, -2700, 6480, -4200, -140, 1680, -4200, 2800,
  ];

  test('inverse of the Hilbert matrix of order 4 is the published one', () => {
    const inverse = invertSymmetric(hilbert, 4)!;
    for (let k = 0; k < 16; k++) expect(inverse[k]! / hilbertInverse[k]!).toBeCloseTo(1, 9);
  });

  test('solution with the Hilbert matrix agrees with its published inverse', () => {
    const solution = solveSymmetric(hilbert, 4, Float64Array.of(1, 0, 0, 0))!;
    for (let k = 0; k < 4; k++) expect(solution[k]! / hilbertInverse[k]!).toBeCloseTo(1, 9);
  });

  test('a matrix that is not positive definite gives null', () => {
    expect(invertSymmetric(Float64Array.of(1, 2, 2, 1), 2)).toBeNull();
    expect(invertSymmetric(Float64Array.of(0, 0, 0, 1), 2)).toBeNull();
    expect(solveSymmetric(Float64Array.of(1, 2, 2, 1), 2, Float64Array.of(1, 1))).toBeNull();
  });
});

describe('decompositions', () => {
  test('identity: U diag(s) V transposed is the matrix again, for tall and wide ones', () => {
    const shape = fc.record({
      rows: fc.integer({ min: 1, max: 7 }),
      columns: fc.integer({ min: 1, max: 7 }),
    });
    fc.assert(
      fc.property(shape, fc.infiniteStream(fc.integer({ min: -9, max: 9 })), ({ rows, columns }, stream) => {
        const matrix = Float64Array.from({ length: rows * columns }, () => stream.next().value);
        const { left, singularValues, right } = thinSvd(matrix, rows, columns);
        const k = Math.min(rows, columns);
        for (let row = 0; row < rows; row++) {
          for (let column = 0; column < columns; column++) {
            let sum = 0;
            for (let j = 0; j < k; j++)
              sum += left[row * k + j]! * singularValues[j]! * right[column * k + j]!;
            expect(sum).toBeCloseTo(matrix[row * columns + column]!, 9);
          }
        }
      }),
      { seed: 11, numRuns: 60 },
    );
  });

  test('condition number of the Hilbert matrix of order 4 is 15513.74 (numpy.linalg.cond)', () => {
    const hilbert = Float64Array.from({ length: 16 }, (_, k) => 1 / (Math.floor(k / 4) + (k % 4) + 1));
    expect(conditionNumber(hilbert, 4, 4)).toBeCloseTo(15513.738738929, 4);
    expect(conditionNumber(Float64Array.of(1, 2, 2, 4), 2, 2)).toBeGreaterThan(1e15);
  });

  test('companion matrix of (x - 2)(x^2 - 2x + 5): eigenvalues are the roots 2 and 1 +- 2i', () => {
    const { real, imaginary } = eigenvalues(Float64Array.of(4, -9, 10, 1, 0, 0, 0, 1, 0), 3);
    const roots = Array.from(real, (value, k) => [value, imaginary[k]!] as const).sort((a, b) => a[1] - b[1]);
    expect(roots.map(([re]) => Math.round(re * 1e9) / 1e9)).toEqual([1, 2, 1]);
    expect(roots[0]![1]).toBeCloseTo(-2, 10);
    expect(roots[2]![1]).toBeCloseTo(2, 10);
  });
});
