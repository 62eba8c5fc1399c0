import type { ChartConfiguration, ChartDataset, ChartOptions } from 'chart.js';
import type { ChartLooks } from './looks.ts';

/** A plot ready for Chart.js: plain data, no canvas. */
export type PlotChart = ChartConfiguration<'scatter', PlotPoint[]>;

/** One series of a plot. */
export type PlotSeries = ChartDataset<'scatter', PlotPoint[]>;

/** A point of a series in the units of the axes; a NaN `y` is a gap. */
export interface PlotPoint {
  readonly x: number;
  readonly y: number;
  /** What the point is called, such as the dwell's id. */
  readonly name?: string;
}

/** One axis: title with unit, and where it begins and ends if that is fixed. */
export interface PlotAxis {
  readonly title: string;
  readonly min?: number | undefined;
  readonly max?: number | undefined;
  /** Distance of ticks; chosen from the range where absent. */
  readonly step?: number;
  readonly mostTicks?: number;
}

/** What of a plot differs from plot to plot. */
export interface PlotParts {
  readonly series: readonly PlotSeries[];
  readonly x: PlotAxis;
  readonly y: PlotAxis;
  /** Series without a label never appear in the legend; `false` leaves it away altogether. */
  readonly legend?: boolean;
}

function axis(looks: ChartLooks, spec: PlotAxis) {
  const font = { family: looks.fontFamily, size: looks.fontSizePx };
  return {
    type: 'linear' as const,
    ...(spec.min === undefined ? {} : { min: spec.min }),
    ...(spec.max === undefined ? {} : { max: spec.max }),
    grid: { color: looks.grid, tickLength: 4, lineWidth: 0.8 },
    border: { color: looks.rule },
    title: { display: spec.title !== '', text: spec.title, color: looks.ink, font, padding: 2 },
    ticks: {
      color: looks.soft,
      font,
      maxRotation: 0,
      includeBounds: false,
      maxTicksLimit: spec.mostTicks ?? 9,
      ...(spec.step === undefined ? {} : { stepSize: spec.step }),
    },
  };
}

function options(looks: ChartLooks, parts: PlotParts): ChartOptions<'scatter'> {
  return {
    animation: false,
    events: [],
    locale: 'en-US',
    layout: { padding: { top: 2, right: 8, bottom: 0, left: 0 } },
    scales: { x: axis(looks, parts.x), y: axis(looks, parts.y) },
    plugins: {
      legend: {
        display: parts.legend ?? true,
        align: 'start',
        reverse: true,
        labels: {
          color: looks.ink,
          font: { family: looks.fontFamily, size: looks.fontSizePx },
          usePointStyle: true,
          boxHeight: 7,
          boxWidth: 7,
          padding: 10,
          filter: (item) => item.text !== undefined && item.text !== '',
        },
      },
    },
  };
}

/** Puts a plot together; without animation or pointer events, so that the same data always give the same picture. */
export function plotChart(looks: ChartLooks, parts: PlotParts): PlotChart {
  return {
    type: 'scatter',
    // later series lie over earlier ones, and the legend names them in the order given
    data: { datasets: parts.series.map((series, k) => ({ ...series, order: parts.series.length - k })) },
    options: options(looks, parts),
  };
}
