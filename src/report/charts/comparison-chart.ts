import { type ChartLooks, PAPER_LOOKS, seriesLook } from './looks.ts';
import { type PlotChart, plotChart } from './plot-chart.ts';
import type { ResponseData } from './response-data.ts';
import { lineSeries, pointSeries } from './series.ts';

/** One configuration in the overlay. */
export interface OverlaidResponse {
  readonly label: string;
  readonly data: ResponseData;
}

/** Responses of several configurations over one another, each with its fitted curve; excluded dwells are left out. */
export function comparisonChart(
  responses: readonly OverlaidResponse[],
  amplitudeTitle: string,
  looks: ChartLooks = PAPER_LOOKS,
): PlotChart {
  return plotChart(looks, {
    series: responses.flatMap(({ label, data }, index) => {
      const look = seriesLook(looks, index);
      const { curve } = data;
      const dwells = data.dwells
        .filter((dwell) => !dwell.excluded)
        .map((dwell) => ({ x: dwell.driveHz, y: dwell.amplitude, name: dwell.name }));
      return [
        ...(curve?.amplitude
          ? [
              lineSeries(
                looks,
                '',
                [...curve.amplitude].map((y, i) => ({ x: curve.driveHz[i] ?? Number.NaN, y })),
                { colour: look.colour, dash: look.dash },
              ),
            ]
          : []),
        pointSeries(looks, label, dwells, look),
      ];
    }),
    x: { title: 'drive frequency, Hz' },
    y: { title: amplitudeTitle, min: 0 },
  });
}
