import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, type PlotSeries, plotChart } from './plot-chart.ts';
import type { ResponseData, ResponseDwell } from './response-data.ts';
import { type BarredPoint, bandSeries, barSeries, lineSeries, pointSeries } from './series.ts';

function amplitudePoint(dwell: ResponseDwell): BarredPoint {
  return { x: dwell.driveHz, y: dwell.amplitude, bar: dwell.amplitudeBar, name: dwell.name };
}

function marks(data: ResponseData, looks: ChartLooks): PlotSeries[] {
  const { naturalHz, halfPower } = data;
  const found: PlotSeries[] = [];
  if (halfPower) {
    const { lowerHz, upperHz, amplitude } = halfPower;
    found.push({
      ...lineSeries(
        looks,
        'half-power points',
        [
          { x: lowerHz, y: amplitude },
          { x: upperHz, y: amplitude },
        ],
        { colour: looks.ink, widthPx: 1 },
      ),
      pointStyle: 'triangle',
      pointRadius: looks.pointRadiusPx - 0.6,
      pointBackgroundColor: looks.ink,
    });
  }
  const top = data.curve?.amplitude ? Math.max(...data.curve.amplitude) : null;
  if (naturalHz !== null && top !== null)
    found.push(
      lineSeries(
        looks,
        'natural frequency',
        [
          { x: naturalHz, y: 0 },
          { x: naturalHz, y: top },
        ],
        { colour: looks.ink, dash: [2, 3], widthPx: 1 },
      ),
    );
  return found;
}

/** Amplitude against drive frequency: dwells with error bars, fitted curve with its band, half-power points. */
export function amplitudeChart(data: ResponseData, looks: ChartLooks = PAPER_LOOKS): PlotChart {
  const look = seriesLook(looks, 0);
  const { curve } = data;
  const line: PlotPoint[] = curve?.amplitude
    ? [...curve.amplitude].map((y, i) => ({ x: curve.driveHz[i] ?? Number.NaN, y }))
    : [];
  const used = data.dwells.filter((dwell) => !dwell.excluded).map(amplitudePoint);
  const excluded = data.dwells.filter((dwell) => dwell.excluded).map(amplitudePoint);
  return plotChart(looks, {
    series: [
      ...(curve?.amplitudeBar ? bandSeries('95 % band', line, curve.amplitudeBar, look.colour) : []),
      ...(line.length > 0 ? [lineSeries(looks, 'fit', line, { colour: look.colour })] : []),
      ...marks(data, looks),
      barSeries(used, look.colour),
      pointSeries(looks, 'dwells', used, look),
      ...(excluded.length > 0
        ? [pointSeries(looks, 'excluded', excluded, { colour: looks.soft, pointStyle: 'crossRot' })]
        : []),
    ],
    x: { title: 'drive frequency, Hz', ...rangeOf(data) },
    y: { title: data.amplitudeTitle, min: 0 },
  });
}

const ROOM = 0.03; // share of the range left free on both sides

/** Range of drive frequencies that a configuration's plots show, with some room; empty where there is nothing. */
export function rangeOf(data: ResponseData): { readonly min?: number; readonly max?: number } {
  const all = [...data.dwells.map((dwell) => dwell.driveHz), ...(data.curve?.driveHz ?? [])];
  const [low, high] = [Math.min(...all), Math.max(...all)];
  if (!(high > low)) return {};
  const room = ROOM * (high - low);
  return { min: Math.max(0, low - room), max: high + room };
}
