import type { DwellResult } from '../../engine/results.ts';
import { dwellRemarks, type Remark } from '../dwell-remarks.ts';
import { type Html, html } from '../html.ts';
import { dwellName } from '../results-text.ts';

const MOST_NAMES = 8;

function names({ dwells, all }: Remark): string {
  if (all) return 'all dwells';
  const shown = dwells.slice(0, MOST_NAMES).join(', ');
  return dwells.length > MOST_NAMES ? `${shown} and ${dwells.length - MOST_NAMES} more` : shown;
}

/** Exclusions with their reasons, and what else is to be said of dwells; nothing where there is nothing. */
export function remarkList(dwells: readonly DwellResult[]): Html | null {
  const excluded = dwells.filter((dwell) => dwell.excluded !== null);
  const remarks = dwellRemarks(dwells);
  if (excluded.length + remarks.length === 0) return null;
  return html`${
    excluded.length > 0
      ? html`<h3>Excluded dwells</h3><ul>${excluded.map(
          (dwell) =>
            html`<li>${dwellName(dwell)} (${dwell.id}): ${dwell.excluded || 'no reason given'}. Measured and shown, not fitted.</li>`,
        )}</ul>`
      : null
  }
${
  remarks.length > 0
    ? html`<h3>Warnings and remarks on dwells</h3><ul>${remarks.map(
        (remark) => html`<li>${names(remark)}: ${remark.sentence}</li>`,
      )}</ul>`
    : null
}`;
}

/** Sentences as a list under a heading; nothing where there are none. */
export function sentenceList(heading: string, sentences: readonly string[]): Html | null {
  if (sentences.length === 0) return null;
  return html`<h3>${heading}</h3><ul>${sentences.map((sentence) => html`<li>${sentence}</li>`)}</ul>`;
}
