import type { PlotChart } from './charts/plot-chart.ts';
import type { ChartPainter, ChartSize } from './draw-chart.ts';
import { type Html, type HtmlValue, html } from './html.ts';
import { svgDataUrl } from './tidy-svg.ts';

/** Width of a plot that takes the whole width of the page, CSS pixels. */
export const PAGE_WIDTH_PX = 660;

/** A plot as a picture within the page; `alt` says in words what it shows. Nothing where nothing can draw. */
export function plotImage(
  painter: ChartPainter | null,
  chart: PlotChart,
  size: ChartSize,
  alt: string,
): Html | null {
  if (!painter) return null;
  return html`<img src="${svgDataUrl(painter.svg(chart, size))}" width="${size.widthPx}" height="${size.heightPx}" alt="${alt}">`;
}

/** A plot with its caption; nothing where there is no plot or nothing can draw. */
export function plotFigure(
  painter: ChartPainter | null,
  chart: PlotChart | null,
  size: ChartSize,
  { alt, caption }: { readonly alt: string; readonly caption: HtmlValue },
): Html | null {
  const image = chart && plotImage(painter, chart, size, alt);
  return (
    image &&
    html`<figure>${image}<figcaption>${caption}</figcaption></figure>
`
  );
}
