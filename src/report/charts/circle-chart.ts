import type { ChartConfiguration } from 'chart.js';
import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, plotChart } from './plot-chart.ts';
import { lineSeries, pointSeries } from './series.ts';

/** Complex responses in the plane in which a resonance is a circle, in the units of the plot. */
export interface CircleData {
  /** What is plotted with its unit, such as `i f X, Hz mm`. */
  readonly quantity: string;
  readonly dwells: readonly PlotPoint[];
  /** The fitted curve, in rising drive frequency. */
  readonly curve: readonly PlotPoint[];
  /** The circle through the dwells; null where there is none. */
  readonly circle: { readonly x: number; readonly y: number; readonly radius: number } | null;
}

/** Canvas on which one unit of x is as long as one of y: the margins are fixed so that the plot itself is square. */
export const CIRCLE_SIZE = { widthPx: 366, heightPx: 366 } as const;
const MARGIN_PX = { axisY: 58, axisX: 38, top: 28, right: 8 } as const;
const CIRCLE_STEPS = 120;
const ROOM = 0.08;

function round(circle: NonNullable<CircleData['circle']>): PlotPoint[] {
  return Array.from({ length: CIRCLE_STEPS + 1 }, (_, k) => {
    const angle = (2 * Math.PI * k) / CIRCLE_STEPS;
    return { x: circle.x + circle.radius * Math.cos(angle), y: circle.y + circle.radius * Math.sin(angle) };
  });
}

/** Middle and half-width of a square that holds all points, the origin among them. */
function square(points: readonly PlotPoint[]): { x: number; y: number; half: number } {
  const ends = (values: readonly number[]) => [Math.min(0, ...values), Math.max(0, ...values)] as const;
  const [left, right] = ends(points.map((point) => point.x));
  const [low, high] = ends(points.map((point) => point.y));
  const half = (1 + ROOM) * (Math.max(right - left, high - low) / 2) || 1;
  return { x: (left + right) / 2, y: (low + high) / 2, half };
}

/** Gives the axes fixed widths, so that plot area and canvas keep their proportion whatever the tick labels are. */
function fixMargins(chart: PlotChart): PlotChart {
  const scales = chart.options?.scales as NonNullable<
    NonNullable<ChartConfiguration<'scatter'>['options']>['scales']
  >;
  const { x, y } = scales;
  if (x)
    x.afterFit = (scale) => {
      scale.height = MARGIN_PX.axisX;
    };
  if (y)
    y.afterFit = (scale) => {
      scale.width = MARGIN_PX.axisY;
    };
  return chart;
}

/** The circle plot: responses, the circle through them, and the fitted curve, with equal scales. */
export function circleChart(data: CircleData, looks: ChartLooks = PAPER_LOOKS): PlotChart {
  const around = data.circle ? round(data.circle) : [];
  const frame = square([...data.dwells, ...around]);
  const look = seriesLook(looks, 0);
  const chart = plotChart(looks, {
    series: [
      ...(around.length > 0
        ? [lineSeries(looks, 'circle', around, { colour: looks.soft, dash: [5, 3], widthPx: 1 })]
        : []),
      ...(data.curve.length > 0 ? [lineSeries(looks, 'fit', data.curve, { colour: look.colour })] : []),
      pointSeries(looks, 'dwells', data.dwells, look),
    ],
    x: {
      title: `real part of ${data.quantity}`,
      min: frame.x - frame.half,
      max: frame.x + frame.half,
      mostTicks: 6,
    },
    y: {
      title: `imaginary part of ${data.quantity}`,
      min: frame.y - frame.half,
      max: frame.y + frame.half,
      mostTicks: 6,
    },
  });
  return fixMargins(chart);
}
