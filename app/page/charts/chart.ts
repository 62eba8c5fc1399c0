// The one file of the page that touches Chart.js and its plug-ins.
import {
  Chart,
  type ChartConfiguration,
  type ChartDataset,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
  ScatterController,
  Tooltip,
} from 'chart.js';
import annotationPlugin, { type AnnotationOptions } from 'chartjs-plugin-annotation';
import zoomPlugin from 'chartjs-plugin-zoom';
import { errorBars } from './error-bars.ts';

Chart.register(
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
  ScatterController,
  Tooltip,
  annotationPlugin,
  zoomPlugin,
  errorBars,
);

/** A point of a series, with its standard uncertainty along y and x where there is one. */
export interface PlotPoint {
  readonly x: number;
  readonly y: number;
  readonly u?: number | null;
  readonly ux?: number | null;
  /** What the tooltip calls it. */
  readonly name?: string;
}

/** A series of a plot. Colours are names of tokens, such as `s1`. */
export interface PlotSeries {
  readonly label: string;
  readonly points: readonly PlotPoint[];
  readonly look: 'line' | 'points' | 'band-top' | 'band-bottom' | 'open-points' | 'crosses';
  readonly colour: string;
}

/** A plot, described without the library that draws it. */
export interface Plot {
  readonly series: readonly PlotSeries[];
  readonly xTitle: string;
  readonly yTitle: string;
  readonly yFrom?: number;
  readonly yTo?: number;
  /** Upright lines with a word beside them. */
  readonly marks?: readonly { readonly x: number; readonly label: string; readonly colour: string }[];
  /** The same length of axis for the same number in x and y. */
  readonly square?: boolean;
  /** Without axis titles, for the card. */
  readonly small?: boolean;
  readonly onPoint?: (series: number, point: number) => void;
}

/** A plot on a canvas. */
export interface DrawnPlot {
  update(plot: Plot): void;
  /** Back to the whole after zooming. */
  resetZoom(): void;
  destroy(): void;
}

function token(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim();
}

/** Draws a plot on a canvas; wheel and pinch zoom, drag pans, a double click shows the whole. */
export function drawPlot(canvas: HTMLCanvasElement, plot: Plot): DrawnPlot {
  let current = plot;
  const chart = new Chart(
    canvas,
    configurationOf(plot, () => current),
  );
  return {
    update(next) {
      current = next;
      const made = configurationOf(next, () => current);
      chart.data = made.data;
      if (made.options) chart.options = made.options;
      chart.update('none');
    },
    resetZoom: () => chart.resetZoom('none'),
    destroy: () => chart.destroy(),
  };
}

function configurationOf(plot: Plot, now: () => Plot): ChartConfiguration<'scatter'> {
  const rem = Number.parseFloat(getComputedStyle(document.documentElement).fontSize);
  const font = { family: getComputedStyle(document.body).fontFamily, size: rem * 0.85 };
  const axis = (title: string) => ({
    type: 'linear' as const,
    bounds: 'data' as const,
    grid: { color: token('rule2') },
    border: { color: token('rule') },
    ticks: { color: token('faint'), font, maxTicksLimit: plot.small ? 6 : 9 },
    title: { display: true, text: title, color: token('soft'), font, padding: 2 },
  });
  return {
    type: 'scatter',
    data: { datasets: plot.series.map(datasetOf) },
    options: {
      animation: false,
      responsive: true,
      maintainAspectRatio: plot.square ?? false,
      aspectRatio: 1,
      normalized: true,
      scales: {
        x: axis(plot.xTitle),
        y: {
          ...axis(plot.yTitle),
          ...(plot.yFrom === undefined ? {} : { min: plot.yFrom }),
          ...(plot.yTo === undefined ? {} : { max: plot.yTo }),
        },
      },
      interaction: { mode: 'nearest', intersect: true },
      onClick: (_event, hits) => {
        const [hit] = hits;
        if (hit) now().onPoint?.(hit.datasetIndex, hit.index);
      },
      plugins: {
        tooltip: {
          filter: (item) => item.dataset.pointRadius !== 0,
          callbacks: { label: (item) => tooltipText(item.raw as PlotPoint, item.dataset.label ?? '') },
        },
        zoom: {
          pan: { enabled: true, mode: 'xy' },
          zoom: { wheel: { enabled: true, modifierKey: 'ctrl' }, pinch: { enabled: true }, mode: 'xy' },
        },
        annotation: { annotations: annotationsOf(plot, font) },
      },
    },
  };
}

function tooltipText({ x, y, u, name }: PlotPoint, label: string): string {
  const value = u == null ? y.toPrecision(4) : `${y.toPrecision(4)} ± ${u.toPrecision(2)}`;
  return `${name ?? label}: ${x.toPrecision(5)}, ${value}`;
}

function datasetOf(series: PlotSeries, index: number): ChartDataset<'scatter'> {
  const colour = token(series.colour);
  const base = {
    label: series.label,
    data: series.points as PlotPoint[],
    borderColor: colour,
    borderWidth: 1.6,
  };
  if (series.look === 'line') return { ...base, showLine: true, pointRadius: 0, pointHitRadius: 0 };
  if (series.look === 'band-top' || series.look === 'band-bottom')
    return {
      ...base,
      showLine: true,
      pointRadius: 0,
      pointHitRadius: 0,
      borderWidth: 0,
      backgroundColor: token('band'),
      fill: series.look === 'band-top' ? index + 1 : false,
    };
  return {
    ...base,
    pointRadius: series.look === 'crosses' ? 4 : 3.6,
    pointHitRadius: 8,
    pointBorderWidth: 1.6,
    pointBorderColor: colour,
    pointStyle: series.look === 'crosses' ? 'crossRot' : 'circle',
    pointBackgroundColor: series.look === 'points' ? colour : token('sheet'),
  };
}

function annotationsOf(plot: Plot, font: { family: string; size: number }): AnnotationOptions[] {
  return (plot.marks ?? []).map(({ x, label, colour }) => ({
    type: 'line',
    xMin: x,
    xMax: x,
    borderColor: token(colour),
    borderWidth: 1,
    borderDash: [3, 3],
    label: {
      display: true,
      content: label,
      position: 'start',
      yAdjust: 2,
      backgroundColor: 'transparent',
      color: token(colour),
      font: { ...font, weight: 'normal' },
      padding: 2,
    },
  }));
}
