import type { KnownCorrection } from '../numeric/warning.ts';
import { type Budget, type BudgetEntry, type BudgetSource, combineBudget } from './amplitude-budget.ts';
import { type CodecEvidence, type CodecLimit, codecLimit } from './codec-limit.ts';
import type { DwellFacts, RawLag } from './dwell-facts.ts';

const DEG_PER_RAD = 180 / Math.PI;

/** Root mean square share of a shake at the drive frequency that adds to an amplitude or a lag: its phase is not known. */
const RANDOM_PHASE = Math.SQRT1_2;

/** The corrections of one dwell, as applied. */
export interface AppliedCorrections {
  readonly stamps: KnownCorrection;
  readonly rows: KnownCorrection;
  readonly exposure: KnownCorrection;
}

/**
 * Budget of the corrected amplitude, mm, line by line. The uncertainty of exposure and row readout counts as
 * common: one setup is filmed with one shutter, and across the few per cent of frequency that a resonance
 * spans its effect is one factor.
 */
export function amplitudeBudget(facts: DwellFacts, applied: AppliedCorrections, codec: CodecLimit): Budget {
  const { amplitude } = facts;
  const factor = applied.stamps.factor * applied.rows.factor * applied.exposure.factor;
  const trueMm = amplitude.amplitudeMm * factor;
  const trueMmPerPx = amplitude.mmPerPx * factor;
  const share = (correction: KnownCorrection): number => (trueMm * correction.u) / correction.factor;
  return combineBudget([
    own('fit', (amplitude.uFitMm ?? 0) * factor, amplitude.dof),
    own('time stamps', share(applied.stamps)),
    { ...own('rolling shutter', share(applied.rows)), common: true },
    { ...own('exposure', share(applied.exposure)), common: true },
    own('codec', codec.uPx * trueMmPerPx),
    own('shake', (facts.stillPatchAmplitudePx ?? 0) * RANDOM_PHASE * trueMmPerPx),
    ...facts.relativeLines.map(({ relU, ...line }) => ({ ...line, u: relU * trueMm })),
    ...facts.amplitudeLines,
  ]);
}

/**
 * Budget of the corrected lag, degrees. Here the rolling shutter is this dwell's own, because a lag shifted in
 * every dwell does move the natural frequency. Codec and shake turn both markers' phases.
 *
 * @param rowsUDeg standard uncertainty of the lag from the rolling shutter, degrees
 */
export function lagBudget(facts: DwellFacts, lag: RawLag, rowsUDeg: number): Budget {
  const responsePx = facts.amplitude.amplitudeMm / facts.amplitude.mmPerPx;
  const seenPx = lag.driveAmplitudePx === null ? [responsePx] : [responsePx, lag.driveAmplitudePx];
  const turn = (movedPx: number, amplitudePx: number): number =>
    Math.atan2(movedPx, amplitudePx) * DEG_PER_RAD;
  const evidence = codecEvidence(facts);
  const shakePx = (facts.stillPatchAmplitudePx ?? 0) * RANDOM_PHASE;
  return combineBudget([
    own('fit', lag.uFitDeg ?? 0, lag.dof),
    own('rolling shutter', rowsUDeg),
    own(
      'codec',
      Math.hypot(...seenPx.map((px) => turn(codecLimit(px, facts.filming.compression, evidence).uPx, px))),
    ),
    own('shake', Math.hypot(...seenPx.map((px) => turn(shakePx, px)))),
    ...facts.lagLines,
  ]);
}

/** What the dwell shows of its codec, in pixels. */
export function codecEvidence(facts: DwellFacts): CodecEvidence {
  const { residualRmsMm, mmPerPx } = facts.amplitude;
  return {
    residualRmsPx: residualRmsMm === null ? null : residualRmsMm / mmPerPx,
    stillAmplitudePx: facts.stillPatchAmplitudePx,
  };
}

/** A line that belongs to this dwell alone. */
function own(source: BudgetSource, u: number, dof: number | null = null): BudgetEntry {
  return { source, u, dof, common: false };
}
