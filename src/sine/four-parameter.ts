import { NormalEquations, type NormalSolution } from '../numeric/normal-equations.ts';
import { strongestToneHz } from './interpolated-dft.ts';
import { durationS, presentSamples, type Samples } from './samples.ts';
import { finishSineFit, type SineFit, type SineStopReason } from './sine-fit.ts';
import { columnCount, fillDesignRow, type SineModel } from './sine-model.ts';
import { recordCentre, type SineFitOptions } from './three-parameter.ts';

/** Choices for a fit with the frequency free. */
export interface FreeSineFitOptions extends SineFitOptions {
  /** Start frequency in Hz. Where it is given, the answer must lie within 1/duration of it. */
  readonly startHz?: number;
}

const MOST_ITERATIONS = 40;
const STEP_TOLERANCE = 1e-12;
// Below this many periods the spectrum's peak is no safe start and a scan takes its place.
const FEW_PERIODS = 4;

interface Iterated {
  readonly frequencyHz: number;
  readonly residualSumOfSquares: number;
  readonly iterations: number;
  readonly stopReason: SineStopReason;
}

/** The linear fit at the model's frequency; null where it is not determined. */
function solveLinear(samples: Samples, model: SineModel): NormalSolution | null {
  const columns = columnCount(model);
  const equations = new NormalEquations(columns);
  const row = new Float64Array(columns);
  for (let i = 0; i < samples.timesS.length; i++) {
    fillDesignRow(model, samples.timesS[i]!, row);
    equations.add(row, samples.values[i]!);
  }
  return equations.solve();
}

/** One linearised step: coefficients at this frequency, and the frequency change that goes with them. */
function frequencyStep(
  samples: Samples,
  model: SineModel,
  cosine: number,
  sine: number,
): Float64Array | null {
  const linear = columnCount(model);
  const equations = new NormalEquations(linear + 1);
  const row = new Float64Array(linear + 1);
  for (let i = 0; i < samples.timesS.length; i++) {
    const time = samples.timesS[i]!;
    fillDesignRow(model, time, row);
    row[linear] = 2 * Math.PI * (time - model.referenceTimeS) * (sine * row[0]! - cosine * row[1]!);
    equations.add(row, samples.values[i]!);
  }
  return equations.solve()?.coefficients ?? null;
}

/** The standard's iteration from one start; null where it leaves the record's frequencies or degenerates. */
function iterate(samples: Samples, start: SineModel): Iterated | null {
  const farthestHz = 1 / durationS(samples);
  let coefficients = solveLinear(samples, start)?.coefficients ?? null;
  let frequencyHz = start.frequencyHz;
  let lastStep = Number.POSITIVE_INFINITY;
  let stopReason: SineStopReason = 'max-iterations';
  let iterations = 0;
  while (iterations < MOST_ITERATIONS) {
    if (coefficients === null) return null;
    iterations++;
    const model = { ...start, frequencyHz };
    const next = frequencyStep(samples, model, coefficients[0]!, coefficients[1]!);
    if (next === null) return null;
    const wanted = next[next.length - 1]!;
    const step = Math.sign(wanted) * Math.min(Math.abs(wanted), farthestHz / 2);
    frequencyHz += step;
    coefficients = next;
    if (!(frequencyHz > 0) || Math.abs(frequencyHz - start.frequencyHz) > farthestHz) return null;
    if (Math.abs(step) <= STEP_TOLERANCE * frequencyHz) {
      stopReason = 'step';
      break;
    }
    // steps that no longer shrink are rounding
    if (Math.abs(step) < 1e-7 * frequencyHz && Math.abs(step) >= lastStep) {
      stopReason = 'stalled';
      break;
    }
    lastStep = Math.abs(step);
  }
  if (stopReason === 'max-iterations') return null;
  const linear = solveLinear(samples, { ...start, frequencyHz });
  return linear === null
    ? null
    : { frequencyHz, residualSumOfSquares: linear.residualSumOfSquares, iterations, stopReason };
}

/** Frequency of the least residual on a grid of a quarter of 1/duration: variable projection, linear part solved. */
function scan(samples: Samples, model: SineModel, highestHz: number): number | null {
  const stepHz = 1 / (4 * durationS(samples));
  let best: number | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (let frequencyHz = 2 * stepHz; frequencyHz < highestHz; frequencyHz += stepHz) {
    const linear = solveLinear(samples, { ...model, frequencyHz });
    if (linear !== null && linear.residualSumOfSquares < least) {
      least = linear.residualSumOfSquares;
      best = frequencyHz;
    }
  }
  return best;
}

/**
 * Sine fit with the frequency free (four parameters and more) on the frames' own times. The start comes from an
 * interpolated DFT; a scan by variable projection takes its place for records of few periods, and whenever the
 * iteration does not arrive or leaves more residual than it started with. NaN values are gaps.
 *
 * @param timesS seconds, strictly increasing
 * @param values displacement, any unit
 * @returns null where there are fewer than five frames, nothing moves, or no sine is determined; with `startHz`
 *   also where the answer lies farther than 1/duration from it
 * Source: IEEE Std 1057, four-parameter sine fit (from memory), time counted from the record's middle.
 */
export function fitSine(
  timesS: Float64Array,
  values: Float64Array,
  options: FreeSineFitOptions = {},
): SineFit | null {
  const samples = presentSamples(timesS, values);
  const count = samples.timesS.length;
  if (count < 5) return null;
  const model: SineModel = {
    frequencyHz: 0,
    ...recordCentre(samples),
    baselineTerms: options.baselineTerms ?? 1,
    harmonics: options.harmonics ?? [],
  };
  const duration = durationS(samples);
  const nyquistHz = count / (2 * duration);

  let found: Iterated | null = null;
  if (options.startHz !== undefined) {
    if (!(options.startHz > 0) || !Number.isFinite(options.startHz)) return null;
    found = iterate(samples, { ...model, frequencyHz: options.startHz });
  } else {
    const toneHz = strongestToneHz(samples);
    if (toneHz === null) return null;
    const few = toneHz * duration < FEW_PERIODS;
    const startHz = few ? scan(samples, model, Math.min(nyquistHz, (2 * FEW_PERIODS) / duration)) : toneHz;
    const atStart = startHz === null ? null : solveLinear(samples, { ...model, frequencyHz: startHz });
    found = startHz === null ? null : iterate(samples, { ...model, frequencyHz: startHz });
    if (found === null || (atStart !== null && found.residualSumOfSquares > atStart.residualSumOfSquares)) {
      const scannedHz = scan(samples, model, nyquistHz);
      found = scannedHz === null ? null : iterate(samples, { ...model, frequencyHz: scannedHz });
    }
  }
  if (found === null) return null;
  return finishSineFit(
    samples,
    { ...model, frequencyHz: found.frequencyHz },
    { frequencyFree: true, noise: options.noise ?? 'correlated', ...found },
  );
}
