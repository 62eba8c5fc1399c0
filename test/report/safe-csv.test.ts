import fc from 'fast-check';
import { expect, it } from 'vitest';
import { csvField, csvLine } from '../../src/report/safe-csv.ts';

it('quotes as RFC 4180 2.5 to 2.7 ask: commas, line ends, quotes doubled', () => {
  expect(csvLine(['a,b', 'say "no"', 'two\nlines', 3.5, null])).toBe(
    '"a,b","say ""no""","two\nlines",3.5,\r\n',
  );
});

it('no text field can start a formula in a spreadsheet', () => {
  fc.assert(
    fc.property(fc.string(), (text) => {
      const field = csvField(text);
      const content = field.startsWith('"') ? field.slice(1, -1).replaceAll('""', '"') : field;
      expect(content).not.toMatch(/^[=+\-@\t\r]/);
      expect(content.replace(/^'/, '')).toBe(text.replace(/^'/, ''));
    }),
  );
});

it('a negative number stays a number, and what is not finite is left empty', () => {
  expect(csvField(-1.5)).toBe('-1.5');
  expect(csvField(Number.NaN)).toBe('');
});
