import { significant } from '../../../src/report/format-number.ts';
import type { SpotJudgement } from '../../../src/track/template.ts';

/** How well a spot will track, in a few words beside it. */
export function spotPhrase(judgement: SpotJudgement | 'looking'): string {
  if (judgement === 'looking') return 'looking …';
  if (!judgement.ok) return 'cannot be tracked';
  return judgement.expectedUPx === null ? 'can be tracked' : `${significant(judgement.expectedUPx, 2)} px`;
}

/** The same as sentences. */
export function spotSentences(judgement: SpotJudgement | 'looking'): readonly string[] {
  if (judgement === 'looking') return ['Looking at the spot …'];
  if (!judgement.ok) return [judgement.reason ?? 'This spot cannot be tracked; choose another one.'];
  const u = judgement.expectedUPx;
  const tracks = u === null ? 'Can be tracked.' : `Tracks to about ${significant(u, 2)} px in one frame.`;
  return [tracks, ...judgement.warnings];
}

/** Tone of the words. */
export function spotTone(judgement: SpotJudgement | 'looking'): 'ok' | 'wait' | 'bad' | 'soft' {
  if (judgement === 'looking') return 'soft';
  if (!judgement.ok) return 'bad';
  return judgement.warnings.length > 0 ? 'wait' : 'ok';
}
