import { type ChartLooks, type SeriesLook, seeThrough } from './looks.ts';
import type { PlotPoint, PlotSeries } from './plot-chart.ts';

const BAND_OPACITY = 0.16;

/** A line without points: fitted curves, limits, marks. */
export function lineSeries(
  looks: ChartLooks,
  label: string,
  points: readonly PlotPoint[],
  line: { readonly colour: string; readonly dash?: readonly number[]; readonly widthPx?: number },
): PlotSeries {
  return {
    label,
    data: [...points],
    showLine: true,
    pointRadius: 0,
    pointStyle: 'line',
    borderColor: line.colour,
    borderWidth: line.widthPx ?? looks.lineWidthPx,
    borderDash: [...(line.dash ?? [])],
  };
}

const CAP_PX = 3;
const WHOLE_POINT_PX = 6; // a point at the edge of the plot is drawn whole

/** A point with the half-length of its error bar in the unit of y; null where the uncertainty is not known. */
export interface BarredPoint extends PlotPoint {
  readonly bar: number | null;
}

/** Error bars: one series of upright strokes with caps, to lie under the points. */
export function barSeries(points: readonly BarredPoint[], colour: string): PlotSeries {
  return {
    label: '',
    data: points.flatMap(({ x, y, bar }) =>
      bar === null
        ? []
        : [
            { x, y: y - bar },
            { x, y: y + bar },
            { x, y: Number.NaN },
          ],
    ),
    showLine: true,
    spanGaps: false,
    pointStyle: 'line',
    pointRadius: CAP_PX,
    pointHitRadius: 0,
    borderColor: colour,
    borderWidth: 1,
  };
}

/** Points without a line; `filled` ones are solid, others open on the sheet. */
export function pointSeries(
  looks: ChartLooks,
  label: string,
  points: readonly PlotPoint[],
  look: Pick<SeriesLook, 'colour'> & { readonly pointStyle: SeriesLook['pointStyle'] | 'crossRot' },
  filled = false,
): PlotSeries {
  return {
    label,
    data: [...points],
    showLine: false,
    pointRadius: looks.pointRadiusPx,
    pointStyle: look.pointStyle,
    clip: WHOLE_POINT_PX,
    borderColor: look.colour,
    pointBorderColor: look.colour,
    pointBorderWidth: 1.4,
    pointBackgroundColor: filled ? look.colour : looks.sheet,
    backgroundColor: filled ? look.colour : looks.sheet,
  };
}

/**
 * The band between two curves, as two series that must stay neighbours: the upper one is filled down to the next.
 * @param half half-width of the band at each point of the middle curve
 */
export function bandSeries(
  label: string,
  middle: readonly PlotPoint[],
  half: ArrayLike<number>,
  colour: string,
): PlotSeries[] {
  const edge = (sign: 1 | -1): PlotPoint[] =>
    middle.map(({ x, y }, i) => ({ x, y: y + sign * (half[i] ?? 0) }));
  const bare = { showLine: true, pointRadius: 0, borderWidth: 0, borderColor: 'transparent' } as const;
  return [
    {
      ...bare,
      label,
      data: edge(1),
      backgroundColor: seeThrough(colour, BAND_OPACITY),
      pointStyle: 'rect',
      fill: '+1',
    },
    { ...bare, label: '', data: edge(-1), fill: false },
  ];
}
