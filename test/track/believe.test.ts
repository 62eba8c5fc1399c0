import { describe, expect, test } from 'vitest';
import { believe } from '../../src/track/believe.ts';
import { chooseFit, SearchPlan } from '../../src/track/find-again.ts';
import { Travel } from '../../src/track/travel.ts';

const registration = { x: 50, y: 50, score: 0.98, gain: 1, residualDn: 2, iterations: 3, converged: true };
const seen = { surprisePx: 0.2, roomPx: 20, largestStepPx: 2, patchPx: 41, alias: null, wasLost: false };
const LIMIT = 0.96;

describe('believing a registration', () => {
  test('a good score where it was expected is believed without reserve', () => {
    expect(believe(registration, LIMIT, seen)).toEqual({ believed: true, reason: null });
  });

  test.each([
    ['a low score where it was expected', { score: 0.8 }, {}, { believed: true, reason: 'low-score' }],
    ['a low score elsewhere', { score: 0.8 }, { surprisePx: 3.5 }, { believed: false, reason: 'covered' }],
    [
      'a low score elsewhere after long steps',
      { score: 0.8 },
      { surprisePx: 3.5, largestStepPx: 10 },
      { believed: true },
    ],
    ['a score below 0.6', { score: 0.59 }, {}, { believed: false, reason: 'covered' }],
    [
      'one below 0.7 after a loss',
      { score: 0.69 },
      { wasLost: true },
      { believed: false, reason: 'covered' },
    ],
    ['no convergence', { converged: false }, {}, { believed: false, reason: 'covered' }],
    ['half a patch away', {}, { surprisePx: 21 }, { believed: false }],
    ['across the border', {}, { roomPx: -1 }, { believed: false, reason: 'at-border' }],
    [
      'a third of the way to a look-alike',
      {},
      { surprisePx: 5, alias: { distancePx: 12, score: 0.97 } },
      { reason: 'alias-jump' },
    ],
    [
      'as far with a poor look-alike',
      {},
      { surprisePx: 5, alias: { distancePx: 12, score: 0.82 } },
      { reason: null },
    ],
  ] as const)('%s', (_name, change, circumstances, belief) => {
    expect(believe({ ...registration, ...change }, LIMIT, { ...seen, ...circumstances })).toMatchObject(
      belief,
    );
  });
});

describe('choosing among fits', () => {
  const found = {
    x: 10,
    y: 10,
    score: 0.98,
    gain: 1,
    ambiguous: true,
    second: { x: 110, y: 10, score: 0.97 },
  };
  const anywhere = (): boolean => true;

  test('one that stands out is taken', () => {
    expect(chooseFit({ ...found, ambiguous: false }, null, anywhere)).toMatchObject({
      ambiguous: false,
      fit: { x: 10 },
    });
  });

  test('of two alike the only plausible one is taken, though it be the second', () => {
    expect(chooseFit(found, { x: 100, y: 10 }, ({ x }) => x > 90)).toMatchObject({
      ambiguous: false,
      fit: { x: 110 },
    });
  });

  test('of two plausible ones the clearly nearer is taken in doubt, and none where neither is', () => {
    expect(chooseFit(found, { x: 100, y: 10 }, anywhere)).toMatchObject({ ambiguous: true, fit: { x: 110 } });
    expect(chooseFit(found, { x: 60, y: 10 }, anywhere)).toBeNull();
    expect(chooseFit(found, null, anywhere)).toMatchObject({ ambiguous: true, fit: { x: 10 } });
  });
});

test('a lost marker is sought near its last place, every tenth frame in the whole region', () => {
  const plan = new SearchPlan(41);
  expect(plan.near(null, 0, 0, 0)).toBeNull();
  expect(plan.near({ x: 5, y: 6 }, 0, 10, 2)).toEqual({ x: 5, y: 6, radiusPx: 41 + 10 + 4 });
  expect(plan.near({ x: 5, y: 6 }, 8, 50, 20)!.radiusPx).toBe(128);
  expect(plan.near({ x: 5, y: 6 }, 9, 10, 2)).toBeNull();
  expect(plan.leastScore(0.98, true)).toBeCloseTo(0.88, 12);
  expect(plan.leastScore(0.98, false)).toBe(0.6);
});

test('travel allows its range, widened by its own extent and a slack', () => {
  const travel = new Travel();
  expect(travel.box).toBeNull();
  expect(travel.allows(1e6, 0, 0)).toBe(true);
  travel.include(10, 20);
  travel.include(16, 20);
  expect(travel.box).toEqual({ minX: 10, minY: 20, maxX: 16, maxY: 20 });
  expect(travel.extentPx).toBe(6);
  expect(travel.allows(22, 20, 0)).toBe(true);
  expect(travel.allows(22.1, 20, 0)).toBe(false);
  expect(travel.allows(26, 30, 4)).toBe(true);
});
