import { CODEC_LIMIT_PX } from '../camera/codec-limit.ts';
import { exposureAttenuation } from '../camera/exposure-blur.ts';
import { chooseFrameRate, framesSentence } from './frame-rate.ts';

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
const SHUTTERS_S = [1 / 30, 1 / 60, 1 / 120, 1 / 250, 1 / 500, 1 / 1000, 1 / 2000, 1 / 4000];
const WANTED_SMEAR_PX = 3;
const WANTED_LOSS = 0.01;
const PLANE_TOLERANCE = 0.002; // of the distance: keeps the scale within 0.2 %

/** Fraction by which averaging over the exposure lessens the amplitude of a sine, 0 to 1. */
export function exposureLoss(driveHz: number, exposureS: number): number {
  return 1 - Math.abs(exposureAttenuation(driveHz, exposureS));
}

/** Distance moved during one exposure at the fastest moment, px. */
export function smearPx(driveHz: number, amplitudePx: number, exposureS: number): number {
  return 2 * amplitudePx * Math.sin(Math.min(Math.PI * driveHz * exposureS, Math.PI / 2));
}

/** Advice on frame rate, shutter, scale and place of the camera for the motion to be filmed. */
export function cameraAdvice(motion: MotionToShow, camera: CameraKnowledge): CameraAdvice {
  const sentences: string[] = [];
  const rate =
    camera.frameRateHz === undefined
      ? chooseFrameRate(motion.highestHz, camera.frameRatesHz)
      : { frameRateHz: camera.frameRateHz, sentence: framesSentence(camera.frameRateHz, motion.highestHz) };
  if (rate.sentence !== null) sentences.push(rate.sentence);

  const frameLengthPx = camera.frameLengthPx ?? USUAL_FRAME_LENGTH_PX;
  const fillingPxPerMm =
    motion.largestMm === null ? null : (FRAME_FILL * frameLengthPx) / (2 * motion.largestMm);
  const pxPerMm = camera.pxPerMm ?? fillingPxPerMm;
  const exposure = shutter(motion, camera, pxPerMm, rate.frameRateHz);
  sentences.push(...exposure.sentences, ...scaleSentences(motion, camera, pxPerMm, fillingPxPerMm));

  const fieldLengthMm = pxPerMm === null ? null : frameLengthPx / pxPerMm;
  const angle = ((camera.viewAngleDeg ?? USUAL_VIEW_ANGLE_DEG) * Math.PI) / 180;
  const distanceMm = fieldLengthMm === null ? null : fieldLengthMm / (2 * Math.tan(angle / 2));
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

function shutter(motion: MotionToShow, camera: CameraKnowledge, pxPerMm: number | null, frameRateHz: number) {
  const amplitudePx = pxPerMm === null || motion.largestMm === null ? 0 : pxPerMm * motion.largestMm;
  const judge = (exposureS: number) => ({
    loss: exposureLoss(motion.highestHz, exposureS),
    smear: smearPx(motion.fastestHz, amplitudePx, exposureS),
  });
  const slowEnough = SHUTTERS_S.filter((exposureS) => exposureS <= 1.001 / frameRateHz);
  const advised =
    slowEnough.find((exposureS) => {
      const { loss, smear } = judge(exposureS);
      return loss <= WANTED_LOSS && smear <= WANTED_SMEAR_PX;
    }) ?? (SHUTTERS_S.at(-1) as number);
  const exposureS = camera.exposureS ?? advised;
  const { loss, smear } = judge(exposureS);
  const text = `1/${Math.round(1 / exposureS)} s`;
  const sentences: string[] = [];
  if (camera.exposureS === undefined)
    sentences.push(
      `Lock the shutter at ${text} or shorter, and note it: exposure then takes ${(100 * loss).toPrecision(2)} % off the amplitude at most, which is put back. Add light rather than gain.`,
    );
  else if (loss > WANTED_LOSS || smear > WANTED_SMEAR_PX)
    sentences.push(
      `An exposure of ${text} smears the marker over up to ${smear.toPrecision(2)} px and takes up to ${(100 * loss).toPrecision(2)} % off the amplitude (put back, but better avoided): 1/${Math.round(1 / advised)} s would do.`,
    );
  return { exposureS, sentences };
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
      `Fill the frame: ${pxPerMm.toPrecision(2)} px/mm puts the largest swing on about two thirds of its length.`,
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
