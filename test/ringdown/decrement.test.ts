import { describe, expect, test } from 'vitest';
import {
  dampedFrequency,
  dampingRatioOf,
  decrementFromAmplitudes,
  decrementOf,
  energyLossPerPeriod,
  periodsToFraction,
} from '../../src/ringdown/decrement.ts';

describe('logarithmic decrement', () => {
  test.each([
    [0.01, 0.0628349949, 1.0648511189],
    [0.05, 0.3145527023, 1.3696465342],
    [0.1, 0.6314838834, 1.8803988026],
    [0.2, 1.2825498302, 3.605822248],
  ])(
    'definition 2 pi z/sqrt(1 - z^2): damping ratio %d gives %d and a ratio of peaks of %d',
    (zeta, d, ratio) => {
      expect(decrementOf(zeta)).toBeCloseTo(d, 9);
      expect(Math.exp(decrementOf(zeta))).toBeCloseTo(ratio, 9);
      expect(dampingRatioOf(d)).toBeCloseTo(zeta, 9);
    },
  );

  test('Den Hartog, Thomson (from memory): cycles to half amplitude are 0.110 sqrt(1 - z^2)/z', () => {
    for (const zeta of [0.01, 0.05, 0.2]) {
      const rule = (0.1103178 * Math.sqrt(1 - zeta ** 2)) / zeta;
      expect(periodsToFraction(zeta, 0.5) / rule).toBeCloseTo(1, 6);
    }
  });

  test('Rao, motor-cycle absorber (from memory): a quarter every half cycle, damped period 2 s, 200 kg', () => {
    const decrement = decrementFromAmplitudes(1, 1 / 4, 0.5);
    expect(decrement).toBeCloseTo(2.772589, 6);
    const zeta = dampingRatioOf(decrement);
    expect(zeta / 0.403713).toBeCloseTo(1, 5);
    const natural = Math.PI / dampedFrequency(1, zeta);
    expect(natural / 3.433863).toBeCloseTo(1, 6);
    expect((2 * 200 * zeta * natural) / 554.518).toBeCloseTo(1, 5);
    expect((200 * natural ** 2) / 2358.283).toBeCloseTo(1, 6);
  });

  test('Thomson (from memory): 10 lb, 30 lb/in, 0.12 lb s/in', () => {
    // Thomson rounds g to 386 in/s^2
    const mass = 10 / 386;
    const critical = 2 * Math.sqrt(30 * mass);
    expect(critical / 1.7632).toBeCloseTo(1, 4);
    const decrement = decrementOf(0.12 / critical);
    expect(decrement / 0.4286).toBeCloseTo(1, 3);
    expect(Math.exp(decrement) / 1.535).toBeCloseTo(1, 3);
  });

  test('OpenStax College Physics: 3 % of the amplitude a cycle is 5.91 % of the energy, damping ratio 0.0048476765', () => {
    const zeta = dampingRatioOf(decrementFromAmplitudes(1, 0.97, 1));
    expect(zeta / 0.0048476765).toBeCloseTo(1, 7);
    expect(energyLossPerPeriod(zeta)).toBeCloseTo(0.0591, 10);
  });

  test.each([
    [0.005, 146.5853],
    [0.01, 73.2899],
    [0.02, 36.6394],
    [0.05, 14.6404],
    [0.1, 7.2926],
  ])('derived: with damping ratio %d a transient takes %d damped cycles to fall to 1 %%', (zeta, cycles) => {
    expect(periodsToFraction(zeta, 0.01)).toBeCloseTo(cycles, 4);
  });

  test('impossible arguments are refused', () => {
    expect(() => decrementOf(1)).toThrow(/damping ratio/);
    expect(() => dampingRatioOf(Number.NaN)).toThrow(/decrement/);
    expect(() => decrementFromAmplitudes(1, 0, 1)).toThrow(/positive/);
    expect(() => periodsToFraction(0.1, 1)).toThrow(/fraction/);
  });
});
