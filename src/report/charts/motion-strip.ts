import { type ChartLooks, PAPER_LOOKS, seeThrough, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, plotChart } from './plot-chart.ts';
import { lineSeries } from './series.ts';

/** A motion record with the window that was measured in it, displacement in the unit of the plot. */
export interface MotionStripData {
  readonly timesS: ArrayLike<number>;
  /** As long as `timesS`; NaN where the marker was lost. */
  readonly displacement: ArrayLike<number>;
  readonly window: readonly [number, number] | null;
  /** Steady amplitude found in the window; null where there is none. */
  readonly amplitude: number | null;
}

/** Pairs of least and largest value drawn at most; more cannot be told apart on a strip. */
const MOST_COLUMNS = 160;
const HEADROOM = 1.12;

/**
 * The record as a line short enough to draw: where samples are denser than columns, each column's first extreme and
 * second extreme in order of time, so that no peak is lost. A column with a gap in it keeps the gap.
 */
export function thinned(
  timesS: ArrayLike<number>,
  values: ArrayLike<number>,
  columns = MOST_COLUMNS,
): PlotPoint[] {
  const n = timesS.length;
  const point = (i: number): PlotPoint => ({ x: timesS[i] ?? Number.NaN, y: values[i] ?? Number.NaN });
  if (n <= 2 * columns) return Array.from({ length: n }, (_, i) => point(i));
  const kept: PlotPoint[] = [];
  for (let column = 0; column < columns; column++) {
    const from = Math.floor((column * n) / columns);
    const to = Math.floor(((column + 1) * n) / columns);
    let [low, high, gap] = [-1, -1, -1];
    for (let i = from; i < to; i++) {
      const value = values[i] ?? Number.NaN;
      if (!Number.isFinite(value)) gap = i;
      else {
        if (low < 0 || value < (values[low] ?? 0)) low = i;
        if (high < 0 || value > (values[high] ?? 0)) high = i;
      }
    }
    const order = [...new Set([low, high, gap])].filter((i) => i >= 0).sort((a, b) => a - b);
    kept.push(...order.map(point));
  }
  return kept;
}

/** Displacement against time, the measured window shaded, the steady amplitude drawn to both sides in it. */
export function motionStrip(data: MotionStripData, looks: ChartLooks = PAPER_LOOKS): PlotChart {
  const line = thinned(data.timesS, data.displacement);
  const seen = line.map((point) => Math.abs(point.y)).filter(Number.isFinite);
  const reach = HEADROOM * Math.max(0, data.amplitude ?? 0, ...seen) || 1;
  const look = seriesLook(looks, 0);
  const across = (y: number, [from, to]: readonly [number, number]) => [
    { x: from, y },
    { x: to, y },
  ];
  const { window, amplitude } = data;
  return plotChart(looks, {
    series: [
      ...(window
        ? [
            {
              ...lineSeries(looks, 'window', across(reach, window), {
                colour: 'transparent',
                widthPx: 0,
              }),
              backgroundColor: seeThrough(looks.series[2] ?? looks.ink, 0.14),
              fill: { value: -reach },
            },
          ]
        : []),
      lineSeries(looks, 'displacement', line, { colour: look.colour, widthPx: 0.8 }),
      ...(window && amplitude !== null
        ? [amplitude, -amplitude].map((y) =>
            lineSeries(looks, '', across(y, window), { colour: looks.ink, widthPx: 0.8 }),
          )
        : []),
    ],
    x: { title: '', mostTicks: 6, ...ends(data.timesS) },
    y: { title: '', min: -reach, max: reach, mostTicks: 8 },
    legend: false,
  });
}

function ends(timesS: ArrayLike<number>): { min?: number; max?: number } {
  const [first, last] = [timesS[0], timesS[timesS.length - 1]];
  return first === undefined || last === undefined ? {} : { min: first, max: last };
}
