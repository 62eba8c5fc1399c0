import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { setupAxis } from '../../src/engine/setup-axis.ts';
import type { MotionAxis } from '../../src/scale/motion-axis.ts';

function axis(angleDeg: number, uAngleDeg: number | null): MotionAxis {
  const rad = (angleDeg * Math.PI) / 180;
  return {
    directionX: Math.cos(rad),
    directionY: Math.sin(rad),
    angleDeg,
    uAngleDeg,
    origin: 'motion',
    ellipticity: 0,
    warning: null,
  };
}

describe('one axis for a camera setup', () => {
  it('is the weighted mean of angles that agree (weighted mean and its u, JCGM 100 and any textbook)', () => {
    const one = setupAxis([axis(10, 0.1), axis(10.3, 0.2)]);
    expect(one?.angleDeg).toBeCloseTo((10 / 0.01 + 10.3 / 0.04) / (1 / 0.01 + 1 / 0.04), 9);
    // chi2 = 0.3^2 / (0.1^2 + 0.2^2) = 1.8 with one degree of freedom: widened by its root
    expect(one?.uAngleDeg).toBeCloseTo(Math.sqrt(1.8 / 125), 9);
  });

  it('takes lines that differ by half a turn for one line, whatever side of the sign jump they are on', () => {
    fc.assert(
      fc.property(fc.double({ min: -90, max: 90, noNaN: true }), (angle) => {
        const one = setupAxis([axis(angle, 0.1), axis(angle + 180, 0.1)]);
        expect(Math.abs(Math.sin(((one?.angleDeg ?? 45) - angle) * (Math.PI / 180)))).toBeLessThan(1e-9);
      }),
    );
  });

  it('a clip whose motion is too small to show a direction does not turn it', () => {
    expect(setupAxis([axis(3, 0.02), axis(80, 60)])?.angleDeg).toBeCloseTo(3, 9);
    expect(setupAxis([])).toBeNull();
  });
});
