import { exposureAttenuation } from '../camera/exposure-blur.ts';

// Common practice, no source.
const SHUTTERS_S = [1 / 30, 1 / 60, 1 / 120, 1 / 250, 1 / 500, 1 / 1000, 1 / 2000, 1 / 4000] as const;
const FASTEST_S = 1 / 4000;
const WANTED_SMEAR_PX = 6; // of a marker some 30 px wide
const WANTED_LOSS = 0.01;

/** Fraction by which averaging over the exposure lessens the amplitude of a sine, 0 to 1. */
export function exposureLoss(driveHz: number, exposureS: number): number {
  return 1 - Math.abs(exposureAttenuation(driveHz, exposureS));
}

/** Distance moved during one exposure at the fastest moment, px. */
export function smearPx(driveHz: number, amplitudePx: number, exposureS: number): number {
  return 2 * amplitudePx * Math.sin(Math.min(Math.PI * driveHz * exposureS, Math.PI / 2));
}

/** What the exposure depends on. */
export interface ShutterCase {
  /** Highest drive frequency, which loses most amplitude, and that of the fastest motion, which smears most. */
  readonly highestHz: number;
  readonly fastestHz: number;
  /** Largest amplitude in px, 0 where unknown. */
  readonly amplitudePx: number;
  readonly frameRateHz: number;
  /** Exposure that will be used, or null: advise one. */
  readonly exposureS: number | null;
}

/** The exposure to reckon with and what to say of it, if anything. */
export interface ShutterAdvice {
  readonly exposureS: number;
  readonly sentence: string | null;
}

/**
 * The longest common exposure that takes no more than 1 % off any amplitude and smears the marker over 6 px at most,
 * or the shortest there is; a given exposure is judged by the same measure.
 */
export function chooseShutter(shutter: ShutterCase): ShutterAdvice {
  const judge = (exposureS: number) => ({
    loss: exposureLoss(shutter.highestHz, exposureS),
    smear: smearPx(shutter.fastestHz, shutter.amplitudePx, exposureS),
  });
  const good = (exposureS: number) => {
    const { loss, smear } = judge(exposureS);
    return loss <= WANTED_LOSS && smear <= WANTED_SMEAR_PX;
  };
  const fitting = SHUTTERS_S.filter((exposureS) => exposureS <= 1.001 / shutter.frameRateHz);
  const advisedS = fitting.find(good) ?? FASTEST_S;
  if (shutter.exposureS === null)
    return {
      exposureS: advisedS,
      sentence: `Lock the shutter at ${text(advisedS)} or shorter, and note it: ${lossText(judge(advisedS).loss)} Add light rather than gain.`,
    };
  if (good(shutter.exposureS)) return { exposureS: shutter.exposureS, sentence: null };
  const { loss, smear } = judge(shutter.exposureS);
  return {
    exposureS: shutter.exposureS,
    sentence: `An exposure of ${text(shutter.exposureS)} smears the marker over up to ${smear.toPrecision(2)} px and takes up to ${(100 * loss).toPrecision(2)} % off the amplitude (put back, but better avoided): ${text(advisedS)} would do.`,
  };
}

const text = (exposureS: number) => `1/${Math.round(1 / exposureS)} s`;

const lossText = (loss: number) =>
  loss < 0.0005
    ? 'exposure then takes next to nothing off the amplitude.'
    : `exposure then takes up to ${(100 * loss).toPrecision(2)} % off the amplitude, which is put back.`;
