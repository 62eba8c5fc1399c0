import type { Warning } from '../numeric/warning.ts';
import { harmonicOnFundamental, harmonicWarning, judgeAlias } from './aliasing.ts';
import type { FilmingFacts } from './dwell-facts.ts';
import { frameDensity } from './frames-per-period.ts';

/** Whether the frame rate makes this drive frequency unmeasurable (see `judgeAlias`). */
export function isRefused(frequencyHz: number, filming: FilmingFacts): boolean {
  return judgeAlias(frequencyHz, filming.frameRateHz, filming.durationS).kind === 'refused';
}

/** Cautions about frame rate against drive frequency: folding, frames per period, harmonics folded onto the fundamental. */
export function filmingWarnings(frequencyHz: number, filming: FilmingFacts): Warning[] {
  const { frameRateHz, durationS } = filming;
  const alias = judgeAlias(frequencyHz, frameRateHz, durationS);
  if (alias.kind === 'refused') return alias.warning === null ? [] : [alias.warning];
  const order = harmonicOnFundamental(frequencyHz, frameRateHz, durationS);
  return [
    alias.warning,
    frameDensity(frequencyHz, frameRateHz).warning,
    order === null ? null : harmonicWarning(order, frequencyHz, frameRateHz),
  ].filter((warning) => warning !== null);
}
