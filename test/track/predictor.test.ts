import { expect, test } from 'vitest';
import { Predictor } from '../../src/track/predictor.ts';
import { seededRandom } from './seeded-random.ts';

/** Feeds a motion and returns the largest error of the predictions made after `warmUp` frames, px. */
function worstError(motion: (timeS: number) => number, times: readonly number[], warmUp: number): number {
  const predictor = new Predictor();
  let worst = 0;
  times.forEach((timeS, k) => {
    const guess = predictor.predict(timeS);
    if (k >= warmUp && guess)
      worst = Math.max(worst, Math.abs(guess.x - motion(timeS)), Math.abs(guess.y - 7));
    predictor.push(timeS, motion(timeS), 7);
  });
  return worst;
}

const even = (count: number, step = 1 / 60): number[] => Array.from({ length: count }, (_, k) => k * step);

test.each([1, 5, 12, 25, 29])(
  'identity: a sinusoid of 20 px at %d Hz obeys a two-term recursion, so it is predicted',
  (hz) => {
    const motion = (t: number): number => 100 + 20 * Math.sin(2 * Math.PI * hz * t + 0.3);
    expect(worstError(motion, even(200), 20)).toBeLessThan(0.05);
  },
);

test('growing and decaying oscillations are predicted too: their recursion has another last term', () => {
  expect(worstError((t) => 100 + 20 * Math.exp(-2 * t) * Math.cos(40 * t), even(200), 20)).toBeLessThan(0.05);
  expect(worstError((t) => 100 + 2 * Math.exp(0.7 * t) * Math.cos(40 * t), even(150), 20)).toBeLessThan(0.05);
});

test('times may run backwards', () => {
  const motion = (t: number): number => 100 + 20 * Math.sin(30 * t);
  expect(
    worstError(
      motion,
      even(120).map((t) => 5 - t),
      20,
    ),
  ).toBeLessThan(0.05);
});

test('dropped frames and jittering times are taken at their true times: 9 px a frame within 0.5 px', () => {
  const random = seededRandom(4);
  const motion = (t: number): number => 100 + 17 * Math.sin(2 * Math.PI * 5 * t);
  const dropped = even(260).filter((_, k) => k % 11 !== 10 && k % 23 !== 5);
  expect(worstError(motion, dropped, 25)).toBeLessThan(0.5);
  const jittered = even(200).map((t) => t + 0.003 * (2 * random.uniform() - 1));
  expect(worstError(motion, jittered, 25)).toBeLessThan(0.5);
});

test('noise of 0.02 px is not blown up where the marker is at rest or moves slowly', () => {
  const random = seededRandom(8);
  const noise = (): number => 0.02 * random.normal();
  expect(worstError(() => 50 + noise(), even(200), 15)).toBeLessThan(0.2);
  expect(worstError((t) => 50 + 30 * Math.sin(0.8 * t) + noise(), even(200), 15)).toBeLessThan(0.3);
});

test('the first frames: nothing, then the place, then the line, then the parabola', () => {
  const predictor = new Predictor();
  expect(predictor.predict(0)).toBeNull();
  predictor.push(0, 10, 20);
  expect(predictor.predict(1)).toEqual({ x: 10, y: 20 });
  predictor.push(1, 11, 18);
  expect(predictor.predict(2)!.x).toBeCloseTo(12, 12);
  predictor.push(2, 14, 16);
  expect(predictor.predict(3)!.x).toBeCloseTo(19, 12);
  expect(predictor.largestStepPx()).toBeCloseTo(Math.hypot(3, 2), 12);
  predictor.clear();
  expect(predictor.length).toBe(0);
  expect(predictor.predict(4)).toBeNull();
});

test('a prediction never leaps further than one and a half of the largest step and 2 px', () => {
  const predictor = new Predictor();
  even(20).forEach((t, k) => {
    predictor.push(t, k === 19 ? 103 : 100, 50);
  });
  const guess = predictor.predict(20 / 60)!;
  expect(Math.abs(guess.x - 103)).toBeLessThanOrEqual(1.5 * 3 + 2);
});

test('equal times are no division by zero', () => {
  const predictor = new Predictor();
  for (let k = 0; k < 12; k++) predictor.push(1, 100 + k, 50);
  expect(Number.isFinite(predictor.predict(1)!.x)).toBe(true);
  expect(Number.isFinite(predictor.predict(2)!.x)).toBe(true);
});
