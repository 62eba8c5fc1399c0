import { CODEC_LIMIT_PX } from '../camera/codec-limit.ts';
import { chooseFrameRate, framesSentence } from './frame-rate.ts';
import { chooseShutter, exposureLoss } from './shutter-advice.ts';

/** What is known of the camera; every entry may be left out. */
export interface CameraKnowledge {
  /** Frames per second of true time that will be filmed; left out: advised. */
  readonly frameRateHz?: number;
  /** Rates the phone offers. */
  readonly frameRatesHz?: readonly number[];
  /** Length of the frame along the motion, px. */
  readonly frameLengthPx?: number;
  /** Scale of the set-up, pixels per mm; left out: advised from the largest amplitude. */
  readonly pxPerMm?: number;
  /** Exposure time of a frame, s; left out: advised. */
  readonly exposureS?: number;
  /** Noise of a marker's position in one frame, px. */
  readonly noisePx?: number;
  /** Angle of view along the motion, degrees. */
  readonly viewAngleDeg?: number;
}

/** How to set the camera. Entries are null where nothing tells them. */
export interface CameraAdvice {
  readonly frameRateHz: number;
  readonly exposureS: number;
  /** Fraction by which that exposure lessens the amplitude at the highest drive frequency (corrected if stated). */
  readonly exposureLoss: number;
  readonly pxPerMm: number | null;
  /** Length along the motion that fills the frame at that scale, mm. */
  readonly fieldLengthMm: number | null;
  readonly distanceMm: number | null;
  readonly sentences: readonly string[];
}

/** The motion that the camera has to show. Amplitudes in mm zero-to-peak, null where unknown. */
export interface MotionToShow {
  readonly highestHz: number;
  /** Drive frequency of the fastest motion. */
  readonly fastestHz: number;
  readonly smallestMm: number | null;
  readonly largestMm: number | null;
}

/** Amplitude in px below which the compression of a phone's video decides what is seen. */
export const CODEC_DEAD_ZONE_PX = CODEC_LIMIT_PX.inter;
/** Noise of a tracked marker on phone video, px, where nothing else is known (measured on encoded clips). */
export const USUAL_NOISE_PX = 0.03;

// Common practice, no source.
const USUAL_FRAME_LENGTH_PX = 1920;
const USUAL_VIEW_ANGLE_DEG = 60;
const FRAME_FILL = 0.7; // of the frame's length for the swing, so that marker and rule stay in view
const PLANE_TOLERANCE = 0.002; // of the distance: keeps the scale within 0.2 %
const GOOD_DISTANCE_MM = 1000; // from there the rule need not lie in the plane of motion to better than 2 mm
const COMFORTABLE_PX = 5; // ten times what phone video begins to hide

/** Advice on frame rate, shutter, scale and place of the camera for the motion to be filmed. */
export function cameraAdvice(motion: MotionToShow, camera: CameraKnowledge): CameraAdvice {
  const sentences: string[] = [];
  const rate =
    camera.frameRateHz === undefined
      ? chooseFrameRate(motion.highestHz, camera.frameRatesHz)
      : { frameRateHz: camera.frameRateHz, sentence: framesSentence(camera.frameRateHz, motion.highestHz) };
  if (rate.sentence !== null) sentences.push(rate.sentence);

  const frameLengthPx = camera.frameLengthPx ?? USUAL_FRAME_LENGTH_PX;
  const perDistance = 2 * Math.tan((camera.viewAngleDeg ?? USUAL_VIEW_ANGLE_DEG) * (Math.PI / 360));
  const fillingPxPerMm =
    motion.largestMm === null ? null : (FRAME_FILL * frameLengthPx) / (2 * motion.largestMm);
  const pxPerMm =
    camera.pxPerMm ?? advisedScale(motion, fillingPxPerMm, frameLengthPx / (GOOD_DISTANCE_MM * perDistance));
  const amplitudePx = pxPerMm === null || motion.largestMm === null ? 0 : pxPerMm * motion.largestMm;
  const exposure = chooseShutter({
    ...motion,
    amplitudePx,
    frameRateHz: rate.frameRateHz,
    exposureS: camera.exposureS ?? null,
  });
  if (exposure.sentence !== null) sentences.push(exposure.sentence);
  sentences.push(...scaleSentences(motion, camera, pxPerMm, fillingPxPerMm));

  const fieldLengthMm = pxPerMm === null ? null : frameLengthPx / pxPerMm;
  const distanceMm = fieldLengthMm === null ? null : fieldLengthMm / perDistance;
  sentences.push(...placeSentences(distanceMm, camera.viewAngleDeg === undefined));
  return {
    frameRateHz: rate.frameRateHz,
    exposureS: exposure.exposureS,
    exposureLoss: exposureLoss(motion.highestHz, exposure.exposureS),
    pxPerMm,
    fieldLengthMm,
    distanceMm,
    sentences,
  };
}

/**
 * Far enough for the plane of the rule not to matter, closer only where the smallest swing needs it, never so close
 * that the largest leaves the frame.
 */
function advisedScale(
  motion: MotionToShow,
  fillingPxPerMm: number | null,
  atGoodDistance: number,
): number | null {
  if (fillingPxPerMm === null || motion.smallestMm === null) return null;
  return Math.min(fillingPxPerMm, Math.max(atGoodDistance, COMFORTABLE_PX / motion.smallestMm));
}

function scaleSentences(
  { smallestMm, largestMm }: MotionToShow,
  camera: CameraKnowledge,
  pxPerMm: number | null,
  fillingPxPerMm: number | null,
): string[] {
  if (pxPerMm === null || smallestMm === null || largestMm === null)
    return [
      'The size of the motion is not known yet: choose the view after the first dwell, so that the largest swing fills about two thirds of the frame.',
    ];
  const sentences: string[] = [];
  if (camera.pxPerMm !== undefined && fillingPxPerMm !== null) {
    const fill = (FRAME_FILL * pxPerMm) / fillingPxPerMm;
    if (fill > 1)
      sentences.push(
        `The largest swing, ${(2 * largestMm * pxPerMm).toFixed(0)} px from end to end, does not fit the frame: step back.`,
      );
    else if (fill < FRAME_FILL / 3)
      sentences.push(
        `The largest swing fills only ${(100 * fill).toFixed(0)} % of the frame: a closer view measures better.`,
      );
  } else
    sentences.push(
      `A view of ${pxPerMm.toPrecision(2)} px/mm shows the largest swing over ${(2 * largestMm * pxPerMm).toFixed(0)} px and the smallest over ${(2 * smallestMm * pxPerMm).toPrecision(2)} px from end to end.`,
    );
  const smallestPx = smallestMm * pxPerMm;
  if (smallestPx < CODEC_DEAD_ZONE_PX)
    sentences.push(
      `The smallest swing is ${smallestPx.toPrecision(2)} px, below the half pixel that phone video keeps: its amplitude would be codec-limited, and longer filming does not help. Take a closer view for it, a stronger drive, or leave it out.`,
    );
  return sentences;
}

function placeSentences(distanceMm: number | null, angleAssumed: boolean): string[] {
  const sentences = [
    'Tripod, camera square to the motion, rule in the plane of the motion, a fixed mark in view.',
  ];
  if (distanceMm !== null)
    sentences.push(
      `That view is had from about ${round2(distanceMm)} mm${angleAssumed ? ` with an angle of view of ${USUAL_VIEW_ANGLE_DEG} degrees` : ''}; from there the rule must lie within ${round2(PLANE_TOLERANCE * distanceMm)} mm of the plane of motion to keep the scale within ${100 * PLANE_TOLERANCE} %. Stepping back and zooming by the lens eases that.`,
    );
  return sentences;
}

const round2 = (value: number) => Number(value.toPrecision(2));
