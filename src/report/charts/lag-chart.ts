import { rangeOf } from './amplitude-chart.ts';
import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, plotChart } from './plot-chart.ts';
import type { ResponseData, ResponseDwell } from './response-data.ts';
import { type BarredPoint, bandSeries, barSeries, lineSeries, pointSeries } from './series.ts';

const TICK_DEG = 45;

function lagPoints(dwells: readonly ResponseDwell[]): BarredPoint[] {
  return dwells.flatMap(({ driveHz, lagDeg, lagBarDeg, name }) =>
    lagDeg === null ? [] : [{ x: driveHz, y: lagDeg, bar: lagBarDeg, name }],
  );
}

/** Lag against drive frequency, 0 to 180 degrees through resonance; null where no dwell has a lag. */
export function lagChart(data: ResponseData, looks: ChartLooks = PAPER_LOOKS): PlotChart | null {
  const used = lagPoints(data.dwells.filter((dwell) => !dwell.excluded));
  const excluded = lagPoints(data.dwells.filter((dwell) => dwell.excluded));
  if (used.length + excluded.length === 0) return null;
  const look = seriesLook(looks, 0);
  const { curve, naturalHz } = data;
  const line: PlotPoint[] = curve
    ? [...curve.lagDeg].map((y, i) => ({ x: curve.driveHz[i] ?? Number.NaN, y }))
    : [];
  const lags = [...used, ...excluded, ...line].map((point) => point.y);
  const min = TICK_DEG * Math.floor(Math.min(0, ...lags) / TICK_DEG);
  const max = TICK_DEG * Math.ceil(Math.max(180, ...lags) / TICK_DEG);
  return plotChart(looks, {
    series: [
      ...(curve?.lagBarDeg ? bandSeries('95 % band', line, curve.lagBarDeg, look.colour) : []),
      ...(line.length > 0 ? [lineSeries(looks, 'fit', line, { colour: look.colour })] : []),
      ...(naturalHz === null
        ? []
        : [
            lineSeries(
              looks,
              'natural frequency',
              [
                { x: naturalHz, y: min },
                { x: naturalHz, y: max },
              ],
              { colour: looks.ink, dash: [2, 3], widthPx: 1 },
            ),
          ]),
      barSeries(used, look.colour),
      pointSeries(looks, 'dwells', used, look),
      ...(excluded.length > 0
        ? [pointSeries(looks, 'excluded', excluded, { colour: looks.soft, pointStyle: 'crossRot' })]
        : []),
    ],
    x: { title: 'drive frequency, Hz', ...rangeOf(data) },
    y: { title: 'lag, degrees', min, max, step: TICK_DEG },
  });
}
