import type { ResonanceResult } from '../../../src/engine/results.ts';
import type { Plot, PlotPoint, PlotSeries } from '../charts/chart.ts';
import type { AmplitudeUnit } from '../format/amplitude.ts';
import type { FittedCurve } from './fitted-curve.ts';
import { frequencyRange, type ResponsePoint } from './response-points.ts';

/** What a response plot is made from. */
export interface ResponseParts {
  readonly points: readonly ResponsePoint[];
  readonly curve: FittedCurve | null;
  readonly fit: ResonanceResult | null;
  readonly unit: AmplitudeUnit;
  /** Half-width of the band in standard uncertainties. */
  readonly bandK: number;
  /** Frequency proposed next, Hz. */
  readonly nextHz?: number | null;
  readonly small?: boolean;
  readonly onDwell?: (id: string) => void;
}

type Column = 'amplitude' | 'lag';

/** Amplitude against drive frequency. */
export function amplitudePlot(parts: ResponseParts): Plot {
  const asGain = parts.fit?.gainUnit === '1';
  const factor = asGain ? 1 : parts.unit.factor;
  const yTitle = asGain ? 'response over drive' : `amplitude mm, ${parts.unit.short}`;
  return { ...responsePlot(parts, 'amplitude', factor, yTitle), yFrom: 0 };
}

/** Lag against drive frequency. */
export function lagPlot(parts: ResponseParts): Plot {
  return { ...responsePlot(parts, 'lag', 1, 'lag, degrees'), yFrom: 0, yTo: 180 };
}

function responsePlot(parts: ResponseParts, column: Column, factor: number, yTitle: string): Plot {
  const { points, curve, fit, nextHz, onDwell } = parts;
  const used = points.filter((each) => !each.excluded);
  const excluded = points.filter((each) => each.excluded);
  const lines = curve ? curveSeries(curve, column, factor, parts.bandK) : [];
  const series: PlotSeries[] = [
    ...lines,
    { label: 'dwells', points: plotPoints(used, column, factor), look: 'open-points', colour: 's1' },
    { label: 'excluded', points: plotPoints(excluded, column, factor), look: 'crosses', colour: 'faint' },
  ];
  const natural = fit?.naturalHz.value ?? null;
  return {
    series,
    xTitle: 'drive frequency, Hz',
    yTitle,
    small: parts.small ?? false,
    marks: [
      ...(natural !== null && curve && !parts.small
        ? [{ x: natural, label: 'natural frequency', colour: 'faint' }]
        : []),
      ...(nextHz == null ? [] : [{ x: nextHz, label: 'next', colour: 'accent' }]),
    ],
    onPoint: (index, point) => {
      const list = index === lines.length ? used : index === lines.length + 1 ? excluded : [];
      const shown = list.filter((each) => columnOf(each, column) !== null)[point];
      if (shown) onDwell?.(shown.id);
    },
  };
}

function columnOf(point: ResponsePoint, column: Column): number | null {
  return column === 'amplitude' ? point.amplitude : point.lagDeg;
}

function plotPoints(points: readonly ResponsePoint[], column: Column, factor: number): PlotPoint[] {
  return points.flatMap((each) => {
    const y = columnOf(each, column);
    const u = column === 'amplitude' ? each.amplitudeU : each.lagU;
    return y === null
      ? []
      : [{ x: each.driveHz, y: y * factor, u: u === null ? null : u * factor, name: each.id }];
  });
}

function curveSeries(curve: FittedCurve, column: Column, factor: number, k: number): PlotSeries[] {
  const ys = column === 'amplitude' ? curve.amplitude : curve.lagDeg;
  const us = column === 'amplitude' ? curve.amplitudeU : curve.lagU;
  const line = (side: number): PlotPoint[] =>
    curve.driveHz.map((x, i) => ({ x, y: ((ys[i] ?? 0) + side * k * (us[i] ?? 0)) * factor }));
  return [
    { label: 'band', points: line(1), look: 'band-top', colour: 's1' },
    { label: 'band', points: line(-1), look: 'band-bottom', colour: 's1' },
    { label: 'fit', points: line(0), look: 'line', colour: 's1' },
  ];
}

/** The range over which a configuration's curve is drawn. */
export function curveRange(
  points: readonly ResponsePoint[],
  fit: ResonanceResult | null,
): [number, number] | null {
  return frequencyRange(points, fit?.naturalHz.value ?? null);
}
