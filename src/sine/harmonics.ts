import { linearLeastSquares } from '../numeric/linear-algebra.ts';
import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { durationS, medianIntervalS, presentSamples, type Samples } from './samples.ts';
import { columnCount, sineDesign } from './sine-model.ts';
import { recordCentre } from './three-parameter.ts';

/** Highest harmonic looked for. */
export const HIGHEST_HARMONIC = 5;

// Two frequencies closer than this many times 1/duration cannot be told apart safely.
const RESOLUTION = 1.5;

// In a shorter record harmonics, offset and slope are too much alike.
const FEWEST_PERIODS = 2;

/** Where a frequency shows when sampled at `rateHz`: in 0 to rateHz/2. */
export function aliasHz(frequencyHz: number, rateHz: number): number {
  return Math.abs(frequencyHz - rateHz * Math.round(frequencyHz / rateHz));
}

/** Harmonics (2 to 5) whose place in the sampled spectrum is their own: not at 0, not at another's alias. */
export function separableHarmonics(samples: Samples, frequencyHz: number): number[] {
  const rateHz = 1 / medianIntervalS(samples);
  const apart = RESOLUTION / durationS(samples);
  const taken = [aliasHz(frequencyHz, rateHz)];
  const found: number[] = [];
  for (let multiple = 2; multiple <= HIGHEST_HARMONIC; multiple++) {
    const place = aliasHz(multiple * frequencyHz, rateHz);
    if (
      place < apart ||
      place > rateHz / 2 - apart ||
      taken.some((other) => Math.abs(other - place) < apart)
    ) {
      continue;
    }
    taken.push(place);
    found.push(multiple);
  }
  return found;
}

/**
 * Harmonics 2 to 5 over the fundamental, all fitted together with an offset and a slope, so that none leaks into
 * another. NaN values are gaps.
 *
 * @returns four ratios, those of harmonics 2, 3, 4 and 5; null values where a harmonic cannot be told from another
 *   at this frame rate, or where the record is too short
 */
export function harmonicRatios(timesS: Float64Array, values: Float64Array, frequencyHz: number): Measured[] {
  const none = new Array<Measured>(HIGHEST_HARMONIC - 1).fill(NOT_MEASURED);
  const samples = presentSamples(timesS, values);
  const frames = samples.timesS.length;
  if (!(frequencyHz > 0) || frames < 8 || durationS(samples) * frequencyHz < FEWEST_PERIODS) return none;
  const multiples = separableHarmonics(samples, frequencyHz);
  const model = { frequencyHz, ...recordCentre(samples), baselineTerms: 2, harmonics: multiples };
  const columns = columnCount(model);
  if (frames < columns + 4) return none;
  const fit = linearLeastSquares(sineDesign(model, samples.timesS), frames, columns, samples.values);
  if (fit === null) return none;
  const fundamental = Math.hypot(fit.coefficients[0]!, fit.coefficients[1]!);
  if (!(fundamental > 0)) return none;
  const variance = fit.residualSumOfSquares / fit.degreesOfFreedom;
  return none.map((_, k) => {
    const place = multiples.indexOf(k + 2);
    if (place < 0) return NOT_MEASURED;
    const column = 4 + 2 * place;
    const ratio = Math.hypot(fit.coefficients[column]!, fit.coefficients[column + 1]!) / fundamental;
    const spread = fit.unscaledCovariance[column * columns + column]!;
    return measured(ratio, Math.sqrt(variance * spread) / fundamental);
  });
}
