import type { TrendData } from '../../../src/report/charts/trend-chart.ts';
import type { Plot, PlotPoint, PlotSeries } from '../charts/chart.ts';

/** A quantity of the configurations against mass or setting, with the trend and its band. */
export function trendPlot(data: TrendData): Plot {
  const side = (sign: number): PlotPoint[] =>
    data.trend.map(({ x, value, half }) => ({ x, y: value + sign * (half ?? 0) }));
  const banded = data.trend.some((each) => each.half !== null);
  const band: PlotSeries[] = banded
    ? [
        { label: 'band', points: side(1), look: 'band-top', colour: 's1' },
        { label: 'band', points: side(-1), look: 'band-bottom', colour: 's1' },
      ]
    : [];
  const points = data.points.map(({ x, y, bar, name }) => ({ x, y, u: bar, ...(name ? { name } : {}) }));
  return {
    series: [
      ...band,
      { label: 'trend', points: side(0), look: 'line', colour: 's1' },
      { label: 'configurations', points, look: 'open-points', colour: 's1' },
    ],
    xTitle: data.xTitle,
    yTitle: data.yTitle,
  };
}
