import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type CurveShape, curveCrossings, curvePeak, curveShape } from '../../src/resonance/curve-shape.ts';
import { DAMPINGS, EXCITATIONS, unitAmplitude, unitResponse } from '../../src/resonance/models.ts';

const force = (zeta: number) => curveShape({ excitation: 'force', damping: 'viscous' }, zeta);
const near = (found: number | null | undefined, expected: number, tolerance: number) => {
  expect(found).not.toBeNull();
  expect(Math.abs(found! - expected)).toBeLessThan(tolerance);
};

describe('closed forms of the handbooks (Den Hartog, Thomson, Rao, Ewins; from memory)', () => {
  it.each([
    [0.05, 0.99749687, 10.01252349],
    [0.1, 0.98994949, 5.02518908],
    [0.2, 0.9591663, 2.55155182],
    [0.3, 0.90553851, 1.74714139],
  ])('force: peak at zeta %d', (zeta, ratio, height) => {
    near(curvePeak(force(zeta))?.ratio, ratio, 1e-8);
    near(curvePeak(force(zeta))?.amplitude, height, 1e-8);
  });

  it('force: no peak from zeta 0.7071 on', () => {
    expect(curvePeak(force(0.7072))).toBeNull();
    expect(curvePeak(force(0.7069))).not.toBeNull();
  });

  it.each([
    [0.01, 0.98984898, 1.00985098],
    [0.02, 0.97939165, 1.01940767],
    [0.05, 0.9461105, 1.04636271],
    [0.1, 0.88374347, 1.08581651],
    [0.2, 0.72669226, 1.14539005],
    [0.3, 0.49763087, 1.17998454],
  ])('force: half-power points at zeta %d', (zeta, lower, upper) => {
    const found = curveCrossings(force(zeta));
    near(found.lower, lower, 1e-8);
    near(found.upper, upper, 1e-8);
  });

  it('force: the lower half-power point vanishes at zeta 0.3827', () => {
    expect(curveCrossings(force(0.3826)).lower).not.toBeNull();
    expect(curveCrossings(force(0.3828)).lower).toBeNull();
    expect(curveCrossings(force(0.3828)).upper).not.toBeNull();
  });

  it('force: velocity has half-power width 2 zeta fn exactly, and f1 f2 = fn^2', () => {
    const velocity: CurveShape = { ...force(0.05), numerator: [0, 1, 0] };
    const { lower, upper } = curveCrossings(velocity);
    near(lower, 0.9512492197, 1e-10);
    near(upper, 1.0512492197, 1e-10);
    near(lower! * upper!, 1, 1e-12);
  });

  it.each([
    [0.01, 1.7323974605],
    [0.05, 1.7408660591],
    [0.1, 1.7693558815],
  ])('force: full width at half amplitude over 2 zeta fn at zeta %d', (zeta, expected) => {
    const { lower, upper } = curveCrossings(force(zeta), 2);
    near((upper! - lower!) / (2 * zeta), expected, 1e-9);
  });

  it.each([
    [0.05, 0.99752162, 10.06221372],
    [0.1, 0.99033434, 5.12277358],
    [0.2, 0.96472966, 2.73392111],
    [0.5, 0.85559968, 1.46788983],
  ])('transmissibility: peak at zeta %d', (zeta, ratio, height) => {
    const peak = curvePeak(curveShape({ excitation: 'base', damping: 'viscous' }, zeta));
    near(peak?.ratio, ratio, 1e-8);
    near(peak?.amplitude, height, 1e-8);
  });

  it.each([
    [0.05, 1.00250941, 10.01252349],
    [0.1, 1.01015254, 5.02518908],
    [0.2, 1.04257207, 2.55155182],
  ])('unbalance and relative motion: peak at zeta %d', (zeta, ratio, height) => {
    for (const excitation of ['unbalance', 'base-relative'] as const) {
      const peak = curvePeak(curveShape({ excitation, damping: 'viscous' }, zeta));
      near(peak?.ratio, ratio, 1e-7);
      near(peak?.amplitude, height, 1e-7);
    }
  });

  it.each([
    [0.02, 0.0200010002],
    [0.1, 0.1001255501],
    [0.2, 0.201017924],
  ])(
    'structural damping: bandwidth/fn at eta %d, peak 1/eta at fn, f2^2 - f1^2 = 2 eta fn^2',
    (eta, width) => {
      const shape = curveShape({ excitation: 'force', damping: 'structural' }, eta);
      const { lower, upper } = curveCrossings(shape);
      near(upper! - lower!, width, 1e-9);
      near((upper! ** 2 - lower! ** 2) / 2, eta, 1e-12);
      near(curvePeak(shape)?.ratio, 1, 1e-12);
      near(curvePeak(shape)?.amplitude, 1 / eta, 1e-10);
    },
  );
});

it('the shape is the model: same amplitude, and no frequency near the peak is higher', () => {
  const ratios = fc.double({ min: 0.05, max: 4, noNaN: true });
  const dampings = fc.double({ min: 0.003, max: 0.6, noNaN: true });
  for (const excitation of EXCITATIONS) {
    for (const damping of DAMPINGS) {
      const model = { excitation, damping };
      fc.assert(
        fc.property(ratios, dampings, (r, d) => {
          const { numerator: n, denominator: q } = curveShape(model, d);
          const w = r * r;
          const amplitude = unitAmplitude(unitResponse(model, r, 1, d));
          const shaped = Math.sqrt((n[0] + n[1] * w + n[2] * w * w) / (q[0] + q[1] * w + q[2] * w * w));
          expect(Math.abs(shaped / amplitude - 1)).toBeLessThan(1e-9);
          const peak = curvePeak(curveShape(model, d));
          if (peak !== null) expect(amplitude).toBeLessThanOrEqual(peak.amplitude * (1 + 1e-12));
        }),
        { seed: 5, numRuns: 60 },
      );
    }
  }
});
