import { expect, test } from 'vitest';
import { ScoreHistory } from '../../src/track/score-history.ts';
import { seededRandom } from './seeded-random.ts';

test('before there is a history the limit is 0.1 below what noise explains, and never below 0.6', () => {
  expect(new ScoreHistory(0.99).limit).toBeCloseTo(0.89, 12);
  expect(new ScoreHistory(0.65).limit).toBe(0.6);
});

test('steady scores: the limit is 0.015 below their median', () => {
  const history = new ScoreHistory(0.99);
  for (let k = 0; k < 30; k++) history.push(0.97);
  expect(history.usual).toBe(0.97);
  expect(history.limit).toBeCloseTo(0.955, 12);
});

test('scores that scatter by 0.01 pass, all but one in thousands', () => {
  const random = seededRandom(3);
  const history = new ScoreHistory(0.9);
  let below = 0;
  for (let k = 0; k < 4000; k++) {
    const score = 0.88 + 0.01 * random.normal();
    if (k > 60 && score < history.limit) below++;
    history.push(score);
  }
  expect(below).toBeLessThan(12);
});

test('a covered marker does not make low scores usual, however slowly or long it is covered', () => {
  const suddenly = new ScoreHistory(0.99);
  for (let k = 0; k < 60; k++) suddenly.push(0.99);
  for (let k = 0; k < 300; k++) {
    expect(0.8).toBeLessThan(suddenly.limit);
    suddenly.push(0.8);
  }
  const slowly = new ScoreHistory(0.99);
  for (let k = 0; k < 60; k++) slowly.push(0.99);
  let firstDoubt = 1;
  for (let score = 0.99; score > 0.6; score -= 0.0005) {
    if (score < slowly.limit) firstDoubt = Math.min(firstDoubt, k(score));
    slowly.push(score);
  }
  function k(score: number): number {
    return 0.99 - score;
  }
  // At the latest when a quarter of the patch is covered.
  expect(firstDoubt).toBeLessThan(0.1);
});

test('better scores are taken up', () => {
  const history = new ScoreHistory(0.9);
  for (let k = 0; k < 61; k++) history.push(0.9);
  for (let k = 0; k < 61; k++) history.push(0.98);
  expect(history.usual).toBe(0.98);
});
