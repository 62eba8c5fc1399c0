import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { type AlgebraicCircleFit, algebraicCircle, type Circle } from '../../src/resonance/circle-fit.ts';
import { geometricCircle } from '../../src/resonance/circle-geometric.ts';

const points = JSON.parse(readFileSync(new URL('../data/circle.json', import.meta.url), 'utf8')) as {
  x: number[];
  y: number[];
};
const second = { x: [9, 35, -13, 10, 23, 0], y: [34, 10, 6, -14, 27, -10] };

function expectCircle(found: Circle | null, expected: readonly number[], tolerance: number) {
  [found!.centreX, found!.centreY, found!.radius].forEach((value, i) => {
    expect(Math.abs(value - expected[i]!)).toBeLessThan(tolerance);
  });
}

describe('Gander, Golub and Strebel 1994 (from memory), six points', () => {
  it('geometric circle as printed, 1e-4, sum of squares 1.2275990782', () => {
    const found = geometricCircle(points.x, points.y);
    expectCircle(found, [4.7398, 2.9835, 4.7142], 1e-4);
    expect(found!.residualSumOfSquares).toBeCloseTo(1.2275990782, 7);
  });

  it.each([
    ['kasa', [4.742331288, 3.835122699, 4.108761522]],
    ['pratt', [4.615481517, 2.807354397, 4.911301597]],
    ['taubin', [4.613932694, 2.795209347, 4.879212846]],
  ] as const)('%s as computed independently with numpy, 1e-7', (method, expected) => {
    expectCircle(algebraicCircle(points.x, points.y, method), expected, 1e-7);
  });
});

describe('a second six points, computed independently with numpy', () => {
  it.each([
    ['kasa', [10.552312856, 9.705900056, 23.362410562]],
    ['pratt', [10.550297611, 9.709954207, 23.415414159]],
    ['taubin', [10.550293007, 9.709963435, 23.362572652]],
  ] as const)('%s, 1e-7', (method, expected) => {
    expectCircle(algebraicCircle(second.x, second.y, method), expected, 1e-7);
  });

  it('geometric, six decimals', () => {
    expectCircle(geometricCircle(second.x, second.y), [10.500086, 9.65995, 23.333528], 1e-6);
  });
});

describe('bias on a quarter circle, radius 1, noise 0.02, 40 points (Monte Carlo figures, 2000 runs)', () => {
  it.each([
    ['kasa', 0.968],
    ['pratt', 1.0015],
    ['taubin', 1.0012],
  ] as const)('%s: mean radius', (method: AlgebraicCircleFit, expected) => {
    const random = seededRandom(9);
    let sum = 0;
    const runs = 2000;
    for (let run = 0; run < runs; run++) {
      const x: number[] = [];
      const y: number[] = [];
      for (let i = 0; i < 40; i++) {
        const angle = (Math.PI / 2) * (i / 39);
        x.push(Math.cos(angle) + 0.02 * random.normal());
        y.push(Math.sin(angle) + 0.02 * random.normal());
      }
      sum += algebraicCircle(x, y, method)!.radius;
    }
    expect(Math.abs(sum / runs - expected)).toBeLessThan(0.004);
  });
});

describe('identities', () => {
  it.each(['kasa', 'pratt', 'taubin'] as const)(
    '%s: points on a circle give it back, moved and scaled too',
    (method) => {
      const angles = [0.1, 0.9, 1.4, 2.2, 4];
      const x = angles.map((a) => 1e3 + 2e-3 * Math.cos(a));
      const y = angles.map((a) => -5e2 + 2e-3 * Math.sin(a));
      expectCircle(algebraicCircle(x, y, method), [1e3, -5e2, 2e-3], 1e-8);
    },
  );

  it('points on a line, or two points, have no circle', () => {
    expect(algebraicCircle([0, 1, 2, 3], [1, 2, 3, 4])).toBeNull();
    expect(geometricCircle([0, 1], [1, 2])).toBeNull();
  });
});
