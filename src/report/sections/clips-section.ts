import type { ClipResult } from '../../engine/results.ts';
import { significant } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';
import type { ReportContext } from '../report-context.ts';

const HALF_HASH = 32; // hexadecimal digits on a line

function clipRow(clip: ClipResult): HtmlValue[] {
  if (clip.frames === 0) return [clip.id, clip.file, '–', '–', '–', html`<span class="soft">not read</span>`];
  return [
    clip.id,
    clip.file,
    `${clip.frames} in ${significant(clip.duration, 4)} s${clip.frameRate === null ? '' : ` (${significant(clip.frameRate, 4)}/s)`}`,
    `${clip.width} × ${clip.height}`,
    clip.codec,
    clip.sha256 === null
      ? 'not known'
      : html`<span class="hash">${clip.sha256.slice(0, HALF_HASH)}<br>${clip.sha256.slice(HALF_HASH)}</span>`,
  ];
}

function clipRemarks(clips: readonly ClipResult[]): Html | null {
  const said = clips.flatMap((clip) => {
    const sentences = clip.error !== null ? [clip.error] : clip.warnings;
    return sentences.map((sentence) => html`<li>${clip.id}: ${sentence}</li>`);
  });
  return said.length > 0 ? html`<h3>Warnings on clips</h3><ul>${said}</ul>` : null;
}

function reproduction({ reproduction: found }: ReportContext): Html | null {
  const { differences, keptAmplitudes, sameAmplitudes } = found;
  const same =
    keptAmplitudes > 0
      ? html`<p>${sameAmplitudes} of ${keptAmplitudes} amplitudes kept in the test file were found again to nine digits.</p>`
      : null;
  if (differences.length === 0) return same;
  return html`${same}<div class="notice"><p>This report does not repeat an earlier measurement exactly:</p><ul>${differences.map((difference) => html`<li>${difference}</li>`)}</ul></div>`;
}

/** The clips with their content hashes, so that the measurement can be repeated and a replaced clip be noticed. */
export function clipsSection(context: ReportContext): Html {
  const { clips, program } = context.measurement.results;
  return html`<h2>Clips and reproduction</h2>
${
  clips.length === 0
    ? html`<p>No clip was read for this report.</p>`
    : htmlTable(
        [
          { title: 'clip' },
          { title: 'file' },
          { title: 'frames', kind: 'number' },
          { title: 'size, px', kind: 'number' },
          { title: 'codec' },
          { title: 'SHA-256 of the file' },
        ],
        clips.map(clipRow),
        { look: 'small' },
      )
}
${clipRemarks(clips)}
<p>The same test file${clips.length > 0 ? ', the same clips (by their SHA-256)' : ''} and ${program} give the same numbers.</p>
${reproduction(context)}`;
}
