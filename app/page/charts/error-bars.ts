import type { Plugin } from 'chart.js';
import type { PlotPoint } from './chart.ts';

const SHORTEST_PX = 5; // shorter ones hide behind the point

/** Draws one standard uncertainty up and down from each point that has one. */
export const errorBars: Plugin<'scatter'> = {
  id: 'error-bars',
  beforeDatasetsDraw(chart) {
    const { ctx, chartArea } = chart;
    const y = chart.scales['y'];
    if (!y) return;
    ctx.save();
    ctx.beginPath();
    ctx.rect(chartArea.left, chartArea.top, chartArea.width, chartArea.height);
    ctx.clip();
    for (const [index, dataset] of chart.data.datasets.entries()) {
      const meta = chart.getDatasetMeta(index);
      ctx.strokeStyle = String(dataset.borderColor);
      ctx.lineWidth = 1;
      for (const [k, element] of meta.data.entries()) {
        const point = dataset.data[k] as unknown as PlotPoint;
        if (!point.u) continue;
        const [top, bottom] = [y.getPixelForValue(point.y + point.u), y.getPixelForValue(point.y - point.u)];
        if (bottom - top < 2 * SHORTEST_PX) continue;
        ctx.beginPath();
        ctx.moveTo(element.x, top);
        ctx.lineTo(element.x, bottom);
        ctx.moveTo(element.x - 3, top);
        ctx.lineTo(element.x + 3, top);
        ctx.moveTo(element.x - 3, bottom);
        ctx.lineTo(element.x + 3, bottom);
        ctx.stroke();
      }
    }
    ctx.restore();
  },
};
