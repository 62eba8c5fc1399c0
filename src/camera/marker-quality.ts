import type { Warning } from '../numeric/warning.ts';

/** Fraction of a patch at the ends of the luma range from which it counts as saturated. */
const SATURATED_FRACTION = 0.1;

/** Smear in one exposure, px, from which a marker is too smeared for the correction to be the only loss. */
const SMEAR_PX = 8;

/** Feature size over patch size from which the patch is too smooth: fewer than about three features across. */
const SMOOTH_FRACTION = 1 / 3;

/** The luma of a marker's patch, row by row. */
export interface LumaPatch {
  /** width x height values, row-major. */
  readonly luma: ArrayLike<number>;
  readonly widthPx: number;
  readonly heightPx: number;
  /** Lowest and highest luma the clip can hold: 16 and 235 for limited 8 bit, 0 and 255 for full, four times that for 10 bit. */
  readonly black: number;
  readonly white: number;
}

/** What a marker's patch is like. */
export interface MarkerQuality {
  /** Fraction of pixels at or beyond the ends of the luma range. */
  readonly saturatedFraction: number;
  /** Correlation length of the texture, px: root of luma variance over mean squared gradient per direction; null for a patch of one value. */
  readonly featurePx: number | null;
  /** Peak motion during one exposure, px: 2 pi f A Te; null where the exposure is not known. */
  readonly smearPx: number | null;
  readonly warnings: readonly Warning[];
}

/**
 * Judges the patch under a marker: saturation hides texture, a smooth (or out-of-focus) patch gives the
 * tracker little to hold, and smear adds tracking error that no correction of the amplitude takes away.
 * Saturation and feature counts follow common practice of image correlation (iDICs good practices guide 2018, from memory).
 *
 * @param peakSpeedPxPerS 2 pi f times the amplitude in px
 * @param exposureS null where not known
 */
export function markerQuality(
  patch: LumaPatch,
  peakSpeedPxPerS: number,
  exposureS: number | null,
): MarkerQuality {
  if (patch.luma.length !== patch.widthPx * patch.heightPx)
    throw new Error('patch size and luma length disagree');
  const saturatedFraction = saturation(patch);
  const featurePx = featureSize(patch);
  const smearPx = exposureS === null ? null : peakSpeedPxPerS * exposureS;
  const warnings: Warning[] = [];
  if (saturatedFraction > SATURATED_FRACTION) warnings.push(saturated(saturatedFraction));
  const smooth = featurePx === null || featurePx > SMOOTH_FRACTION * Math.min(patch.widthPx, patch.heightPx);
  if (smooth) warnings.push(SMOOTH);
  if (smearPx !== null && smearPx > SMEAR_PX) warnings.push(smeared(smearPx));
  return { saturatedFraction, featurePx, smearPx, warnings };
}

function saturation(patch: LumaPatch): number {
  let count = 0;
  for (let k = 0; k < patch.luma.length; k++) {
    if (patch.luma[k]! <= patch.black || patch.luma[k]! >= patch.white) count++;
  }
  return count / patch.luma.length;
}

function featureSize(patch: LumaPatch): number | null {
  const { luma, widthPx, heightPx } = patch;
  let mean = 0;
  for (let k = 0; k < luma.length; k++) mean += luma[k]! / luma.length;
  let variance = 0;
  for (let k = 0; k < luma.length; k++) variance += (luma[k]! - mean) ** 2 / luma.length;
  let squares = 0;
  let count = 0;
  for (let y = 1; y < heightPx - 1; y++) {
    for (let x = 1; x < widthPx - 1; x++) {
      const k = y * widthPx + x;
      squares +=
        ((luma[k + 1]! - luma[k - 1]!) / 2) ** 2 + ((luma[k + widthPx]! - luma[k - widthPx]!) / 2) ** 2;
      count += 2;
    }
  }
  return variance > 0 && squares > 0 ? Math.sqrt((variance * count) / squares) : null;
}

function saturated(fraction: number): Warning {
  return {
    code: 'marker-saturated',
    sentence:
      `${(100 * fraction).toFixed(0)} % of the marker is pure black or white, so its texture is lost; turn the exposure down or light it ` +
      'more evenly.',
  };
}

const SMOOTH: Warning = {
  code: 'marker-smooth',
  sentence:
    'The marker is smooth or out of focus, which leaves little to follow; focus on the part, or stick a speckled label ' +
    'on it.',
};

function smeared(smearPx: number): Warning {
  return {
    code: 'marker-smeared',
    sentence: `At its fastest the marker smears over ${smearPx.toFixed(0)} px in one exposure; use a faster shutter and more light.`,
  };
}
