import { type CameraAdvice, CODEC_DEAD_ZONE_PX, cameraAdvice, USUAL_NOISE_PX } from './camera-advice.ts';
import { filmingTime } from './filming-time.ts';
import { samplingTrouble } from './frame-rate.ts';
import { type KnowledgeCloud, quantileOf } from './knowledge-cloud.ts';
import type { PlanInput, PlanRow } from './plan-types.ts';
import { type PredictedAmplitude, predictAmplitude, relativeAmplitude } from './predicted-amplitude.ts';
import { checkTravel, type TravelCheck } from './travel-limit.ts';
import { overshootRatio, startRatioAfterStep, transientFromRest, waitingTime } from './waiting-time.ts';

const LEFTOVER = 0.01;
const AMPLITUDE_RELATIVE_U = 0.01;
const SAFE_DAMPING = 0.1; // waits reckon with damping that is lower in one case of ten only
const HIGHEST_WAITING_DAMPING = 0.9; // from about here on there is nothing to wait for

/** Prediction and travel check of one step. */
export interface JudgedStep {
  readonly driveHz: number;
  readonly predicted: PredictedAmplitude | null;
  /** Likely amplitude in mm, or in units of the gain where that is unknown. */
  readonly relative: number;
  readonly travel: TravelCheck;
}

/** Predicts one step and holds it against the travel limit. */
export function judgeStep(input: PlanInput, cloud: KnowledgeCloud, driveHz: number): JudgedStep {
  const predicted = predictAmplitude(input.model, cloud, driveHz);
  const overshoot = overshootRatio(
    quantileOf(cloud.naturalHz, 0.5),
    Math.min(quantileOf(cloud.dampingRatio, 0.5), HIGHEST_WAITING_DAMPING),
    driveHz,
  );
  return {
    driveHz,
    predicted,
    relative: predicted?.medianMm ?? relativeAmplitude(input.model, cloud, driveHz),
    travel: checkTravel(driveHz, predicted, input.travelLimitMm ?? null, overshoot),
  };
}

/** Camera advice for the steps that may be run (for all where none may). */
export function cameraForSteps(input: PlanInput, steps: readonly JudgedStep[]): CameraAdvice | null {
  const run = steps.filter((step) => step.travel.verdict !== 'refused');
  const shown = run.length > 0 ? run : steps;
  if (shown.length === 0) return null;
  const fastest = shown.reduce((a, b) => (b.driveHz * b.relative > a.driveHz * a.relative ? b : a));
  const sizes = shown.flatMap((step) => step.predicted ?? []);
  return cameraAdvice(
    {
      highestHz: Math.max(...shown.map((step) => step.driveHz)),
      fastestHz: fastest.driveHz,
      smallestMm: sizes.length > 0 ? Math.min(...sizes.map((size) => size.medianMm)) : null,
      largestMm: sizes.length > 0 ? Math.max(...sizes.map((size) => size.upperMm)) : null,
    },
    input.camera ?? {},
  );
}

/** The rows of the run sheet, in the order of the steps; waits count from the step before that is run. */
export function planRows(
  input: PlanInput,
  cloud: KnowledgeCloud,
  steps: readonly JudgedStep[],
  camera: CameraAdvice,
): PlanRow[] {
  const naturalHz = quantileOf(cloud.naturalHz, 0.5);
  const dampingRatio = Math.min(quantileOf(cloud.dampingRatio, SAFE_DAMPING), HIGHEST_WAITING_DAMPING);
  let before = 0; // amplitude of the step before; 0 at rest
  let cautioned = false;
  return steps.map((step): PlanRow => {
    const { driveHz, predicted, relative, travel } = step;
    const aboveLimit = travel.verdict === 'refused';
    const leadsUp = !cautioned && before > 0 && relative > before;
    cautioned ||= leadsUp;
    const startRatio =
      before === 0
        ? transientFromRest(driveHz / naturalHz, dampingRatio, null)
        : startRatioAfterStep(before, relative);
    const wait = waitingTime({
      naturalHz,
      dampingRatio,
      driveHz,
      leftover: input.leftover ?? LEFTOVER,
      startRatio,
    });
    if (!aboveLimit) before = relative;

    const amplitudePx =
      predicted === null || camera.pxPerMm === null ? null : predicted.medianMm * camera.pxPerMm;
    const film = filmingTime({
      driveHz,
      frameRateHz: camera.frameRateHz,
      noisePx: input.camera?.noisePx ?? USUAL_NOISE_PX,
      ...(amplitudePx !== null && {
        uWantedPx:
          (input.amplitudeRelativeU ?? AMPLITUDE_RELATIVE_U) * Math.max(amplitudePx, CODEC_DEAD_ZONE_PX),
      }),
    });
    const advice = [
      travel.sentence,
      codecAdvice(driveHz, amplitudePx),
      samplingTrouble(driveHz, camera.frameRateHz, film.filmS),
      film.limit,
    ];
    return {
      driveHz,
      waitS: wait.waitS,
      beatPeriodS: wait.beatPeriodS,
      filmS: film.filmS,
      frames: film.frames,
      predictedAmplitudeMm: predicted,
      predictedAmplitudePx: amplitudePx,
      aboveLimit,
      travel: travel.verdict,
      cautionsHere: leadsUp,
      advice: advice.filter((sentence) => sentence !== null),
    };
  });
}

function codecAdvice(driveHz: number, amplitudePx: number | null): string | null {
  if (amplitudePx === null || amplitudePx >= CODEC_DEAD_ZONE_PX) return null;
  return `At ${driveHz} Hz the swing is about ${amplitudePx.toPrecision(2)} px, below the half pixel that phone video keeps: take a closer view, or expect a codec-limited amplitude.`;
}
