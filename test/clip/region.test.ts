import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fitRegion, type Region } from '../../src/clip/region.ts';

const picture = fc.record({
  codedWidth: fc.integer({ min: 2, max: 5000 }),
  codedHeight: fc.integer({ min: 2, max: 5000 }),
});
const wished: fc.Arbitrary<Region> = fc.record({
  x: fc.double({ min: -6000, max: 6000, noNaN: true }),
  y: fc.double({ min: -6000, max: 6000, noNaN: true }),
  width: fc.double({ min: 0, max: 6000, noNaN: true }),
  height: fc.double({ min: 0, max: 6000, noNaN: true }),
});

test('always even and inside, or the whole picture; twice is once', () => {
  fc.assert(
    fc.property(wished, picture, (wish, size) => {
      const fitted = fitRegion(wish, size);
      const isWhole = fitted.width === size.codedWidth && fitted.height === size.codedHeight;
      if (!isWhole)
        expect([fitted.x, fitted.y, fitted.width, fitted.height].map((v) => v % 2)).toEqual([0, 0, 0, 0]);
      expect(Math.min(fitted.x, fitted.y)).toBeGreaterThanOrEqual(0);
      expect(Math.min(fitted.width, fitted.height)).toBeGreaterThanOrEqual(2);
      expect(fitted.x + fitted.width).toBeLessThanOrEqual(size.codedWidth);
      expect(fitted.y + fitted.height).toBeLessThanOrEqual(size.codedHeight);
      expect(fitRegion(fitted, size)).toEqual(fitted);
    }),
    { seed: 1, numRuns: 2000 },
  );
});

test('equal wishes fit to equal sizes wherever they are, unless one is the whole picture', () => {
  fc.assert(
    fc.property(wished, wished, picture, (a, b, size) => {
      const first = fitRegion(a, size);
      const second = fitRegion({ ...a, x: b.x, y: b.y }, size);
      const whole = (r: Region): boolean => r.width === size.codedWidth && r.height === size.codedHeight;
      fc.pre(!whole(first) && !whole(second));
      expect([second.width, second.height]).toEqual([first.width, first.height]);
    }),
    { seed: 2, numRuns: 2000 },
  );
});

describe('where a wished rectangle comes to lie', () => {
  const size = { codedWidth: 321, codedHeight: 241 };
  test.each([
    [
      'odd corner: up and left by one',
      { x: 11, y: 9, width: 20, height: 30 },
      { x: 10, y: 8, width: 20, height: 30 },
    ],
    ['odd size: one larger', { x: 10, y: 8, width: 19, height: 29 }, { x: 10, y: 8, width: 20, height: 30 }],
    ['even already', { x: 10, y: 8, width: 20, height: 30 }, { x: 10, y: 8, width: 20, height: 30 }],
    [
      'over the left edge: moved, not cut',
      { x: -7, y: 8, width: 20, height: 30 },
      { x: 0, y: 8, width: 20, height: 30 },
    ],
    [
      'over the right edge of an odd picture',
      { x: 310, y: 8, width: 20, height: 30 },
      { x: 300, y: 8, width: 20, height: 30 },
    ],
    [
      'larger than the picture one way',
      { x: 5, y: 8, width: 900, height: 30 },
      { x: 0, y: 8, width: 320, height: 30 },
    ],
    [
      'the whole odd picture',
      { x: 0, y: 0, width: 321, height: 241 },
      { x: 0, y: 0, width: 321, height: 241 },
    ],
  ])('%s', (_what, wish, expected) => {
    expect(fitRegion(wish, size)).toEqual(expected);
  });
});
