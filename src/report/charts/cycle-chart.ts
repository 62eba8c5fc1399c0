import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, type PlotPoint, plotChart } from './plot-chart.ts';
import { lineSeries, pointSeries } from './series.ts';

/** All samples of a window laid over one cycle of the drive, with the sine fitted to them. */
export interface CycleData {
  /** Place in the cycle, 0 to 1, and displacement of each sample, in the unit of the plot. */
  readonly cycle: ArrayLike<number>;
  readonly displacement: ArrayLike<number>;
  /** The sine: offset + amplitude cos(2 pi cycle + phaseRad). */
  readonly offset: number;
  readonly amplitude: number;
  readonly phaseRad: number;
}

const SINE_STEPS = 48;
const MOST_SAMPLES = 100;
const HEADROOM = 1.12;

/** Every so many-th sample, at most `most`, gaps left out. */
function some(data: CycleData, most: number): PlotPoint[] {
  const seen: PlotPoint[] = [];
  for (let i = 0; i < data.cycle.length; i++) {
    const [x, y] = [data.cycle[i] ?? Number.NaN, data.displacement[i] ?? Number.NaN];
    if (Number.isFinite(x) && Number.isFinite(y)) seen.push({ x, y });
  }
  const stride = Math.max(1, Math.ceil(seen.length / most));
  return seen.filter((_, i) => i % stride === 0);
}

/** One cycle of the motion: where the samples lie thick about the sine, it was not steady or not a sine. */
export function cycleChart(data: CycleData, looks: ChartLooks = PAPER_LOOKS): PlotChart {
  const samples = some(data, MOST_SAMPLES);
  const sine = Array.from({ length: SINE_STEPS + 1 }, (_, k) => {
    const x = k / SINE_STEPS;
    return { x, y: data.offset + data.amplitude * Math.cos(2 * Math.PI * x + data.phaseRad) };
  });
  const reach = HEADROOM * Math.max(...[...samples, ...sine].map((point) => Math.abs(point.y))) || 1;
  return plotChart(looks, {
    series: [
      {
        ...pointSeries(looks, 'samples', samples, seriesLook(looks, 0), true),
        pointRadius: 1.4,
        pointStyle: 'rect',
        pointBorderWidth: 0,
      },
      lineSeries(looks, 'fit', sine, { colour: looks.ink, widthPx: 0.9 }),
    ],
    x: { title: '', min: 0, max: 1, step: 0.5 },
    y: { title: '', min: -reach, max: reach, mostTicks: 8 },
    legend: false,
  });
}
