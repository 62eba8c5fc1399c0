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

/** Seen amplitude, px, under which a compressed clip decides by itself what is seen. */
export const CODEC_LIMIT_PX: Readonly<Record<Compression, number>> = { none: 0, intra: 0.1, inter: 0.5 };

/** Kind of compression by ffmpeg's codec name; anything unknown counts as `inter`, the worst. */
export function compressionOf(codecName: string): Compression {
  const name = codecName.toLowerCase();
  if (LOSSLESS.includes(name)) return 'none';
  return INTRA.includes(name) ? 'intra' : 'inter';
}

/** A sine fitted to a patch that stands still, at the dwell's own frequency, as a control. */
export interface StillPatch {
  readonly amplitudePx: number;
}

/** What the codec leaves uncertain in an amplitude. */
export interface CodecLimit {
  /** Standard uncertainty of the amplitude, px. */
  readonly uPx: number;
  /** Whether the codec, not the tracker, decides what is seen. */
  readonly limited: boolean;
  readonly warning: Warning | null;
}

/** Seen amplitude against the codec's standard uncertainty, px, linear between; from clips of known motion (see `codecLimit`). */
const CODEC_U: Readonly<Record<Compression, readonly (readonly [number, number])[]>> = {
  none: [[0, 0]],
  intra: [[0, 0.01]],
  inter: [
    [0, 0.05],
    [0.1, 0.05],
    [0.2, 0.03],
    [0.5, 0.003],
  ],
};

/** A dwell must stand out from the still patch by this factor. */
const FLOOR_FACTOR = 3;

/**
 * What the codec costs at a seen amplitude. Codecs between frames copy blocks and move them by quarter pixels,
 * so small motion is not noisy but wrong, and averaging does not help: on clips of known motion (H.264
 * and HEVC, 2 to 230 Mbit/s at 1080p60) amplitudes of 0.5 px and more came out within 0.005 px, 0.2 px within 12 %,
 * 0.1 px at 63 to 114 % and 0.05 px at 13 to 97 %. A still patch that shows motion at the same frequency means that
 * the picture itself moves; a dwell not three times larger is below that floor.
 *
 * @param amplitudePx amplitude as seen, px, 0 or more
 * @param still control fit at the same frequency, null where there is none
 */
export function codecLimit(
  amplitudePx: number,
  compression: Compression,
  still: StillPatch | null = null,
): CodecLimit {
  const stillU = still === null ? 0 : still.amplitudePx / Math.SQRT2;
  const uPx = Math.max(interpolate(CODEC_U[compression], amplitudePx), stillU);
  if (still !== null && amplitudePx < FLOOR_FACTOR * still.amplitudePx) {
    return {
      uPx,
      limited: amplitudePx < CODEC_LIMIT_PX[compression],
      warning: belowFloor(amplitudePx, still),
    };
  }
  const limited = amplitudePx < CODEC_LIMIT_PX[compression];
  return { uPx, limited, warning: limited ? codecLimited(amplitudePx) : null };
}

function interpolate(knots: readonly (readonly [number, number])[], x: number): number {
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

function belowFloor(amplitudePx: number, still: StillPatch): Warning {
  return {
    code: 'below-floor',
    sentence:
      `A still part of the picture moves by ${still.amplitudePx.toPrecision(2)} px at the same frequency, so the ${amplitudePx.toPrecision(2)} px ` +
      'of the part cannot be trusted; steady the camera, mark a ground marker, or film closer.',
  };
}
