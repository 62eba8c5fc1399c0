import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { shortPath } from '../../src/report/short-path.ts';

/** Ends of the commands of a path in steps, read as the SVG 1.1 grammar says (8.3): numbers may touch where a sign or point parts them. */
function endsOf(path: string): [number, number][] {
  let [x, y, startX, startY] = [0, 0, 0, 0];
  return [...path.matchAll(/([mlqcz])([^mlqcz]*)/g)].map(([, command, rest]) => {
    if (command === 'z') [x, y] = [startX, startY];
    else {
      const numbers = [...(rest ?? '').matchAll(/-?(?:\d+\.?\d*|\.\d+)/g)].map(Number);
      const [dx, dy] = numbers.slice(-2) as [number, number];
      [x, y] = [x + dx, y + dy];
      if (command === 'm') [startX, startY] = [x, y];
    }
    return [x, y];
  });
}

const coordinate = fc.double({ min: -900, max: 900, noNaN: true });

describe('shortPath', () => {
  it('writes a path of the SVG 1.1 grammar as steps in tenths', () => {
    expect(shortPath('M10 20L10.44 20L12.5 19.96Q13 21 14.04 20Z')).toBe('m10 20l.4 0l2.1 0q.5 1 1.5 0z');
  });

  it('rounding does not add up: every end stays within a twentieth of a pixel', () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(coordinate, coordinate), { minLength: 2, maxLength: 200 }), (points) => {
        const far = points.filter(
          ([x, y], i) =>
            i === 0 || Math.hypot(x - (points[i - 1]?.[0] ?? 0), y - (points[i - 1]?.[1] ?? 0)) > 0.2,
        );
        const path = far.map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${x.toFixed(5)} ${y.toFixed(5)}`).join('');
        const ends = endsOf(shortPath(path));
        expect(ends).toHaveLength(far.length);
        for (const [i, [x, y]] of ends.entries()) {
          expect(Math.abs(x - (far[i]?.[0] ?? Number.NaN))).toBeLessThan(0.0501);
          expect(Math.abs(y - (far[i]?.[1] ?? Number.NaN))).toBeLessThan(0.0501);
        }
      }),
      { seed: 5, numRuns: 60 },
    );
  });

  it('leaves a path alone that has other commands', () => {
    expect(shortPath('M0 0A5 5 0 0 1 10 10')).toBe('M0 0A5 5 0 0 1 10 10');
    expect(shortPath('M0 0H10')).toBe('M0 0H10');
  });
});
