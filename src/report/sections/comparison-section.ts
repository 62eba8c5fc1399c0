import type { Measured } from '../../numeric/measured.ts';
import type { ComparedPair, ComparedParameter } from '../../resonance/compare-parameters.ts';
import { comparisonChart } from '../charts/comparison-chart.ts';
import { trendChart } from '../charts/trend-chart.ts';
import { compareConfigurations, type MassTrend, type QuantityTrend } from '../comparison.ts';
import { massTrendData, overlayOf, quantityTrendData } from '../comparison-data.ts';
import { PAGE_WIDTH_PX, plotFigure } from '../figure.ts';
import { withUncertainty } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';
import type { ReportContext } from '../report-context.ts';

const OVERLAY_SIZE = { widthPx: PAGE_WIDTH_PX, heightPx: 280 };
const TREND_SIZE = { widthPx: 366, heightPx: 230 };
const FINE_P = 0.001;

function chance(p: number | null): string {
  if (p === null) return '–';
  return p < FINE_P ? `< ${FINE_P}` : p.toFixed(3);
}

function verdict({ significant }: ComparedPair): string {
  if (significant === null) return 'cannot be told';
  return significant ? 'significant' : 'not significant';
}

function pairRows(parameter: ComparedParameter, nameOf: (id: string) => string): HtmlValue[][] {
  return parameter.pairs.map((pair) => [
    parameter.name,
    `${nameOf(pair.to)} − ${nameOf(pair.from)}`,
    `${withUncertainty(pair.difference, pair.expandedDifference)}${parameter.unit && pair.difference !== null ? ` ${parameter.unit}` : ''}`,
    withUncertainty(pair.ratio, pair.uRatio),
    chance(pair.pAdjusted),
    verdict(pair),
  ]);
}

function sentences(notes: readonly string[]): Html | null {
  return notes.length === 0 ? null : html`<ul>${notes.map((note) => html`<li>${note}</li>`)}</ul>`;
}

function stated(value: Measured, unit: string): string {
  return `${withUncertainty(value.value, value.u)}${unit === '' ? '' : ` ${unit}`}`;
}

function massPart(trend: MassTrend, { painter }: ReportContext): Html {
  const { comparison, reason } = trend.outcome;
  const data = massTrendData(trend);
  const figure =
    data &&
    plotFigure(painter, trendChart(data), TREND_SIZE, {
      alt: '1 / fn² against moving mass with fitted line',
      caption: html`1 / f<sub>n</sub>² against moving mass. Bars: ± U.`,
    });
  return html`<h3>Natural frequency against mass</h3><div class="pair">${figure}<div>${
    comparison === null
      ? html`<p>${reason}</p>`
      : html`<p>1 / f<sub>n</sub>² = (4π² / k) (m + m<sub>0</sub>)</p><p>Stiffness k = ${stated(comparison.stiffnessNPerM, 'N/m')}<br>mass that moves beside the stated one m<sub>0</sub> = ${stated(comparison.effectiveMassKg, 'kg')}<br>(k = 1 for both)</p>${sentences(comparison.notes)}`
  }</div></div>`;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

function settingPart(trend: QuantityTrend, { painter }: ReportContext): Html {
  const { result, reason } = trend.outcome;
  const data = quantityTrendData(trend);
  const figure = plotFigure(painter, trendChart(data), TREND_SIZE, {
    alt: `${trend.quantity} against setting`,
    caption: `${capital(trend.quantity)} against the setting. Bars: ± U.`,
  });
  const perSetting = trend.unit === '' ? 'per unit of the setting' : `${trend.unit} per unit of the setting`;
  return html`<h3>${capital(trend.quantity)} against setting</h3><div class="pair">${figure}<div>${
    result === null
      ? html`<p>${reason}</p>`
      : html`<p>Change at the middle of the range: ${stated(result.slopeAtCentre, perSetting)} (k = 1).</p>${sentences(result.notes)}`
  }</div></div>`;
}

/** Configurations side by side: overlay, differences with their significance, trends over mass and setting. */
export function comparisonSection(context: ReportContext): Html | null {
  const { views, painter, unit } = context;
  if (views.length === 0) return null;
  if (views.length === 1)
    return html`<h2>Comparison of configurations</h2><p>The test has one configuration only, so there is nothing to compare it with.</p>`;
  const { parameters, masses, settings } = compareConfigurations(views);
  const overlay = overlayOf(views, unit);
  const nameOf = (id: string) => views.find((view) => view.configuration.id === id)?.name ?? id;
  const rows = parameters.parameters.flatMap((parameter) => pairRows(parameter, nameOf));
  return html`<h2>Comparison of configurations</h2>
${
  overlay.responses.length > 0
    ? plotFigure(painter, comparisonChart(overlay.responses, overlay.title), OVERLAY_SIZE, {
        alt: 'Amplitude against drive frequency of all configurations',
        caption: 'All configurations; excluded dwells are left out.',
      })
    : null
}
${
  rows.length === 0
    ? html`<p>No configuration has a fit, so no parameters can be compared.</p>`
    : htmlTable(
        [
          { title: 'parameter' },
          { title: 'compared' },
          { title: html`difference<br>± U (95 %)`, kind: 'number' },
          { title: html`ratio<br>± u`, kind: 'number' },
          { title: html`chance<br>p`, kind: 'number' },
          { title: 'verdict', kind: 'word' },
        ],
        rows,
        {
          caption:
            'p: chance of a difference at least this large if there were none, corrected for the number of comparisons; significant below 0.05.',
        },
      )
}
${sentences(parameters.notes)}
${masses.map((trend) => massPart(trend, context))}
${settings.map((trend) => settingPart(trend, context))}`;
}
