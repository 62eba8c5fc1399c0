import type { DwellResult } from '../../engine/results.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { frequencyText, significant, withUncertainty } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { type HtmlColumn, htmlTable } from '../html-table.ts';
import { inUnit, type LengthUnit } from '../length-unit.ts';

interface RunSheetColumn extends HtmlColumn {
  readonly cell: (dwell: DwellResult) => HtmlValue;
  /** Whether any dwell has something to show; always shown where absent. */
  readonly has?: (dwell: DwellResult) => boolean;
}

function drive(dwell: DwellResult): string {
  if (dwell.driveHz !== null) return frequencyText(dwell.driveHz);
  const { value } = dwell.frequency;
  return value === null ? '–' : `${significant(value, 5)} (found)`;
}

function verdict(dwell: DwellResult): HtmlValue {
  if (dwell.error !== null) return html`<b>not measured</b>`;
  const words = [dwell.typed ? 'typed in' : dwell.verdict];
  if (dwell.jointFit) words.push('joint fit');
  if (dwell.codecLimited) words.push('codec-limited');
  if (dwell.excluded !== null) words.push('excluded');
  return words.join(', ');
}

function columns(unit: LengthUnit): RunSheetColumn[] {
  return [
    { title: 'dwell', cell: (dwell) => dwell.id },
    { title: html`drive<br>Hz`, kind: 'number', cell: drive },
    {
      title: html`amplitude ± U<br>${unit.name}, zero to peak`,
      kind: 'number',
      cell: (dwell) => withUncertainty(inUnit(dwell.amplitude.value, unit), inUnit(dwell.amplitudeU95, unit)),
    },
    {
      title: html`response<br>over drive ± u`,
      kind: 'number',
      has: (dwell) => dwell.gain.value !== null,
      cell: (dwell) => withUncertainty(dwell.gain.value, dwell.gain.u),
    },
    {
      title: html`lag ± U<br>degrees`,
      kind: 'number',
      has: (dwell) => dwell.lag.value !== null,
      cell: (dwell) => withUncertainty(dwell.lag.value, dwell.lagU95 ?? null),
    },
    {
      title: 'k',
      kind: 'number',
      cell: (dwell) =>
        dwell.coverageFactor === null || dwell.amplitude.value === null
          ? '–'
          : dwell.coverageFactor.toFixed(2),
    },
    {
      title: html`window<br>s`,
      kind: 'number',
      has: (dwell) => dwell.window !== null,
      cell: (dwell) => (dwell.window ? `${dwell.window[0].toFixed(2)} – ${dwell.window[1].toFixed(2)}` : '–'),
    },
    {
      title: html`frames<br>(lost)`,
      kind: 'number',
      has: (dwell) => dwell.frames > 0,
      cell: (dwell) => `${dwell.frames}${dwell.lostFrames > 0 ? ` (${dwell.lostFrames})` : ''}`,
    },
    { title: 'verdict', kind: 'word', cell: verdict },
  ];
}

/** The run sheet of a configuration with its results; columns that no dwell has anything for are left out. */
export function runSheetTable(view: ConfigurationView, unit: LengthUnit): Html {
  if (view.dwells.length === 0) return html`<p>No dwells.</p>`;
  const shown = columns(unit).filter(({ has }) => !has || view.dwells.some(has));
  return htmlTable(
    shown,
    view.dwells.map((dwell) => shown.map(({ cell }) => cell(dwell))),
  );
}
