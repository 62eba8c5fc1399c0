import { describe, expect, it } from 'vitest';
import { cycleChart } from '../../../src/report/charts/cycle-chart.ts';
import { motionStrip, thinned } from '../../../src/report/charts/motion-strip.ts';

const timesS = Float64Array.from({ length: 5000 }, (_, i) => i / 240);
const sine = timesS.map((t) => 3 * Math.sin(2 * Math.PI * 7 * t));

describe('thinned', () => {
  it('keeps every peak of a dense record: largest and least value are those of the whole', () => {
    const withSpike = Float64Array.from(sine);
    withSpike[2345] = 9;
    const points = thinned(timesS, withSpike, 100);
    expect(points.length).toBeLessThanOrEqual(200);
    expect(Math.max(...points.map((point) => point.y))).toBe(9);
    expect(Math.min(...points.map((point) => point.y))).toBe(Math.min(...withSpike));
  });

  it('keeps time rising, and keeps a gap a gap', () => {
    const gappy = Float64Array.from(sine).fill(Number.NaN, 1000, 1400);
    const points = thinned(timesS, gappy, 100);
    const xs = points.map((point) => point.x);
    expect(xs).toEqual([...xs].sort((a, b) => a - b));
    const inGap = points.filter(({ x }) => x >= 1010 / 240 && x < 1390 / 240);
    expect(inGap.length).toBeGreaterThan(0);
    expect(inGap.every(({ y }) => Number.isNaN(y))).toBe(true);
  });

  it('leaves a short record as it is', () => {
    expect(thinned([0, 1, 2], [5, 6, 7])).toEqual([
      { x: 0, y: 5 },
      { x: 1, y: 6 },
      { x: 2, y: 7 },
    ]);
  });
});

describe('motionStrip', () => {
  it('shades the window and draws the amplitude to both sides within it', () => {
    const chart = motionStrip({ timesS, displacement: sine, window: [4, 9], amplitude: 3 });
    const [window, , up, down] = chart.data.datasets;
    expect(window?.data.map((point) => point.x)).toEqual([4, 9]);
    expect(window?.fill).toEqual({ value: -(window?.data[0]?.y ?? 0) });
    expect([up?.data[0], down?.data[1]]).toEqual([
      { x: 4, y: 3 },
      { x: 9, y: -3 },
    ]);
  });

  it('draws a record without a window bare', () => {
    expect(
      motionStrip({ timesS, displacement: sine, window: null, amplitude: null }).data.datasets,
    ).toHaveLength(1);
  });
});

it('cycleChart lays the sine offset + A cos(2 pi c + phase) over one cycle', () => {
  const chart = cycleChart({
    cycle: [0, 0.5],
    displacement: [2.5, Number.NaN],
    offset: 0.5,
    amplitude: 2,
    phaseRad: 0,
  });
  const [samples, fit] = chart.data.datasets;
  expect(samples?.data).toEqual([{ x: 0, y: 2.5 }]);
  expect(fit?.data[0]?.y).toBeCloseTo(2.5, 12);
  expect(fit?.data[24]?.y).toBeCloseTo(-1.5, 12);
});
