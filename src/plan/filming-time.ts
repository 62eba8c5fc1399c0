/** How long to film one dwell. */
export interface FilmingTime {
  /** Seconds of steady motion, a whole number of drive periods where a frame rate allows it. */
  readonly filmS: number;
  readonly frames: number;
  readonly periods: number;
  /** Standard uncertainty of the amplitude that this length gives, px; null without a noise figure. */
  readonly uAmplitudePx: number | null;
  /** What keeps the wanted uncertainty from being reached by filming longer, or null where it is reached. */
  readonly limit: string | null;
}

/** What the filming time depends on. */
export interface FilmingCase {
  readonly driveHz: number;
  /** Frames per second of true time. */
  readonly frameRateHz: number;
  /** Wanted standard uncertainty of the amplitude, px; left out: the shortest clip that can be judged. */
  readonly uWantedPx?: number;
  /** Noise of a marker's position in one frame, px (1 sd). */
  readonly noisePx: number;
  /** Correlation of that noise from frame to frame, -1 to 1; 0 where left out. */
  readonly noiseLag1?: number;
  /** Longest clip that is worth filming, s; 180 where left out. */
  readonly longestS?: number;
}

// Common practice, no source: enough periods to see whether the motion is steady, enough frames to judge the fit.
const FEWEST_PERIODS = 5;
const FEWEST_FRAMES = 60;
const LONGEST_S = 180;

/**
 * Factor on the variance of an amplitude when the noise of neighbouring frames is correlated (first-order
 * autoregressive, lag-1 correlation rho): the noise spectrum at the signal's frequency over its mean.
 * @param rho in (-1, 1)
 * Source: spectrum of an AR(1) process, (1 - rho^2) / (1 - 2 rho cos w + rho^2) with w = 2 pi f / fs.
 */
export function correlatedNoiseFactor(rho: number, driveHz: number, frameRateHz: number): number {
  return (1 - rho ** 2) / (1 - 2 * rho * Math.cos((2 * Math.PI * driveHz) / frameRateHz) + rho ** 2);
}

/**
 * Filming time for a wanted amplitude uncertainty: u = noise sqrt(2 / frames), rounded up to whole drive periods.
 * The amplitude is that of a sine fit at the known drive frequency, one steady marker, no other noise.
 * @throws Error where a frequency, rate or noise is not above 0
 * Source: Cramér-Rao bound of a sinusoid's amplitude in white noise, Kay, Fundamentals of Statistical Signal
 * Processing (1993) (from memory).
 */
export function filmingTime(filming: FilmingCase): FilmingTime {
  const { driveHz, frameRateHz, noisePx, uWantedPx, longestS = LONGEST_S } = filming;
  if (!(driveHz > 0 && frameRateHz > 0 && noisePx > 0) || (uWantedPx !== undefined && !(uWantedPx > 0)))
    throw new Error(`no filming time for ${driveHz} Hz, ${frameRateHz} frames/s, noise ${noisePx} px`);
  const variance = noisePx ** 2 * correlatedNoiseFactor(filming.noiseLag1 ?? 0, driveHz, frameRateHz);

  const forUncertainty = uWantedPx === undefined ? 0 : (2 * variance) / uWantedPx ** 2;
  const shortest = Math.max(FEWEST_FRAMES / frameRateHz, FEWEST_PERIODS / driveHz);
  const wantedS = Math.max(forUncertainty / frameRateHz, shortest);
  const filmS = Math.ceil(Math.min(wantedS, Math.max(longestS, shortest)) * driveHz - 1e-9) / driveHz;
  const frames = Math.round(filmS * frameRateHz);
  const uAmplitudePx = Math.sqrt((2 * variance) / frames);
  const limit =
    wantedS > longestS && uWantedPx !== undefined
      ? `An amplitude uncertainty of ${uWantedPx.toPrecision(2)} px would take ${Math.round(wantedS)} s of film; ${Math.round(filmS)} s give ${uAmplitudePx.toPrecision(2)} px. Come closer or find a marker with more contrast.`
      : null;
  return { filmS, frames, periods: Math.round(filmS * driveHz), uAmplitudePx, limit };
}
