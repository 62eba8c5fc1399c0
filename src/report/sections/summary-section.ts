import type { Measured } from '../../numeric/measured.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { significant, withUncertainty } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';
import { measuredInUnit } from '../length-unit.ts';
import type { ReportContext } from '../report-context.ts';

/** `value ± U` with U = k u; the value alone where k or u is not known. */
export function expanded({ value, u }: Measured, k: number | null): string {
  return withUncertainty(value, u === null || k === null ? null : k * u);
}

function summaryRow(view: ConfigurationView, context: ReportContext): HtmlValue[] {
  const { resonance } = view;
  if (resonance === null || resonance.error !== null) return [view.name, '–', '–', '–', '–', '–', '–'];
  const k = resonance.coverageFactor;
  const inMm = resonance.gainUnit === 'mm';
  const peak = inMm ? measuredInUnit(resonance.peakAmplitude, context.unit) : resonance.peakAmplitude;
  return [
    view.name,
    expanded(resonance.naturalHz, k),
    expanded(resonance.dampingRatio, k),
    expanded(resonance.q, k),
    expanded(resonance.bandwidthHz, k),
    `${expanded(peak, k)}${inMm && peak.value !== null ? ` ${context.unit.name}` : ''}`,
    k === null ? '–' : significant(k, 3),
  ];
}

function verdictCounts({ measurement }: ReportContext): string {
  const counts = new Map<string, number>();
  for (const dwell of measurement.results.dwells) {
    const kind = dwell.error !== null ? 'not measured' : dwell.typed ? 'typed in' : dwell.verdict;
    counts.set(kind, (counts.get(kind) ?? 0) + 1);
  }
  const excluded = measurement.results.dwells.filter((dwell) => dwell.excluded !== null).length;
  const parts = [...counts].map(([kind, count]) => `${count} ${kind}`);
  return `${parts.join(', ')}${excluded > 0 ? `; ${excluded} left out of the fits` : ''}`;
}

function unfitted(view: ConfigurationView): Html | null {
  const reason = view.resonance === null ? 'no fit was made.' : view.resonance.error;
  return reason === null ? null : html`<li>${view.name}: ${reason}</li>`;
}

/** What the test found, on one look. */
export function summarySection(context: ReportContext): Html {
  const { views, measurement } = context;
  const { dwells } = measurement.results;
  const nothing = dwells.every((dwell) => dwell.amplitude.value === null);
  if (nothing) {
    return html`<h2>Results</h2><p class="notice">Nothing has been measured yet: ${
      dwells.length === 0 ? 'the test has no dwells' : 'no dwell has an amplitude'
    }. What follows is the set-up as planned.</p>`;
  }
  const missing = views.map(unfitted).filter((each) => each !== null);
  const fitted = views.some((view) => view.resonance !== null && view.resonance.error === null);
  return html`<h2>Results</h2>
${
  fitted
    ? htmlTable(
        [
          { title: 'configuration' },
          { title: html`natural frequency<br>Hz`, kind: 'number' },
          { title: 'damping ratio', kind: 'number' },
          { title: 'Q', kind: 'number' },
          { title: html`half-power<br>bandwidth, Hz`, kind: 'number' },
          { title: 'peak', kind: 'number' },
          { title: 'k', kind: 'number' },
        ],
        views.map((view) => summaryRow(view, context)),
        {
          caption:
            'Value ± U, the expanded uncertainty U = k u at a coverage of 95 %. Peak: largest response, zero to peak, or response over drive where no unit stands.',
        },
      )
    : null
}
${missing.length > 0 ? html`<ul>${missing}</ul>` : null}
<p>Dwells: ${verdictCounts(context)}.</p>
${context.words.remarks?.trim() ? html`<h3>Remarks</h3><p class="words">${context.words.remarks}</p>` : null}`;
}
