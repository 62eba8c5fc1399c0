import { coverageFactor } from '../numeric/quantiles.ts';
import { lineValue, type TrendValue } from '../resonance/compare-line-band.ts';
import { settingBand } from '../resonance/compare-settings.ts';
import type { OverlaidResponse } from './charts/comparison-chart.ts';
import type { ResponseData } from './charts/response-data.ts';
import type { TrendData } from './charts/trend-chart.ts';
import type { MassTrend, QuantityTrend } from './comparison.ts';
import type { ConfigurationView } from './configuration-view.ts';
import type { LengthUnit } from './length-unit.ts';
import { responseData } from './response-curves.ts';

const TREND_STEPS = 40;
const NORMAL_K = 2;

function drawn(values: readonly TrendValue[], factor = 1): TrendData['trend'] {
  return values.map(({ x, value, low, high }) => ({
    x,
    value: value * factor,
    half: low === null || high === null ? null : ((high - low) / 2) * factor,
  }));
}

function kOf(view: ConfigurationView): number {
  const dof = view.resonance?.dof ?? null;
  return view.resonance?.coverageFactor ?? (dof !== null && dof > 0 ? coverageFactor(0.95, dof) : NORMAL_K);
}

/** The plot of 1/f^2 against moving mass with its line; null where there is no line. */
export function massTrendData({ views, outcome }: MassTrend): TrendData | null {
  if (outcome.comparison === null) return null;
  const { line } = outcome.comparison;
  const points = views.flatMap((view) => {
    const { value, u } = view.resonance?.naturalHz ?? { value: null, u: null };
    const mass = view.configuration.movingMass;
    if (value === null || mass === undefined) return [];
    return [
      { x: mass, y: value ** -2, bar: u === null ? null : (kOf(view) * 2 * u) / value ** 3, name: view.name },
    ];
  });
  const masses = points.map((point) => point.x);
  const [low, high] = [Math.min(...masses), Math.max(...masses)];
  const along = Array.from({ length: TREND_STEPS }, (_, k) =>
    lineValue(line, low + ((high - low) * k) / (TREND_STEPS - 1)),
  );
  return { xTitle: 'moving mass, kg', yTitle: '1 / fn², s²', points, trend: drawn(along) };
}

/** The plot of a quantity against the setting with its trend; without a line where the trend is not determined. */
export function quantityTrendData(trend: QuantityTrend): TrendData {
  const points = trend.views.flatMap((view) => {
    const { value, u } = trend.valueOf(view);
    const setting = view.configuration.setting;
    if (value === null || setting === undefined) return [];
    return [{ x: setting, y: value, bar: u === null ? null : kOf(view) * u, name: view.name }];
  });
  return {
    xTitle: 'setting',
    yTitle: trend.unit === '' ? trend.quantity : `${trend.quantity}, ${trend.unit}`,
    points,
    trend: trend.outcome.result ? drawn(settingBand(trend.outcome.result, TREND_STEPS)) : [],
  };
}

/** The responses of all configurations for one plot, and the title of its amplitude axis. */
export interface Overlay {
  readonly responses: readonly OverlaidResponse[];
  readonly title: string;
}

/** Overlays the responses in their own unit where that is the same for all, else each over the peak of its own fit. */
export function overlayOf(views: readonly ConfigurationView[], unit: LengthUnit): Overlay {
  const responses = views
    .map((view) => ({ label: view.name, data: responseData(view, unit) }))
    .filter(({ data }) => data.dwells.length > 0);
  const titles = new Set(responses.map(({ data }) => data.amplitudeTitle));
  if (titles.size <= 1) return { responses, title: [...titles][0] ?? '' };
  return {
    responses: responses.flatMap(({ label, data }) => {
      const peak = data.curve?.amplitude ? Math.max(...data.curve.amplitude) : null;
      return peak === null ? [] : [{ label, data: scaled(data, 1 / peak) }];
    }),
    title: 'amplitude over the peak of the fit',
  };
}

function scaled(data: ResponseData, factor: number): ResponseData {
  const { curve } = data;
  return {
    ...data,
    dwells: data.dwells.map((dwell) => ({ ...dwell, amplitude: dwell.amplitude * factor })),
    curve: curve && { ...curve, amplitude: curve.amplitude?.map((value) => value * factor) ?? null },
  };
}
