import type { DwellResult } from '../engine/results.ts';
import { dwellName } from './results-text.ts';

/** A sentence with the dwells it is about. */
export interface Remark {
  readonly sentence: string;
  readonly dwells: readonly string[];
  /** True where it is about every dwell of the list. */
  readonly all: boolean;
}

/** What there is to say of one dwell: why it failed, what its verdict means, its warnings. Exclusions are told apart. */
function sentencesOf(dwell: DwellResult): Set<string> {
  const said = new Set<string>();
  if (dwell.error !== null) said.add(dwell.error);
  else if (dwell.verdict !== 'steady' && !dwell.typed && dwell.sentence !== '') said.add(dwell.sentence);
  for (const warning of dwell.warnings) said.add(warning);
  return said;
}

/** The sentences said of dwells, each once, with the dwells that it is said of, in the order of the run sheet. */
export function dwellRemarks(dwells: readonly DwellResult[]): Remark[] {
  const names = new Map<string, string[]>();
  for (const dwell of dwells)
    for (const sentence of sentencesOf(dwell))
      names.set(sentence, [...(names.get(sentence) ?? []), `${dwellName(dwell)} (${dwell.id})`]);
  return [...names].map(([sentence, of]) => ({
    sentence,
    dwells: of,
    all: of.length === dwells.length && dwells.length > 2,
  }));
}
