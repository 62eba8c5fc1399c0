import { describe, expect, it } from 'vitest';
import { curveCrossings, curvePeak, curveShape } from '../../src/resonance/curve-shape.ts';
import {
  cyclesToHalf,
  dampingRatioFromDecrement,
  logDecrement,
  lossFactorFromWidth,
} from '../../src/resonance/damping-measures.ts';
import { classicHalfPowerBias, fromHalfPowerPoints } from '../../src/resonance/half-power.ts';
import { DAMPINGS, EXCITATIONS } from '../../src/resonance/models.ts';

describe('half-power points inverted exactly', () => {
  const models = EXCITATIONS.flatMap((excitation) => DAMPINGS.map((damping) => ({ excitation, damping })));
  it.each(models)('identity: $excitation, $damping gives back natural frequency and damping', (model) => {
    const tolerance = model.excitation === 'base' || model.damping === 'structural' ? 1e-9 : 1e-12;
    for (const damping of [0.002, 0.02, 0.1, 0.25]) {
      const { lower, upper } = curveCrossings(curveShape(model, damping));
      const found = fromHalfPowerPoints(model, 3.7 * lower!, 3.7 * upper!);
      expect(Math.abs(found!.damping - damping)).toBeLessThan(tolerance);
      expect(Math.abs(found!.naturalHz / 3.7 - 1)).toBeLessThan(tolerance);
    }
  });

  it('points in the wrong order or at zero give nothing', () => {
    const model = { excitation: 'force', damping: 'viscous' } as const;
    expect(fromHalfPowerPoints(model, 5, 4)).toBeNull();
    expect(fromHalfPowerPoints(model, 0, 4)).toBeNull();
  });

  it('a very wide resonance is inverted too: the points lie where the model puts them', () => {
    const model = { excitation: 'base', damping: 'viscous' } as const;
    const found = fromHalfPowerPoints(model, 1, 40)!;
    const { lower, upper } = curveCrossings(curveShape(model, found.damping));
    expect(lower! * found.naturalHz).toBeCloseTo(1, 6);
    expect(upper! * found.naturalHz).toBeCloseTo(40, 4);
  });
});

it.each([
  [0.01, 0.02],
  [0.02, 0.08],
  [0.05, 0.504],
  [0.1, 2.062],
  [0.2, 9.131],
  [0.3, 25.589],
])(
  'bias in %% of (f2 - f1)/(2 f_peak) at zeta %d (derived from the closed-form half-power points)',
  (zeta, percent) => {
    expect(Math.abs(100 * classicHalfPowerBias(zeta)! - percent)).toBeLessThan(1e-3);
  },
);

it('no bias is given where the lower half-power point is gone', () => {
  expect(classicHalfPowerBias(0.4)).toBeNull();
});

describe('n-dB loss factor as in ASTM E756 (from memory)', () => {
  it.each([
    [0.5, 0.0400249964],
    [1, 0.0400260939],
    [3, 0.0400320004],
    [6, 0.04004796],
  ])('width %d dB down of the receptance with zeta 0.02', (decibels, expected) => {
    const shape = curveShape({ excitation: 'force', damping: 'viscous' }, 0.02);
    const { lower, upper } = curveCrossings(shape, 10 ** (decibels / 20));
    const eta = lossFactorFromWidth(upper! - lower!, curvePeak(shape)!.ratio, decibels);
    expect(Math.abs(eta - expected)).toBeLessThan(1e-9);
  });

  it('3 dB exactly needs the factor 1.002377, half power none', () => {
    expect(lossFactorFromWidth(1, 10, 3) / 0.1).toBeCloseTo(1.002377, 6);
    expect(lossFactorFromWidth(1, 10, 10 * Math.log10(2)) / 0.1).toBeCloseTo(1, 12);
  });
});

describe('logarithmic decrement (Den Hartog, Thomson; from memory)', () => {
  it.each([
    [0.01, 0.0628349949, 1.0648511189],
    [0.05, 0.3145527023, 1.3696465342],
    [0.1, 0.6314838834, 1.8803988026],
    [0.2, 1.2825498302, 3.605822248],
  ])('zeta %d: decrement and ratio of maxima', (zeta, decrement, ratio) => {
    expect(Math.abs(logDecrement(zeta)! - decrement)).toBeLessThan(1e-9);
    expect(Math.abs(Math.exp(logDecrement(zeta)!) - ratio)).toBeLessThan(1e-9);
    expect(dampingRatioFromDecrement(decrement)).toBeCloseTo(zeta, 9);
    expect(cyclesToHalf(zeta)).toBeCloseTo((0.1103178 * Math.sqrt(1 - zeta * zeta)) / zeta, 5);
  });

  it('OpenStax: 3.0 % less each cycle is zeta 0.0048476765; 1/e after 159 cycles is Q = 159 pi', () => {
    expect(dampingRatioFromDecrement(-Math.log(0.97))).toBeCloseTo(0.0048476765, 10);
    expect(1 / (2 * dampingRatioFromDecrement(1 / 159))).toBeCloseTo(159 * Math.PI, 2);
  });

  it('a critically damped system has none', () => {
    expect(logDecrement(1)).toBeNull();
    expect(cyclesToHalf(0)).toBeNull();
  });
});
