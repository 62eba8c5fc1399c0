// The one file that draws charts without a screen: Chart.js on @napi-rs/canvas, Node only.
import type { Canvas, SvgCanvas } from '@napi-rs/canvas';
import { type ChartFontOrigin, registerChartFont } from './chart-font.ts';
import type { PlotChart } from './charts/plot-chart.ts';
import { tidySvg } from './tidy-svg.ts';

/** Size of a drawn chart, CSS pixels. */
export interface ChartSize {
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Draws charts without a screen; the same chart always gives the same bytes. */
export interface ChartPainter {
  /** A vector picture, letters as outlines: sharp on paper, and small. */
  readonly svg: (chart: PlotChart, size: ChartSize) => string;
  /** A PNG file with two device pixels to the CSS pixel. */
  readonly png: (chart: PlotChart, size: ChartSize) => Uint8Array;
  readonly font: ChartFontOrigin;
}

const PNG_RATIO = 2;

/** Loads what draws charts; kept out of the start of the program, because it takes a tenth of a second. */
export async function chartPainter(): Promise<ChartPainter> {
  const [canvases, charts] = await Promise.all([import('@napi-rs/canvas'), import('chart.js')]);
  const { Chart, Filler, Legend, LinearScale, LineElement, PointElement, ScatterController } = charts;
  Chart.register(Filler, Legend, LinearScale, LineElement, PointElement, ScatterController);
  const font = registerChartFont(canvases.GlobalFonts);

  const draw = (canvas: Canvas | SvgCanvas, chart: PlotChart, ratio: number) => {
    const drawn = new Chart(canvas, {
      ...chart,
      options: { ...chart.options, animation: false, responsive: false, devicePixelRatio: ratio },
    });
    drawn.destroy();
  };
  return {
    font,
    svg(chart, { widthPx, heightPx }) {
      const canvas = canvases.createCanvas(widthPx, heightPx, canvases.SvgExportFlag.ConvertTextToPaths);
      draw(canvas, chart, 1);
      return tidySvg(canvas.getContent().toString('utf8'), widthPx, heightPx);
    },
    png(chart, { widthPx, heightPx }) {
      const canvas = canvases.createCanvas(widthPx, heightPx);
      draw(canvas, chart, PNG_RATIO);
      return canvas.toBuffer('image/png');
    },
  };
}
