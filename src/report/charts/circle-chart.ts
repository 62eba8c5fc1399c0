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

const MARGIN_PX = { axisY: 58, axisX: 38, edge: 10 } as const;
const PLOT_PX = 256;
/** Canvas on which one unit of x is as long as one of y: the margins are fixed so that the plot itself is square. */
export const CIRCLE_SIZE = {
  widthPx: MARGIN_PX.axisY + PLOT_PX + MARGIN_PX.edge,
  heightPx: MARGIN_PX.edge + PLOT_PX + MARGIN_PX.axisX,
} as const;
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

const fixed =
  (side: 'width' | 'height', px: number) =>
  (axis: { width: number; height: number }): void => {
    axis[side] = px;
  };

/** Gives the axes fixed widths, so that the plot stays square whatever the tick labels are. */
function fixMargins(chart: PlotChart): PlotChart {
  const { edge } = MARGIN_PX;
  const scales = chart.options?.scales ?? {};
  return {
    ...chart,
    options: {
      ...chart.options,
      layout: { autoPadding: false, padding: { top: edge, right: edge, bottom: 0, left: 0 } },
      scales: {
        x: { ...scales['x'], afterFit: fixed('height', MARGIN_PX.axisX) },
        y: { ...scales['y'], afterFit: fixed('width', MARGIN_PX.axisY) },
      },
    },
  } as PlotChart;
}

/** The circle plot: responses, the circle through them (dashed), and the fitted curve, with equal scales; no legend. */
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
    legend: false,
  });
  return fixMargins(chart);
}
