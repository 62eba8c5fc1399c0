import { amplitudeChart, rangeOf } from '../charts/amplitude-chart.ts';
import { CIRCLE_SIZE, circleChart } from '../charts/circle-chart.ts';
import { lagChart } from '../charts/lag-chart.ts';
import { residualChart } from '../charts/residual-chart.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { PAGE_WIDTH_PX, plotFigure } from '../figure.ts';
import { significant, withUncertainty } from '../format-number.ts';
import { type Html, html } from '../html.ts';
import type { ReportContext } from '../report-context.ts';
import { circleData, responseData } from '../response-curves.ts';
import { correlationSentence, parameterTable } from './parameter-table.ts';
import { remarkList, sentenceList } from './remarks.ts';
import { ringdownTable } from './ringdown-table.ts';
import { runSheetTable } from './run-sheet-table.ts';

const AMPLITUDE_SIZE = { widthPx: PAGE_WIDTH_PX, heightPx: 230 };
const RESIDUAL_SIZE = { widthPx: PAGE_WIDTH_PX, heightPx: 125 };
const LAG_SIZE = { widthPx: PAGE_WIDTH_PX, heightPx: 160 };

function responsePlots(view: ConfigurationView, { painter, unit }: ReportContext): Html | null {
  const data = responseData(view, unit);
  if (data.dwells.length === 0) return null;
  const range = rangeOf(data);
  const lag = lagChart(data);
  const residuals = residualChart(view.resonance?.fitted ?? [], range);
  return html`<h3>Response</h3>
${plotFigure(painter, amplitudeChart(data), AMPLITUDE_SIZE, {
  alt: `Amplitude against drive frequency of ${view.name}, dwells and fitted curve`,
  caption: `Amplitude against drive frequency. Bars: ± U of each dwell without what all dwells share${data.curve ? '; band: 95 % interval of the fitted curve' : ''}.`,
})}
${plotFigure(painter, residuals, RESIDUAL_SIZE, {
  alt: `Residuals of the fit of ${view.name}`,
  caption: 'Residuals: measured minus fit, in standard uncertainties u of the dwells.',
})}
${
  lag
    ? plotFigure(painter, lag, LAG_SIZE, {
        alt: `Lag against drive frequency of ${view.name}`,
        caption: 'Lag of the response behind the drive. Bars: ± U.',
      })
    : html`<p>No lag was measured, so there is neither a lag plot nor a circle plot; a drive marker in view would give one.</p>`
}`;
}

function circlePart(view: ConfigurationView, { painter, unit }: ReportContext): Html | null {
  if (!view.circle) return null;
  const data = circleData(view, unit);
  const figure =
    data &&
    plotFigure(painter, circleChart(data), CIRCLE_SIZE, {
      alt: `Circle plot of ${view.name}`,
      caption: `${view.circle.plane.quantity} in the complex plane, in which this resonance is a circle. Points: dwells; line: the fit; dashed: the circle through the dwells.`,
    });
  const { naturalHz, damping, sentence } = view.circle;
  const found =
    naturalHz.value === null || damping.value === null
      ? null
      : html`<p>From the circle: natural frequency ${withUncertainty(naturalHz.value, naturalHz.u)} Hz, ${view.resonance?.damping === 'structural' ? 'loss factor' : 'damping ratio'} ${withUncertainty(damping.value, damping.u)} (k = 1).</p>`;
  return html`<h3>Circle plot</h3><div class="pair">${figure}<div><p>${sentence}</p>${found}${halfPowerPart(view)}</div></div>`;
}

function halfPowerPart({ halfPower, resonance }: ConfigurationView): Html | null {
  if (!halfPower) return null;
  if (halfPower.missing !== null) return html`<p class="soft">${halfPower.missing}</p>`;
  const { naturalHz, damping, bandwidthHz } = halfPower;
  const name = resonance?.damping === 'structural' ? 'loss factor' : 'damping ratio';
  return html`<p>Read from the dwells by hand's method, without the fit: half-power bandwidth ${withUncertainty(bandwidthHz.value, bandwidthHz.u)} Hz, natural frequency ${withUncertainty(naturalHz.value, naturalHz.u)} Hz, ${name} ${withUncertainty(damping.value, damping.u)} (k = 1).</p>`;
}

function fitPart(view: ConfigurationView, context: ReportContext): Html {
  const { resonance } = view;
  if (resonance === null) return html`<p>No fit was made.</p>`;
  if (resonance.error !== null) return html`<p class="notice">No resonance fit: ${resonance.error}</p>`;
  const { chi2, dof } = resonance;
  const scatter =
    chi2 === null || dof === null ? '' : ` χ² = ${significant(chi2, 3)} with ${dof} degrees of freedom.`;
  const correlation = correlationSentence(resonance);
  const [description, ...notes] = resonance.notes;
  return html`<div class="keep"><h3>Resonance fit</h3>
<p>Model: ${description ?? resonance.model}. Fitted to ${resonance.quantity} of ${resonance.points} dwells.${scatter}</p>
<p class="formula">${resonance.formula}</p>
${parameterTable(resonance, context.unit)}</div>
<p class="soft">${notes.map((note) => `${note} `)}${correlation}</p>
${view.circle ? circlePart(view, context) : halfPowerPart(view)}`;
}

/** Run sheet, plots, fit, ring-downs and remarks of one configuration. */
export function configurationSection(view: ConfigurationView, context: ReportContext): Html {
  return html`<h2 class="page">${view.name}</h2>
${runSheetTable(view, context.unit)}
${responsePlots(view, context)}
${fitPart(view, context)}
${ringdownTable(view)}
${remarkList(view.dwells)}
${sentenceList('Warnings on the fit', [
  ...(view.resonance?.warnings ?? []),
  ...view.ringdowns.flatMap((each) => each.warnings.map((warning) => `Ring-down ${each.id}: ${warning}`)),
])}`;
}
