import { expect, test } from 'vitest';
import { LineTail } from '../../src/clip/line-tail.ts';

const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

test('lines are told apart wherever the pieces break, in the middle of a letter too', () => {
  const whole = bytes('first\nzweite Zeile für µm\r\nthird');
  for (let cut = 0; cut <= whole.length; cut++) {
    const seen: string[] = [];
    const tail = new LineTail(9, (line) => seen.push(line));
    tail.push(whole.subarray(0, cut));
    tail.push(whole.subarray(cut));
    expect(tail.end()).toEqual(['first', 'zweite Zeile für µm', 'third']);
    expect(seen).toEqual(['first', 'zweite Zeile für µm', 'third']);
  }
});

test('only the last lines are kept', () => {
  const tail = new LineTail(2);
  tail.push(bytes('a\nb\nc\nd\n'));
  expect(tail.end()).toEqual(['c', 'd']);
});

test('a line without an end is cut, not kept whole', () => {
  const tail = new LineTail(2);
  for (let i = 0; i < 100; i++) tail.push(bytes('x'.repeat(1000)));
  expect(tail.end()[0]).toHaveLength(2000);
});
