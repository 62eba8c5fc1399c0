import type { DwellResult, ResonanceResult, Results, RingDownResult } from '../engine/results.ts';
import { frequencyText, significant, withUncertainty } from './format-number.ts';
import { type TextColumn, textTable, wrapped } from './text-table.ts';

/** Columns of a plain terminal; longer sentences are wrapped to it. */
export const TERMINAL_COLUMNS = 80;

const DWELL_COLUMNS: readonly TextColumn[] = [
  { title: 'drive Hz', align: 'right' },
  { title: 'amplitude mm ± U', align: 'right' },
  { title: 'lag ° ± U', align: 'right' },
  { title: 'frames', align: 'right' },
  { title: 'verdict', align: 'left' },
];

/** The frequency a dwell goes by: as set, or as measured where none was set. */
export function dwellName(dwell: DwellResult): string {
  if (dwell.driveHz !== null) return `${frequencyText(dwell.driveHz)} Hz`;
  return dwell.frequency.value !== null ? `${significant(dwell.frequency.value, 5)} Hz (measured)` : dwell.id;
}

function verdictText(dwell: DwellResult): string {
  const parts = [dwell.typed ? 'typed' : dwell.verdict];
  if (dwell.jointFit) parts.push('joint fit');
  if (dwell.codecLimited) parts.push('codec-limited');
  if (dwell.excluded !== null) parts.push('excluded');
  return parts.join(', ');
}

function dwellRow(dwell: DwellResult): string[] {
  const frequency = dwell.driveHz ?? dwell.frequency.value;
  return [
    frequency === null ? '–' : frequencyText(dwell.driveHz ?? Number(significant(frequency, 5))),
    withUncertainty(dwell.amplitude.value, dwell.amplitudeU95 ?? dwell.amplitude.u),
    withUncertainty(dwell.lag.value, dwell.lagU95 ?? dwell.lag.u),
    dwell.frames > 0 ? String(dwell.frames) : '–',
    verdictText(dwell),
  ];
}

/** What a reader must know of the rows beside their numbers: reasons, warnings, exclusions. */
function dwellRemarks(dwells: readonly DwellResult[]): string[] {
  return dwells.flatMap((dwell) => {
    const said = new Set<string>();
    if (dwell.error !== null) said.add(dwell.error);
    else if (dwell.verdict !== 'steady' && !dwell.typed) said.add(dwell.sentence);
    if (dwell.excluded !== null) said.add(`Excluded: ${dwell.excluded}.`);
    for (const warning of dwell.warnings) said.add(warning);
    return [...said].map((sentence) => `${dwellName(dwell)}: ${sentence}`);
  });
}

function bullet(sentence: string): string {
  return wrapped(sentence, TERMINAL_COLUMNS - 4)
    .map((line, k) => `${k === 0 ? '  - ' : '    '}${line}\n`)
    .join('');
}

function ringDownText(ringdown: RingDownResult): string {
  if (ringdown.error !== null) return bullet(`ring-down ${ringdown.id}: ${ringdown.error}`);
  const head = `  ring-down ${ringdown.id}: natural frequency ${withUncertainty(ringdown.naturalHz.value, ringdown.naturalHz.u)} Hz, damping ratio ${withUncertainty(ringdown.dampingRatio.value, ringdown.dampingRatio.u)} (± u, k = 1)`;
  const lines = wrapped(head, TERMINAL_COLUMNS - 2).map((line) => `  ${line}\n`);
  return lines.join('') + ringdown.warnings.map(bullet).join('');
}

function resonanceText(fit: ResonanceResult): string {
  if (fit.error !== null) return bullet(`resonance: ${fit.error}`);
  const unit = fit.gainUnit === 'mm' ? ' mm' : '';
  const rows: [string, string][] = [
    ['natural frequency', `${withUncertainty(fit.naturalHz.value, fit.naturalHz.u)} Hz`],
    ['damping ratio', withUncertainty(fit.dampingRatio.value, fit.dampingRatio.u)],
    ['Q', withUncertainty(fit.q.value, fit.q.u)],
    [
      'peak',
      `${withUncertainty(fit.peakAmplitude.value, fit.peakAmplitude.u)}${unit} at ${withUncertainty(fit.peakHz.value, fit.peakHz.u)} Hz`,
    ],
    ['half-power bandwidth', `${withUncertainty(fit.bandwidthHz.value, fit.bandwidthHz.u)} Hz`],
    ['static gain', `${withUncertainty(fit.staticGain.value, fit.staticGain.u)}${unit}`],
  ];
  if (fit.stiffness.value !== null)
    rows.push(['stiffness', `${withUncertainty(fit.stiffness.value, fit.stiffness.u)} N/m`]);
  if (fit.dampingCoefficient.value !== null) {
    rows.push([
      'damping coefficient',
      `${withUncertainty(fit.dampingCoefficient.value, fit.dampingCoefficient.u)} N s/m`,
    ]);
  }
  const chi =
    fit.chi2 !== null && fit.dof !== null
      ? `, chi2 ${significant(fit.chi2, 3)} with ${fit.dof} degrees of freedom`
      : '';
  const head = `  fit: ${fit.model}, ${fit.quantity}, ${fit.points} points${chi} (± u, k = 1)`;
  const body = rows.map(([name, value]) => `    ${name.padEnd(22)}${value}\n`).join('');
  return (
    wrapped(head, TERMINAL_COLUMNS - 2)
      .map((line) => `  ${line}\n`)
      .join('') +
    body +
    fit.warnings.map(bullet).join('')
  );
}

/**
 * The table a person reads after measuring: a block for each configuration with its dwells (amplitude zero-to-peak,
 * U at 95 %), its ring-downs, and the resonance fit.
 */
export function resultsText(results: Results, labels: ReadonlyMap<string, string>): string {
  const clipTrouble = results.clips.flatMap((clip) => {
    const said = clip.error !== null ? [clip.error] : clip.warnings;
    return said.map((sentence) => bullet(`clip ${clip.id}: ${sentence}`));
  });
  const configurations = [
    ...new Set([
      ...labels.keys(),
      ...[...results.dwells, ...results.ringdowns].map((each) => each.configuration),
    ]),
  ];
  const blocks = configurations.map((id) => {
    const dwells = results.dwells.filter((dwell) => dwell.configuration === id);
    const label = labels.get(id);
    const title = `${label && label !== id ? `${label} (${id})` : id}\n`;
    const table = dwells.length > 0 ? textTable(DWELL_COLUMNS, dwells.map(dwellRow)) : '  no dwells\n';
    const rest = [
      ...dwellRemarks(dwells).map(bullet),
      ...results.ringdowns.filter((each) => each.configuration === id).map(ringDownText),
      ...results.resonances.filter((each) => each.configuration === id).map(resonanceText),
    ];
    return title + table + (rest.length > 0 ? `\n${rest.join('')}` : '');
  });
  return `${results.test}\n\n${blocks.join('\n')}${clipTrouble.length > 0 ? `\nClips\n${clipTrouble.join('')}` : ''}`;
}
