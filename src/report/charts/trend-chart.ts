import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, plotChart } from './plot-chart.ts';
import { type BarredPoint, bandSeries, barSeries, lineSeries, pointSeries } from './series.ts';

/** Values of several configurations against mass or setting, with the fitted trend. */
export interface TrendData {
  readonly xTitle: string;
  readonly yTitle: string;
  readonly points: readonly BarredPoint[];
  /** The trend over the range shown; `half` is the half-width of its band, null where that is not known. */
  readonly trend: readonly { readonly x: number; readonly value: number; readonly half: number | null }[];
}

/** A parameter against mass or setting, with the fitted line and its band. */
export function trendChart(data: TrendData, looks: ChartLooks = PAPER_LOOKS): PlotChart {
  const look = seriesLook(looks, 0);
  const line = data.trend.map(({ x, value }) => ({ x, y: value }));
  const half = data.trend.map((each) => each.half ?? Number.NaN);
  const banded = half.length > 0 && half.every(Number.isFinite);
  return plotChart(looks, {
    series: [
      ...(banded ? bandSeries('95 % band', line, half, look.colour) : []),
      ...(line.length > 0 ? [lineSeries(looks, 'trend', line, { colour: look.colour })] : []),
      barSeries(data.points, look.colour),
      pointSeries(looks, 'configurations, bars ± U', data.points, look),
    ],
    x: { title: data.xTitle, mostTicks: 7 },
    y: { title: data.yTitle, mostTicks: 7 },
  });
}
