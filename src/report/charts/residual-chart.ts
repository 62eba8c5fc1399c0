import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, plotChart } from './plot-chart.ts';
import { lineSeries, pointSeries } from './series.ts';

/** One dwell's distance from the fitted curve, measured minus curve in standard uncertainties; null where not fitted. */
export interface ResidualPoint {
  readonly driveHz: number;
  readonly amplitudeResidual: number | null;
  readonly lagResidual: number | null;
}

const LEAST_REACH = 3; // standard uncertainties shown at least, so that good fits look good

function points(of: readonly ResidualPoint[], key: 'amplitudeResidual' | 'lagResidual'): PlotPoint[] {
  return of.flatMap((point) => {
    const y = point[key];
    return y === null ? [] : [{ x: point.driveHz, y }];
  });
}

/** Residuals in standard uncertainties against drive frequency; null where nothing was fitted. */
export function residualChart(
  residuals: readonly ResidualPoint[],
  range: { readonly min?: number; readonly max?: number },
  looks: ChartLooks = PAPER_LOOKS,
): PlotChart | null {
  const amplitude = points(residuals, 'amplitudeResidual');
  const lag = points(residuals, 'lagResidual');
  const all = [...amplitude, ...lag];
  if (all.length === 0) return null;
  const reach = Math.ceil(Math.max(LEAST_REACH, ...all.map((point) => Math.abs(point.y))));
  const xs = all.map((point) => point.x);
  const [from, to] = [range.min ?? Math.min(...xs), range.max ?? Math.max(...xs)];
  const level = (label: string, y: number, dash: readonly number[]) =>
    lineSeries(
      looks,
      label,
      [
        { x: from, y },
        { x: to, y },
      ],
      { colour: looks.rule, dash, widthPx: 1 },
    );
  return plotChart(looks, {
    series: [
      level('', 0, []),
      level('± 2 u', 2, [4, 3]),
      level('', -2, [4, 3]),
      ...(amplitude.length > 0 ? [pointSeries(looks, 'amplitude', amplitude, seriesLook(looks, 0))] : []),
      ...(lag.length > 0 ? [pointSeries(looks, 'lag', lag, seriesLook(looks, 1), true)] : []),
    ],
    x: { title: 'drive frequency, Hz', ...range },
    y: { title: 'residual, u', min: -reach, max: reach, mostTicks: 7 },
  });
}
