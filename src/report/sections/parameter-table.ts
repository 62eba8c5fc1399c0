import type { Interval, ResonanceResult } from '../../engine/results.ts';
import type { Measured } from '../../numeric/measured.ts';
import { staticGainText } from '../../resonance/model-text.ts';
import { decimalsFor, significant } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';
import { inUnit, type LengthUnit, measuredInUnit } from '../length-unit.ts';

interface Parameter {
  readonly name: HtmlValue;
  readonly unit: string;
  readonly found: Measured;
  readonly interval?: Interval | null;
}

function interval(of: Interval | null | undefined, decimals: number): string {
  if (!of) return '–';
  const [low, high] = of.map((end) => (end === null ? 'open' : end.toFixed(decimals)));
  return `${low ?? ''} … ${high ?? ''}`;
}

function row({ name, unit, found, interval: ends }: Parameter, k: number | null): HtmlValue[] {
  const { value, u } = found;
  if (value === null) return [name, 'none', '–', '–', '–', unit];
  if (u === null) return [name, significant(value, 4), '–', '–', '–', unit];
  const decimals = decimalsFor(u);
  return [
    name,
    value.toFixed(decimals),
    u.toFixed(decimals),
    k === null ? '–' : (k * u).toFixed(decimals),
    interval(ends, decimals),
    unit,
  ];
}

function lengths(of: Interval | null, unit: LengthUnit): Interval | null {
  return of && [inUnit(of[0], unit), inUnit(of[1], unit)];
}

function parametersOf(fit: ResonanceResult, unit: LengthUnit): Parameter[] {
  const inMm = fit.gainUnit === 'mm';
  const size = (value: Measured) => (inMm ? measuredInUnit(value, unit) : value);
  const sizeUnit = inMm ? unit.name : '';
  const structural = fit.damping === 'structural';
  const excitation = fit.model as Parameters<typeof staticGainText>[0];
  const all: Parameter[] = [
    {
      name: html`natural frequency f<sub>n</sub>`,
      unit: 'Hz',
      found: fit.naturalHz,
      interval: fit.intervals.naturalHz,
    },
    { name: 'damping ratio ζ', unit: '', found: fit.dampingRatio, interval: fit.intervals.dampingRatio },
    ...(structural ? [{ name: 'loss factor η', unit: '', found: fit.lossFactor }] : []),
    { name: 'Q', unit: '', found: fit.q },
    { name: 'logarithmic decrement', unit: '', found: fit.logDecrement },
    { name: 'half-power bandwidth', unit: 'Hz', found: fit.bandwidthHz },
    { name: 'half-power points f₁', unit: 'Hz', found: fit.lowerHalfPowerHz },
    {
      name: html`<span style="visibility:hidden">half-power points</span> f₂`,
      unit: 'Hz',
      found: fit.upperHalfPowerHz,
    },
    { name: 'frequency of the peak', unit: 'Hz', found: fit.peakHz },
    { name: 'peak, zero to peak', unit: sizeUnit, found: size(fit.peakAmplitude) },
    {
      name: `static gain G: ${staticGainText(excitation, !inMm).replace(/ in mm$/, '')}`,
      unit: sizeUnit,
      found: size(fit.staticGain),
      interval: inMm ? lengths(fit.intervals.staticGain, unit) : fit.intervals.staticGain,
    },
    ...(fit.stiffness.value === null ? [] : [{ name: 'stiffness k', unit: 'N/m', found: fit.stiffness }]),
    ...(fit.dampingCoefficient.value === null
      ? []
      : [{ name: 'damping coefficient c', unit: 'N s/m', found: fit.dampingCoefficient }]),
  ];
  return all;
}

/** Parameters of a fit with standard and expanded uncertainty and, for those fitted, the interval by profile likelihood. */
export function parameterTable(fit: ResonanceResult, unit: LengthUnit): Html {
  const k = fit.coverageFactor;
  const coverage = `${Math.round(100 * fit.coverage)} %`;
  return htmlTable(
    [
      { title: 'parameter' },
      { title: 'value', kind: 'number' },
      { title: 'u', kind: 'number' },
      { title: k === null ? 'U' : `U (k = ${significant(k, 3)})`, kind: 'number' },
      { title: `interval, ${coverage}`, kind: 'number' },
      { title: 'unit' },
    ],
    parametersOf(fit, unit).map((parameter) => row(parameter, k)),
  );
}

const CORRELATED = ['static gain', 'natural frequency', 'damping ratio'] as const;

/** How the three fitted parameters hang together, in one sentence; null where that is not known. */
export function correlationSentence(fit: ResonanceResult): string | null {
  const { correlation } = fit;
  if (!correlation || correlation.length !== CORRELATED.length) return null;
  const pairs = CORRELATED.flatMap((a, i) =>
    CORRELATED.slice(i + 1).map(
      (b, j) => `${a} and ${b} ${(correlation[i]?.[i + 1 + j] ?? 0).toFixed(2).replace('-', '−')}`,
    ),
  );
  return `Correlation of ${pairs.join('; ')}.`;
}
