import { InputError } from '../errors.ts';
import type { ClipInfo } from './clip-info.ts';
import { clipName } from './clip-messages.ts';

/** Times of a clip's frames with slow motion undone. */
export interface TrueTimes {
  /** True time of each frame, s, the first being 0. Length = frameCount. */
  readonly timesS: Float64Array;
  /** File time over true time: 8 for a clip captured at 240 and stored to play at 30 frames/s; 1 for an ordinary one. */
  readonly stretch: number;
  /** What the user should know, one sentence each. */
  readonly warnings: readonly string[];
}

/** What of a clip the true times depend on. */
export type StretchedClip = Pick<ClipInfo, 'path' | 'timesS' | 'captureFps' | 'regularity'>;

/** A capture rate within this fraction of the file's own rate is the nominal name of that rate: no slow motion. */
const SAME_RATE_WITHIN = 0.1;
/** Cameras stretch by a whole number; a rate a file declares is nominal and may be off by this much. */
const WHOLE_WITHIN = 0.02;
/** A given rate this close to a whole multiple may have been meant to be it: worth a remark. */
const NEAR_WHOLE_WITHIN = 0.01;

/**
 * Divides the file's times by the stretch of slow motion. The capture rate is the one given, else the one the file
 * declares, else the times are true as they are.
 *
 * A rate the file declares is a nominal figure, and cameras multiply the true timestamps by a whole number, so the
 * stretch is rounded to it. A rate that is given counts as it stands. Throws InputError for a rate that is not a
 * positive number or is below the rate of the file, which no slow motion can have.
 */
export function trueTimes(clip: StretchedClip, captureFpsGiven?: number): TrueTimes {
  const { stretch, warnings } =
    captureFpsGiven === undefined ? declaredStretch(clip) : givenStretch(clip, captureFpsGiven);
  return { timesS: clip.timesS.map((t) => t / stretch), stretch, warnings };
}

function declaredStretch(clip: StretchedClip): { stretch: number; warnings: string[] } {
  const fileFps = clip.regularity.latticeFps;
  if (clip.captureFps === null || fileFps === null) return { stretch: 1, warnings: [] };
  const ratio = clip.captureFps / fileFps;
  if (Math.abs(ratio - 1) <= SAME_RATE_WITHIN) return { stretch: 1, warnings: [] };
  if (ratio < 1)
    throw new InputError(belowFileRate(clip, clip.captureFps, fileFps, 'The file says it was captured'));
  const whole = Math.round(ratio);
  const stretch = Math.abs(ratio / whole - 1) <= WHOLE_WITHIN ? whole : ratio;
  const told = `${clipName(clip.path)} is slow motion: captured at ${show(clip.captureFps)} frames/s, it plays at ${show(fileFps)}, so its times are divided by ${show(stretch)}.`;
  const unsure =
    stretch === whole
      ? []
      : [`That is not a whole number: give the true capture rate of ${clipName(clip.path)} if you know it.`];
  return { stretch, warnings: [told, ...unsure] };
}

function givenStretch(clip: StretchedClip, captureFps: number): { stretch: number; warnings: string[] } {
  if (!(captureFps > 0) || !Number.isFinite(captureFps)) {
    throw new InputError(
      `${clipName(clip.path)}: the capture rate ${captureFps} is not a positive number of frames/s.`,
    );
  }
  const fileFps = clip.regularity.latticeFps;
  if (fileFps === null) return { stretch: 1, warnings: [] };
  const ratio = captureFps / fileFps;
  if (ratio < 1 - NEAR_WHOLE_WITHIN) {
    throw new InputError(belowFileRate(clip, captureFps, fileFps, 'captureFps says it was captured'));
  }
  const whole = Math.round(ratio);
  const nearWhole = Math.abs(ratio / whole - 1) <= NEAR_WHOLE_WITHIN && Math.abs(ratio / whole - 1) > 1e-6;
  const remark = `${clipName(clip.path)}: the given capture rate of ${show(captureFps)} frames/s is ${ratio.toFixed(4)} times the file's ${fileFps.toFixed(3)}; if the camera slowed it exactly ${whole} times, the true rate is ${(whole * fileFps).toFixed(2)}.`;
  return { stretch: ratio, warnings: nearWhole ? [remark] : [] };
}

function belowFileRate(clip: StretchedClip, captureFps: number, fileFps: number, says: string): string {
  return `${clipName(clip.path)}: ${says} at ${show(captureFps)} frames/s, but it plays at ${show(fileFps)}; a time lapse cannot be measured, and for slow motion the true capture rate must be given.`;
}

const show = (value: number): string => String(Math.round(value * 100) / 100);
