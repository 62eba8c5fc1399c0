import { describe, expect, it } from 'vitest';
import { amplitudeChart } from '../../../src/report/charts/amplitude-chart.ts';
import { comparisonChart } from '../../../src/report/charts/comparison-chart.ts';
import { lagChart } from '../../../src/report/charts/lag-chart.ts';
import { PAPER_LOOKS, seriesLook } from '../../../src/report/charts/looks.ts';
import type { PlotChart } from '../../../src/report/charts/plot-chart.ts';
import { residualChart } from '../../../src/report/charts/residual-chart.ts';
import type { ResponseData } from '../../../src/report/charts/response-data.ts';
import { trendChart } from '../../../src/report/charts/trend-chart.ts';

const dwell = (name: string, driveHz: number, amplitude: number, excluded = false) => ({
  name,
  driveHz,
  amplitude,
  amplitudeBar: 0.2,
  lagDeg: null,
  lagBarDeg: null,
  excluded,
});

const DATA: ResponseData = {
  amplitudeTitle: 'amplitude, mm (zero to peak)',
  dwells: [dwell('a', 2, 4), dwell('b', 3, 9), dwell('c', 4, 3, true)],
  curve: {
    driveHz: Float64Array.of(2, 3, 4),
    amplitude: Float64Array.of(4, 10, 3),
    amplitudeBar: Float64Array.of(0.5, 1, 0.5),
    lagDeg: Float64Array.of(10, 90, 170),
    lagBarDeg: null,
  },
  naturalHz: 3,
  halfPower: { lowerHz: 2.8, upperHz: 3.2, amplitude: 10 / Math.SQRT2 },
};

const labels = (chart: PlotChart | null) =>
  chart?.data.datasets.map((series) => series.label).filter(Boolean);
const series = (chart: PlotChart | null, label: string) =>
  chart?.data.datasets.find((each) => each.label === label);

describe('amplitudeChart', () => {
  const chart = amplitudeChart(DATA);

  it('shows band, fit, half-power points, natural frequency, dwells, and excluded ones apart', () => {
    expect(labels(chart)).toEqual([
      '95 % band',
      'fit',
      'half-power points',
      'natural frequency',
      'dwells',
      'excluded',
    ]);
    expect(series(chart, 'dwells')?.data.map((point) => point.name)).toEqual(['a', 'b']);
    expect(series(chart, 'excluded')?.pointStyle).toBe('crossRot');
    expect(series(chart, 'half-power points')?.data[0]).toEqual({ x: 2.8, y: 10 / Math.SQRT2 });
  });

  it('bars reach from amplitude - U to amplitude + U with a gap between dwells', () => {
    const bars = chart.data.datasets.find((each) => each.label === '' && each.pointStyle === 'line');
    expect(bars?.data.slice(0, 2)).toEqual([
      { x: 2, y: 3.8 },
      { x: 2, y: 4.2 },
    ]);
    expect(bars?.data[2]?.y).toBeNaN();
  });

  it('the band is filled from curve + half to curve - half', () => {
    const top = chart.data.datasets[0];
    expect(top?.fill).toBe('+1');
    expect(top?.data[1]?.y).toBe(11);
    expect(chart.data.datasets[1]?.data[1]?.y).toBe(9);
  });

  it('draws dwells alone where there is no fit', () => {
    expect(labels(amplitudeChart({ ...DATA, curve: null, naturalHz: null, halfPower: null }))).toEqual([
      'dwells',
      'excluded',
    ]);
  });
});

it('lagChart: no lag, no chart; else 0 to 180 degrees, wider where a lag lies outside', () => {
  expect(lagChart(DATA)).toBeNull();
  const withLag = (lagDeg: number) => ({ ...DATA, dwells: [{ ...dwell('a', 2, 4), lagDeg, lagBarDeg: 1 }] });
  expect(lagChart(withLag(30))?.options?.scales?.['y']).toMatchObject({ min: 0, max: 180 });
  expect(lagChart(withLag(-20))?.options?.scales?.['y']).toMatchObject({ min: -45, max: 180 });
});

it('residualChart: nothing fitted, no chart; else at least 3 u to both sides', () => {
  const none = { driveHz: 2, amplitudeResidual: null, lagResidual: null };
  expect(residualChart([none], {})).toBeNull();
  const chart = residualChart([none, { driveHz: 3, amplitudeResidual: -4.2, lagResidual: 0.5 }], {
    min: 1,
    max: 4,
  });
  expect(chart?.options?.scales?.['y']).toMatchObject({ min: -5, max: 5 });
  expect(labels(chart)).toEqual(['± 2 u', 'amplitude', 'lag']);
});

it('comparisonChart: each configuration its own shape, the curve without a second legend entry', () => {
  const chart = comparisonChart(
    [
      { label: 'soft', data: DATA },
      { label: 'hard', data: DATA },
    ],
    'amplitude',
  );
  expect(labels(chart)).toEqual(['soft', 'hard']);
  expect(series(chart, 'soft')?.pointStyle).not.toBe(series(chart, 'hard')?.pointStyle);
  expect(series(chart, 'soft')?.data).toHaveLength(2);
});

it('trendChart: no band where its width is not known', () => {
  const trend = [
    { x: 0, value: 1, half: null },
    { x: 1, value: 2, half: null },
  ];
  const chart = trendChart({ xTitle: 'm', yTitle: 'y', points: [{ x: 0, y: 1, bar: null }], trend });
  expect(labels(chart)).toEqual(['trend', 'configurations, bars ± U']);
});

it('twelve series differ in black and white: no two have both shape and dash alike within the first four', () => {
  const seen = Array.from({ length: 4 }, (_, k) => seriesLook(PAPER_LOOKS, k)).map(
    ({ pointStyle, dash }) => `${pointStyle} ${dash.join(',')}`,
  );
  expect(new Set(seen).size).toBe(4);
  const coloured = Array.from({ length: 12 }, (_, k) => JSON.stringify(seriesLook(PAPER_LOOKS, k)));
  expect(new Set(coloured).size).toBe(12);
});
