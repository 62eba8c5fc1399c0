import type { Measured } from '../numeric/measured.ts';
import { coverageFactor } from '../numeric/quantiles.ts';
import type { BandOptions, TrendValue } from './compare-line-band.ts';
import {
  fitPolynomial,
  type PolynomialTrend,
  polynomialSlope,
  polynomialValue,
} from './compare-polynomial.ts';

/** One configuration: its setting (damper gap, magnet number, pre-load: any number) and what was measured. */
export interface SettingPoint {
  readonly label: string;
  readonly setting: number | null;
  /** Standard uncertainty of the setting, same unit; 0 or left out where exact. */
  readonly uSetting?: number;
  /** The quantity compared, such as damping ratio, c or bandwidth, with its independent uncertainty. */
  readonly value: Measured;
}

/** How the trend is drawn. `degree` 1 is a line; 'auto' takes a bend only where the points ask for it. */
export interface SettingTrendOptions {
  readonly degree?: 1 | 2 | 3 | 'auto';
  /** What is compared, for sentences: 'damping ratio' and the like. */
  readonly quantity?: string;
}

/** Trend of a quantity against the setting. */
export interface SettingTrend {
  readonly quantity: string;
  readonly trend: PolynomialTrend;
  /** True where the trend differs from no dependence at all with 95 % confidence; null where it cannot be told. */
  readonly dependsOnSetting: boolean | null;
  /** Change per unit of the setting at the middle of the range. */
  readonly slopeAtCentre: Measured;
  readonly notes: readonly string[];
}

/** Either a trend, or null with the sentence that says what is missing. */
export type SettingTrendOutcome =
  | { readonly result: SettingTrend; readonly reason: null }
  | { readonly result: null; readonly reason: string };

const BEND_WORTH = 2; // drop of the Akaike criterion that a higher degree must bring
const HIGHEST_AUTO_DEGREE = 3;

interface Usable {
  setting: number;
  uSetting: number;
  value: number;
  u: number | null;
}

/**
 * Fits a quantity against the numeric setting of the configurations by a line or a low polynomial.
 *
 * Uncertain settings count by their effect along the trend (effective variance). Values are weighted by their
 * uncertainties if all have one; if not, all count alike and the scatter gives the uncertainty.
 *
 * @returns null with a sentence where the points do not determine the trend
 * Source: effective variance, J. Orear, Am. J. Phys. 50 (1982) 912 (from memory).
 */
export function compareSettings(
  points: readonly SettingPoint[],
  options: SettingTrendOptions = {},
): SettingTrendOutcome {
  const quantity = options.quantity ?? 'value';
  const usable: Usable[] = points.flatMap(({ setting, uSetting, value }) =>
    setting === null || !Number.isFinite(setting) || value.value === null
      ? []
      : [{ setting, uSetting: uSetting ?? 0, value: value.value, u: value.u }],
  );
  const left = points
    .filter((point) => point.setting === null || point.value.value === null)
    .map((p) => p.label);
  const leftOut =
    left.length > 0 ? ` Left out for want of a setting or a ${quantity}: ${left.join(', ')}.` : '';
  const different = new Set(usable.map((point) => point.setting)).size;
  const wanted = options.degree ?? 'auto';
  const fewest = (wanted === 'auto' ? 1 : wanted) + 1;
  if (different < fewest)
    return {
      result: null,
      reason: `A trend of ${quantity} against the setting needs at least ${fewest} different settings; there ${different === 1 ? 'is 1' : `are ${different}`}.${leftOut}`,
    };

  const weighted = usable.every((point) => point.u !== null && point.u > 0);
  const highest = wanted === 'auto' ? Math.min(HIGHEST_AUTO_DEGREE, different - 2) : wanted;
  let trend = fitWithUncertainSettings(usable, weighted, wanted === 'auto' ? 1 : wanted);
  for (let degree = 2; wanted === 'auto' && degree <= highest; degree++) {
    const bent = fitWithUncertainSettings(usable, weighted, degree);
    if (trend?.aicc != null && bent?.aicc != null && bent.aicc < trend.aicc - BEND_WORTH) trend = bent;
  }
  if (trend === null) throw new Error('a polynomial through enough different settings could not be fitted');
  const slope = polynomialSlope(trend, trend.centre);
  const dependsOnSetting = dependence(trend);
  return {
    reason: null,
    result: {
      quantity,
      trend,
      dependsOnSetting,
      slopeAtCentre: { value: slope.value, u: slope.u },
      notes: notesOn(quantity, trend, dependsOnSetting, { weighted, leftOut }),
    },
  };
}

function fitWithUncertainSettings(
  points: readonly Usable[],
  weighted: boolean,
  degree: number,
): PolynomialTrend | null {
  const x = points.map((point) => point.setting);
  const y = points.map((point) => point.value);
  const own = points.map((point) => point.u ?? 0);
  let trend = fitPolynomial(x, y, weighted ? own : null, degree);
  const uncertainSettings = weighted && points.some((point) => point.uSetting > 0);
  for (let round = 0; uncertainSettings && trend !== null && round < 20; round++) {
    const current = trend;
    const effective = points.map(({ setting, uSetting }, i) =>
      Math.hypot(own[i] ?? 0, polynomialSlope(current, setting).value * uSetting),
    );
    trend = fitPolynomial(x, y, effective, degree);
  }
  return trend;
}

/** Whether any coefficient above the constant differs from zero with 95 % confidence for all of them together. */
function dependence(trend: PolynomialTrend): boolean | null {
  if (trend.covariance === null || trend.coverageDof === 0) return null;
  const k = coverageFactor(
    1 - 0.05 / trend.degree, // as many chances as coefficients: Bonferroni
    trend.coverageDof ?? Number.POSITIVE_INFINITY,
  );
  const n = trend.degree + 1;
  return trend.coefficients.some(
    (value, i) =>
      i > 0 && Math.abs(value) > k * Math.sqrt(trend.covariance?.[i * n + i] ?? Number.POSITIVE_INFINITY),
  );
}

function notesOn(
  quantity: string,
  trend: PolynomialTrend,
  depends: boolean | null,
  facts: { weighted: boolean; leftOut: string },
): string[] {
  const notes: string[] = [];
  if (facts.leftOut !== '') notes.push(facts.leftOut.trim());
  if (!facts.weighted)
    notes.push(
      `Not every ${quantity} has an uncertainty, so all points count alike and the scatter gives the band.`,
    );
  if (trend.dof === 0)
    notes.push('The trend passes through every point: a further setting would show whether it holds.');
  if (trend.widenedBy > 1)
    notes.push(
      `The points scatter about the trend more than their uncertainties allow; the band is widened ${trend.widenedBy.toFixed(1)} times.`,
    );
  if (depends === false)
    notes.push(`The ${quantity} shows no dependence on the setting beyond its uncertainty (95 %).`);
  return notes;
}

/** The quantity at a setting, with the interval that {@link BandOptions} asks for. */
export function valueAtSetting(result: SettingTrend, setting: number, options: BandOptions = {}): TrendValue {
  return polynomialValue(result.trend, setting, options);
}

/**
 * The band of the trend for drawing, at `count` settings evenly over the measured range, ends included.
 * @param count 2 or more
 */
export function settingBand(result: SettingTrend, count: number, options: BandOptions = {}): TrendValue[] {
  const [low, high] = result.trend.xRange;
  return Array.from({ length: count }, (_, i) =>
    polynomialValue(result.trend, low + ((high - low) * i) / (count - 1), options),
  );
}

/**
 * The setting, within the measured range, that gives a wanted value, with its standard uncertainty to first order.
 * @returns null where the trend does not take the value in the range, takes it more than once, or is flat there
 */
export function settingFor(result: SettingTrend, wanted: number): Measured | null {
  const { trend } = result;
  const [low, high] = trend.xRange;
  const excess = (x: number) => polynomialValue(trend, x).value - wanted;
  const steps = 400;
  let found: number | null = null;
  for (let i = 0; i < steps; i++) {
    let a = low + ((high - low) * i) / steps;
    let b = low + ((high - low) * (i + 1)) / steps;
    const last = i === steps - 1;
    const crosses = excess(a) === 0 || excess(a) * excess(b) < 0 || (last && excess(b) === 0);
    if (!crosses) continue;
    if (found !== null) return null;
    const rising = excess(a) < excess(b);
    for (let k = 0; k < 60; k++) {
      const middle = (a + b) / 2;
      if (excess(middle) < 0 === rising) a = middle;
      else b = middle;
    }
    found = (a + b) / 2;
  }
  if (found === null) return null;
  const slope = polynomialSlope(trend, found);
  if (slope.value === 0 || (slope.u !== null && Math.abs(slope.value) < 2 * slope.u)) return null;
  const { u } = polynomialValue(trend, found);
  return { value: found, u: u === null ? null : u / Math.abs(slope.value) };
}
