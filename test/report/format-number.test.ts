import { describe, expect, it } from 'vitest';
import { decimalsFor, frequencyText, significant, withUncertainty } from '../../src/report/format-number.ts';

describe('numbers rounded to their uncertainty (two digits of u, JCGM 100 7.2.6)', () => {
  it.each([
    [10.05762, 0.027, '10.058 ± 0.027'], // the GUM's own example, 7.2.2: 10.057 62 ohm with 27 milliohm
    [4.81234, 0.0113, '4.812 ± 0.011'],
    [21.312, 0.0996, '21.31 ± 0.10'],
    [1234.5, 32, '1235 ± 32'],
    [0.00012346, 0.0000067, '0.0001235 ± 0.0000067'],
  ])('%d with u %d is shown as %s', (value, u, text) => {
    expect(withUncertainty(value, u)).toBe(text);
  });

  it('says nothing of an uncertainty that is not known, and shows a missing value as a dash', () => {
    expect(withUncertainty(2.71234, null)).toBe('2.712');
    expect(withUncertainty(null, 0.1)).toBe('–');
  });

  it('keeps every digit that was set on the generator', () => {
    expect(frequencyText(2.4)).toBe('2.400');
    expect(frequencyText(2.4365)).toBe('2.4365');
    expect(frequencyText(0.1 + 0.2)).toBe('0.3000');
  });

  it('rounds up into the next decade', () => {
    expect(decimalsFor(0.0996)).toBe(2);
    expect(decimalsFor(0.0994)).toBe(3);
    expect(significant(0, 3)).toBe('0');
  });
});
