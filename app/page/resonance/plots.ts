import type { Plot, PlotPoint } from '../charts/chart.ts';
import type { AmplitudeUnit } from '../format/amplitude.ts';
import { amplitudePlot, lagPlot, type ResponseParts } from '../response/response-plot.ts';

/** A plot with its heading, a name for its files, and what it shows in words. */
export interface NamedPlot {
  readonly name: string;
  readonly heading: string;
  readonly label: string;
  readonly plot: Plot;
}

const DEGREE = Math.PI / 180;

/** The plots of a resonance: those for which the dwells have what they need. */
export function resonancePlots(parts: ResponseParts): NamedPlot[] {
  const withLag = parts.points.some((each) => each.lagDeg !== null);
  const plots: NamedPlot[] = [
    {
      name: 'amplitude',
      heading: 'Amplitude',
      label: 'Amplitude against drive frequency, with the fit and its band of two standard uncertainties',
      plot: amplitudePlot(parts),
    },
  ];
  if (withLag)
    plots.push({
      name: 'lag',
      heading: 'Lag',
      label: 'Lag against drive frequency, with the fit and its band of two standard uncertainties',
      plot: lagPlot(parts),
    });
  if (parts.curve)
    plots.push({
      name: 'residuals',
      heading: 'Residuals',
      label: 'Measured minus fitted amplitude at each drive frequency',
      plot: residualPlot(parts),
    });
  if (withLag)
    plots.push({
      name: 'circle',
      heading: 'Circle',
      label: 'Quadrature against in-phase part of the response',
      plot: circlePlot(parts),
    });
  return plots;
}

function factorOf(parts: ResponseParts): { factor: number; unitText: string } {
  const asGain = parts.fit?.gainUnit === '1';
  return asGain
    ? { factor: 1, unitText: 'response over drive' }
    : { factor: parts.unit.factor, unitText: `mm, ${(parts.unit satisfies AmplitudeUnit).short}` };
}

function residualPlot(parts: ResponseParts): Plot {
  const { factor, unitText } = factorOf(parts);
  const { curve } = parts;
  const points: PlotPoint[] = parts.points
    .filter((each) => !each.excluded)
    .map((each) => ({
      x: each.driveHz,
      y: (each.amplitude - interpolated(curve?.driveHz ?? [], curve?.amplitude ?? [], each.driveHz)) * factor,
      u: each.independentU === null ? null : each.independentU * factor,
      name: each.id,
    }));
  const reach = Math.max(...points.map((each) => Math.abs(each.y) + (each.u ?? 0)), 0) * 1.1 || 1;
  const ends = [curve?.driveHz[0] ?? 0, curve?.driveHz.at(-1) ?? 1];
  return {
    series: [
      { label: 'zero', points: ends.map((x) => ({ x, y: 0 })), look: 'line', colour: 'faint' },
      { label: 'residual', points, look: 'open-points', colour: 's2' },
    ],
    xTitle: 'drive frequency, Hz',
    yTitle: `measured minus fit, ${unitText}`,
    yFrom: -reach,
    yTo: reach,
    onPoint: (series, index) => {
      const name = series === 1 ? points[index]?.name : undefined;
      if (name !== undefined) parts.onDwell?.(name);
    },
  };
}

function circlePlot(parts: ResponseParts): Plot {
  const { factor, unitText } = factorOf(parts);
  const points: PlotPoint[] = parts.points
    .filter((each) => !each.excluded && each.lagDeg !== null)
    .map((each) => ({
      x: each.amplitude * Math.cos((each.lagDeg ?? 0) * DEGREE) * factor,
      y: -each.amplitude * Math.sin((each.lagDeg ?? 0) * DEGREE) * factor,
      name: each.id,
    }));
  const { curve } = parts;
  const line = (curve?.inPhase ?? []).map((x, k) => ({
    x: x * factor,
    y: (curve?.quadrature[k] ?? 0) * factor,
  }));
  return {
    series: [
      { label: 'fit', points: line, look: 'line', colour: 's1' },
      { label: 'dwells', points, look: 'open-points', colour: 's1' },
    ],
    xTitle: `in phase, ${unitText}`,
    yTitle: `quadrature, ${unitText}`,
    square: true,
    onPoint: (series, index) => {
      const name = series === 1 ? points[index]?.name : undefined;
      if (name !== undefined) parts.onDwell?.(name);
    },
  };
}

/** Linear between the nodes of the curve, which are dense where it bends. */
export function interpolated(xs: readonly number[], ys: readonly number[], x: number): number {
  let k = xs.findIndex((each) => each >= x);
  if (k < 0) k = xs.length - 1;
  const [x0, x1, y0, y1] = [xs[k - 1], xs[k], ys[k - 1], ys[k]];
  if (x0 === undefined || x1 === undefined || y0 === undefined || y1 === undefined)
    return ys[k] ?? Number.NaN;
  return y0 + ((y1 - y0) * (x - x0)) / (x1 - x0);
}
