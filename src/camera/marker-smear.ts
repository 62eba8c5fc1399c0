import type { Warning } from '../numeric/warning.ts';

/** Smear in one exposure, px, from which a marker is too smeared for the correction to be the only loss. */
const SMEAR_PX = 8;

/**
 * Cautions about a marker that smears over many pixels in one exposure: that adds tracking error which no correction of
 * the amplitude takes away.
 *
 * @param peakSpeedPxPerS 2 pi f times the amplitude in px
 * @param exposureS null where not known: then nothing is claimed
 */
export function smearWarning(peakSpeedPxPerS: number, exposureS: number | null): Warning | null {
  const smearPx = exposureS === null ? 0 : peakSpeedPxPerS * exposureS;
  if (!(smearPx > SMEAR_PX)) return null;
  return {
    code: 'marker-smeared',
    sentence: `At its fastest the marker smears over ${smearPx.toFixed(0)} px in one exposure; use a faster shutter and more light.`,
  };
}
