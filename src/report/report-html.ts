import type { Measurement } from '../engine/measure-test.ts';
import type { DwellResult, ResonanceResult } from '../engine/results.ts';
import type { TestFile } from '../testfile/schema.ts';
import { frequencyText, significant, withUncertainty } from './format-number.ts';
import { type Html, html } from './html.ts';
import { dwellName } from './results-text.ts';

const STYLE = `body{font:14px/1.45 system-ui,"Noto Sans","DejaVu Sans",sans-serif;font-variant-numeric:tabular-nums;color:#1b2430;max-width:60rem;margin:2rem auto;padding:0 1rem}
table{border-collapse:collapse;margin:.6rem 0 1.2rem}th,td{border-bottom:1px solid #dcd8cd;padding:.25rem .7rem;text-align:right}th:last-child,td:last-child{text-align:left}
h2{margin-top:2rem}caption{text-align:left;color:#5d6775}@media print{tr,table{break-inside:avoid}}`;

function dwellRow(dwell: DwellResult): Html {
  const frequency = dwell.driveHz ?? dwell.frequency.value;
  return html`<tr><td>${frequency === null ? '–' : frequencyText(frequency)}</td><td>${withUncertainty(dwell.amplitude.value, dwell.amplitudeU95)}</td><td>${withUncertainty(dwell.lag.value, dwell.lagU95)}</td><td>${dwell.frames}</td><td>${dwell.error ?? (dwell.excluded === null ? dwell.verdict : `${dwell.verdict}, excluded: ${dwell.excluded}`)}</td></tr>`;
}

function fitRows(fit: ResonanceResult): Html {
  if (fit.error !== null) return html`<p>${fit.error}</p>`;
  const unit = fit.gainUnit === 'mm' ? ' mm' : '';
  const rows: readonly [string, string][] = [
    ['natural frequency', `${withUncertainty(fit.naturalHz.value, fit.naturalHz.u)} Hz`],
    ['damping ratio', withUncertainty(fit.dampingRatio.value, fit.dampingRatio.u)],
    ['Q', withUncertainty(fit.q.value, fit.q.u)],
    ['half-power bandwidth', `${withUncertainty(fit.bandwidthHz.value, fit.bandwidthHz.u)} Hz`],
    ['peak', `${withUncertainty(fit.peakAmplitude.value, fit.peakAmplitude.u)}${unit} at ${withUncertainty(fit.peakHz.value, fit.peakHz.u)} Hz`],
    ['static gain', `${withUncertainty(fit.staticGain.value, fit.staticGain.u)}${unit}`],
  ];
  const chi = fit.chi2 === null || fit.dof === null ? '' : `, chi2 ${significant(fit.chi2, 3)} with ${fit.dof} degrees of freedom`;
  return html`<p>Model ${fit.model}, ${fit.damping} damping, fitted to ${fit.quantity} of ${fit.points} dwells${chi}: ${fit.formula}</p>
<table><caption>Standard uncertainties (k = 1)</caption><tbody>${rows.map(([name, value]) => html`<tr><td>${name}</td><td>${value}</td></tr>`)}</tbody></table>`;
}

/** The report of a measured test: one HTML file that needs nothing else. */
export function reportHtml(test: TestFile, measurement: Measurement): string {
  const { results } = measurement;
  const sections = test.configurations.map((configuration) => {
    const dwells = results.dwells.filter((dwell) => dwell.configuration === configuration.id);
    const said = dwells.flatMap((dwell) => dwell.warnings.map((warning) => html`<li>${dwellName(dwell)}: ${warning}</li>`));
    return html`<h2>${configuration.label ?? configuration.id}</h2>
<table><thead><tr><th>drive Hz</th><th>amplitude mm, peak ± U (95 %)</th><th>lag ° ± U</th><th>frames</th><th>verdict</th></tr></thead><tbody>${dwells.map(dwellRow)}</tbody></table>
${said.length > 0 ? html`<ul>${said}</ul>` : null}
${results.resonances.filter((fit) => fit.configuration === configuration.id).map(fitRows)}`;
  });
  return `<!doctype html>\n${
    html`<html lang="en"><head><meta charset="utf-8"><title>${test.title}</title><style>${STYLE_MARKUP}</style></head><body><h1>${test.title}</h1><p>${results.program}</p>${sections}</body></html>`.markup
  }\n`;
}

const STYLE_MARKUP = html([STYLE] as unknown as TemplateStringsArray);
