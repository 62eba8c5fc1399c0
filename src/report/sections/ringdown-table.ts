import { differenceOf } from '../../resonance/compare-differences.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { withUncertainty } from '../format-number.ts';
import { type Html, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';

/** What the ring-downs say of the dwells' natural frequency; null where there is nothing to compare. */
function besideFit(view: ConfigurationView): string | null {
  const fit = view.resonance?.naturalHz;
  const first = view.ringdowns.find((each) => each.error === null && each.naturalHz.value !== null);
  if (!fit || !first || fit.value === null) return null;
  const { difference, expandedDifference, pValue } = differenceOf(fit, first.naturalHz);
  if (difference === null || expandedDifference === null || pValue === null) return null;
  const size = `${withUncertainty(difference, expandedDifference)} Hz (95 %)`;
  return pValue < 0.05
    ? `The natural frequency of ring-down ${first.id} differs from that of the dwells by ${size}, more than their uncertainties explain: amplitude, drive or clamping may differ.`
    : `The natural frequency of ring-down ${first.id} agrees with that of the dwells: the difference is ${size}.`;
}

/** The ring-downs of a configuration; nothing where there are none. */
export function ringdownTable(view: ConfigurationView): Html | null {
  if (view.ringdowns.length === 0) return null;
  const agreement = besideFit(view);
  return html`<h3>Ring-downs</h3>
${htmlTable(
  [
    { title: 'ring-down', kind: 'word' },
    { title: html`natural frequency ± u<br>Hz`, kind: 'number' },
    { title: html`damping ratio<br>± u`, kind: 'number' },
    { title: html`window<br>s`, kind: 'number' },
    { title: 'frames', kind: 'number' },
    { title: 'what it shows' },
  ],
  view.ringdowns.map((each) => [
    each.id,
    withUncertainty(each.naturalHz.value, each.naturalHz.u),
    withUncertainty(each.dampingRatio.value, each.dampingRatio.u),
    each.window ? `${each.window[0].toFixed(2)} – ${each.window[1].toFixed(2)}` : '–',
    each.frames,
    each.error ?? each.sentence,
  ]),
  { caption: 'Standard uncertainties (k = 1).' },
)}
${agreement === null ? null : html`<p>${agreement}</p>`}`;
}
