import { expect, it } from 'vitest';
import { inUnit, lengthUnit, measuredInUnit } from '../../src/report/length-unit.ts';

it('NIST SP 811, B.6: an inch is 25.4 mm exactly', () => {
  const inches = lengthUnit(true);
  expect(inches.name).toBe('in');
  expect(inUnit(25.4, inches)).toBeCloseTo(1, 15);
  expect(measuredInUnit({ value: 254, u: 2.54 }, inches)).toEqual({ value: 10, u: 0.1 });
});

it('millimetres stay as they are, and what is not known stays unknown', () => {
  const mm = lengthUnit(false);
  expect(measuredInUnit({ value: 3.25, u: null }, mm)).toEqual({ value: 3.25, u: null });
  expect(inUnit(null, lengthUnit(true))).toBeNull();
});
