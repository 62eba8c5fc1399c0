import type { Warning } from '../numeric/warning.ts';

/**
 * How a clip's pixels were stored: `none` exactly; `intra` each frame by itself (MJPEG, ProRes, DNxHD);
 * `inter` by motion from other frames (H.264, HEVC, VP9, AV1), as every phone does unless told otherwise.
 */
export type Compression = 'none' | 'intra' | 'inter';

const LOSSLESS = [
  'rawvideo',
  'ffv1',
  'huffyuv',
  'ffvhuff',
  'utvideo',
  'v210',
  'v410',
  'png',
  'qtrle',
  'magicyuv',
];
const INTRA = ['mjpeg', 'prores', 'dnxhd', 'cfhd', 'jpeg2000', 'vc3', 'hap'];

/** Seen amplitude, px, under which a clip's compression may decide by itself what is seen. */
export const CODEC_LIMIT_PX: Readonly<Record<Compression, number>> = { none: 0, intra: 0.05, inter: 0.5 };

/** Kind of compression by ffmpeg's codec name; anything unknown counts as `inter`, the worst. */
export function compressionOf(codecName: string): Compression {
  const name = codecName.toLowerCase();
  if (LOSSLESS.includes(name)) return 'none';
  return INTRA.includes(name) ? 'intra' : 'inter';
}

/** What the codec leaves uncertain in an amplitude. */
export interface CodecLimit {
  /** Standard uncertainty of the amplitude, px. */
  readonly uPx: number;
  /** Whether the codec, not the tracker, decides what is seen. */
  readonly limited: boolean;
  readonly warning: Warning | null;
}

/** What a dwell shows of its codec. */
export interface CodecEvidence {
  /** Root mean square residual of the dwell's fit, px; null where not known: `TYPICAL_RESIDUAL_PX`. */
  readonly residualRmsPx: number | null;
  /** Amplitude of a sine fitted at the same frequency to a patch that stands still, px; null without that control. */
  readonly stillAmplitudePx: number | null;
}

/** Residual of a phone clip of ordinary bitrate, px. */
const TYPICAL_RESIDUAL_PX = 0.04;

type Knots = readonly (readonly [number, number])[];

/** Seen amplitude, px, against the amplitude's error over the fit's residual: root mean square over test/data/codec_error.json. */
const ERROR_OVER_RESIDUAL: Knots = [
  [0, 1.5],
  [0.1, 1.5],
  [0.2, 1.1],
  [0.5, 0.5],
  [1, 0.3],
  [2, 0.2],
  [5, 0.17],
  [20, 0.1],
];

/** The same for frames coded by themselves, at any amplitude. */
const INTRA_ERROR_OVER_RESIDUAL = 0.6;

/** Seen amplitude against the least standard uncertainty, px: a codec that shows no motion shows no residual either. */
const INTER_FLOOR: Knots = [
  [0, 0.06],
  [0.1, 0.06],
  [0.2, 0.04],
  [0.5, 0.002],
];

/** A dwell must stand out from a still patch by this factor. */
const FLOOR_FACTOR = 3;

/**
 * What the codec costs at a seen amplitude. Codecs between frames copy blocks and move them by quarter pixels,
 * so small motion comes out not noisy but wrong, and averaging does not help. Its size is told by the residual
 * of the fit: on drawn clips of known motion (H.264 and HEVC at constant quality 18 to 28, MJPEG, ProRes and DNxHD;
 * test/data/codec_error.py) the amplitude's error over the residual fell from 1.5 at 0.1 px to 0.5 at 0.5 px and 0.2
 * at 2 px and more; frames coded by themselves had no dead zone and 0.6 throughout. Below `CODEC_LIMIT_PX` the dwell
 * is marked.
 * A still patch that shows motion at the same frequency means that the picture itself moves; a dwell not
 * three times larger is below that floor.
 *
 * @param amplitudePx amplitude as seen, px, 0 or more
 */
export function codecLimit(
  amplitudePx: number,
  compression: Compression,
  evidence: CodecEvidence,
): CodecLimit {
  const uPx = codecUPx(amplitudePx, compression, evidence.residualRmsPx ?? TYPICAL_RESIDUAL_PX);
  const limited = amplitudePx < CODEC_LIMIT_PX[compression];
  const still = evidence.stillAmplitudePx;
  const hidden = still !== null && amplitudePx < FLOOR_FACTOR * still;
  return {
    uPx,
    limited,
    warning: hidden ? belowFloor(amplitudePx, still) : limited ? codecLimited(amplitudePx) : null,
  };
}

function codecUPx(amplitudePx: number, compression: Compression, residualPx: number): number {
  if (compression === 'none') return 0;
  if (compression === 'intra') return INTRA_ERROR_OVER_RESIDUAL * residualPx;
  const told = interpolate(ERROR_OVER_RESIDUAL, amplitudePx) * residualPx;
  return Math.max(told, interpolate(INTER_FLOOR, amplitudePx));
}

/** Straight lines between knots, level outside. */
function interpolate(knots: Knots, x: number): number {
  for (let k = 1; k < knots.length; k++) {
    const [x0, y0] = knots[k - 1]!;
    const [x1, y1] = knots[k]!;
    if (x < x1) return y0 + ((x - x0) / (x1 - x0)) * (y1 - y0);
  }
  return knots[knots.length - 1]![1];
}

function codecLimited(amplitudePx: number): Warning {
  return {
    code: 'codec-limited',
    sentence:
      `Codec-limited: the motion is only ${amplitudePx.toPrecision(2)} px, which a compressed clip can show wrongly whatever the ` +
      'averaging; film closer, at the highest bitrate, or drive harder where that is safe.',
  };
}

function belowFloor(amplitudePx: number, stillPx: number): Warning {
  return {
    code: 'below-floor',
    sentence:
      `A still part of the picture moves by ${stillPx.toPrecision(2)} px at the same frequency, so the ${amplitudePx.toPrecision(2)} px ` +
      'of the part cannot be trusted; steady the camera, mark a ground marker, or film closer.',
  };
}
