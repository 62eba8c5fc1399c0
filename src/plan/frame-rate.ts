import { harmonicOnFundamental, judgeAlias } from '../camera/aliasing.ts';

/** What frames per second to film at. */
export interface FrameRateAdvice {
  readonly frameRateHz: number;
  /** Frames in one drive period at the highest drive frequency. */
  readonly framesPerPeriod: number;
  readonly sentence: string | null;
}

/** Rates that phones offer, frames per second (common practice, no source). */
export const COMMON_FRAME_RATES: readonly number[] = [30, 60, 120, 240];

const WANTED_FRAMES_PER_PERIOD = 10; // enough to see the wave's shape and judge harmonics
const FRAMES_FOR_HARMONICS = 4; // below, the second harmonic is above half the frame rate
const FRAMES_WITHOUT_FOLDING = 2;

/**
 * The slowest rate that shows every wave with ten frames, or the fastest there is. Slower frames collect more light
 * and phones compress them less.
 * @param highestHz highest drive frequency of the plan, above 0
 * @param rates rates to choose from, not empty
 */
export function chooseFrameRate(
  highestHz: number,
  rates: readonly number[] = COMMON_FRAME_RATES,
): FrameRateAdvice {
  const sorted = [...rates].sort((a, b) => a - b);
  const fastest = sorted.at(-1);
  if (fastest === undefined) throw new Error('no frame rate to choose from');
  const frameRateHz = sorted.find((rate) => rate >= WANTED_FRAMES_PER_PERIOD * highestHz) ?? fastest;
  return {
    frameRateHz,
    framesPerPeriod: frameRateHz / highestHz,
    sentence: framesSentence(frameRateHz, highestHz),
  };
}

/** What a given rate means at the highest drive frequency, or null where it leaves nothing to say. */
export function framesSentence(frameRateHz: number, highestHz: number): string | null {
  const frames = frameRateHz / highestHz;
  if (frames >= FRAMES_FOR_HARMONICS) return null;
  const seen = `${frameRateHz} frames/s show ${highestHz} Hz with ${frames.toFixed(1)} frames a period`;
  return frames >= FRAMES_WITHOUT_FOLDING
    ? `${seen}: amplitudes are right, but parts that strike and other harmonics cannot be seen.`
    : `${seen}: it still measures, because the drive frequency is known, but nothing would tell a wrong one. Use a faster rate if the phone has one.`;
}

/**
 * Whether frames would meet the motion at too few of its phases to measure it: the motion seems to stand, is seen
 * at two phases only, or its second or third harmonic folds onto it. The judgement is that of the measurement.
 *
 * @param filmS length of the clip, s
 * @returns a sentence with what to do, or null where the dwell is clear of all of them
 */
export function samplingTrouble(driveHz: number, frameRateHz: number, filmS: number): string | null {
  const remedy = 'move the drive a little, or film at another rate';
  const at = `At ${driveHz} Hz and ${frameRateHz} frames/s`;
  if (judgeAlias(driveHz, frameRateHz, filmS).kind === 'refused')
    return `${at} the frames would meet the motion at the same one or two phases again and again: ${remedy}.`;
  const harmonic = harmonicOnFundamental(driveHz, frameRateHz, filmS);
  return harmonic === null
    ? null
    : `${at} the ${harmonic === 2 ? 'second' : 'third'} harmonic of the motion would be taken for the motion itself: ${remedy}.`;
}
