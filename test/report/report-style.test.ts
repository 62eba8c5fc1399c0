import { expect, it } from 'vitest';
import { cssString, pageStyle } from '../../src/report/report-style.ts';

/** The value of a CSS string by the rules of CSS Syntax Level 3, 4.3.7: up to six hex digits and one space. */
function readCssString(text: string): string {
  return text
    .slice(1, -1)
    .replace(/\\([0-9a-f]{1,6}) ?/gi, (_, hex: string) => String.fromCodePoint(Number.parseInt(hex, 16)));
}

it.each(['plain 12', 'a"b\\c', '</style><script>x</script>', 'Prüfung Ω 😀', 'line\nbreak', ''])(
  'CSS Syntax Level 3: %j comes out as it went in, and nothing in it can end string or style sheet',
  (text) => {
    expect(readCssString(cssString(text))).toBe(text);
    expect(cssString(text).slice(1, -1)).not.toMatch(/["<>\n]/);
  },
);

it('pages are of the paper asked for, numbered, and say whose they are', () => {
  const letter = pageStyle('Letter', 'Carriage 7').markup;
  expect(letter).toContain('size:letter');
  expect(letter).toContain('"Carriage 7"');
  expect(letter).toContain('counter(page) " of " counter(pages)');
  expect(pageStyle('A4', 'x').markup).toContain('size:A4');
});
