import { durationS, type Samples } from './samples.ts';

/** A fitted linear (or linearised) model: what it took out of the residuals. */
export interface FittedDesign {
  /** Row-major, samples x columns. */
  readonly design: Float64Array;
  readonly columns: number;
  /** (D'D)^-1, row-major, columns x columns. */
  readonly unscaledCovariance: Float64Array;
}

/** One ordinate of a residual spectrum, scaled so that white noise of variance 1 gives a mean power of 1. */
export interface Ordinate {
  readonly frequencyHz: number;
  readonly real: number;
  readonly imaginary: number;
  /** Share of the frequency's energy that the fit did not take out, 0 to 1. */
  readonly share: number;
}

// A frequency the fit took out by more than this tells nothing about the noise there.
const LEAST_SHARE_LEFT = 0.5;
const MOST_ORDINATES = 24;
const FEWEST_ORDINATES = 4;

/** exp(-2 pi i f t) of every sample, carried from one frequency to the next by a fixed step: no sine in the loop. */
class Carrier {
  readonly cos: Float64Array;
  readonly sin: Float64Array;
  readonly #stepCos: Float64Array;
  readonly #stepSin: Float64Array;

  constructor(timesS: Float64Array, startHz: number, stepHz: number) {
    const middleS = (timesS[0]! + timesS[timesS.length - 1]!) / 2;
    const turns = (hz: number) => timesS.map((time) => 2 * Math.PI * hz * (time - middleS));
    const [start, step] = [turns(startHz), turns(stepHz)];
    this.cos = start.map(Math.cos);
    this.sin = start.map(Math.sin);
    this.#stepCos = step.map(Math.cos);
    this.#stepSin = step.map(Math.sin);
  }

  advance(): void {
    for (let i = 0; i < this.cos.length; i++) {
      const cos = this.cos[i]! * this.#stepCos[i]! - this.sin[i]! * this.#stepSin[i]!;
      this.sin[i] = this.sin[i]! * this.#stepCos[i]! + this.cos[i]! * this.#stepSin[i]!;
      this.cos[i] = cos;
    }
  }
}

function ordinateOf(
  { cos, sin }: Carrier,
  residuals: Float64Array,
  fitted: FittedDesign,
  frequencyHz: number,
): Ordinate {
  const { design, columns, unscaledCovariance } = fitted;
  const n = residuals.length;
  const alongCos = new Float64Array(columns);
  const alongSin = new Float64Array(columns);
  let real = 0;
  let imaginary = 0;
  for (let i = 0; i < n; i++) {
    const [c, s] = [cos[i]!, sin[i]!];
    real += c * residuals[i]!;
    imaginary -= s * residuals[i]!;
    for (let k = 0; k < columns; k++) {
      const value = design[i * columns + k]!;
      alongCos[k]! += c * value;
      alongSin[k]! += s * value;
    }
  }
  let taken = 0;
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < columns; b++) {
      const weight = unscaledCovariance[a * columns + b]!;
      taken += weight * (alongCos[a]! * alongCos[b]! + alongSin[a]! * alongSin[b]!);
    }
  }
  const left = Math.max(n - taken, 1e-9 * n);
  const scale = 1 / Math.sqrt(left);
  return { frequencyHz, real: real * scale, imaginary: imaginary * scale, share: left / n };
}

/**
 * The usable ordinates of a residual spectrum around a frequency, nearest first: whole multiples of 1/duration away
 * from it, not folded back by sampling, not at harmonics of it (what the motion does there is no noise), and not
 * taken out by the fit. Phases are told about the middle of the record.
 *
 * @param centreHz 0 or positive; may lie above half the frame rate
 * @returns null where fewer than four ordinates can be used
 */
export function ordinatesAround(
  samples: Samples,
  residuals: Float64Array,
  fitted: FittedDesign,
  centreHz: number,
): readonly Ordinate[] | null {
  const count = samples.timesS.length;
  if (count <= fitted.columns + FEWEST_ORDINATES) return null;
  const stepHz = 1 / durationS(samples);
  const nyquistHz = (count * stepHz) / 2;
  const zone = Math.floor(centreHz / nyquistHz);
  const [lowestHz, highestHz] = [zone * nyquistHz + 0.5 * stepHz, (zone + 1) * nyquistHz - 0.25 * stepHz];
  const isHarmonic = (frequencyHz: number) => {
    const multiple = centreHz > 0 ? Math.round(frequencyHz / centreHz) : 0;
    return multiple >= 2 && Math.abs(frequencyHz - multiple * centreHz) < 0.5 * stepHz;
  };

  const wanted = Math.min(MOST_ORDINATES, Math.max(8, Math.round(count / 8)));
  const carriers = [-stepHz, stepHz].map(
    (step) => [step, new Carrier(samples.timesS, centreHz, step)] as const,
  );
  const found: Ordinate[] = [];
  let looked = 0;
  for (let k = 1; k <= count / 2 + 1 && looked < wanted; k++) {
    for (const [step, carrier] of carriers) {
      const frequencyHz = centreHz + k * step;
      if (frequencyHz < lowestHz || frequencyHz > highestHz) continue;
      carrier.advance();
      if (isHarmonic(frequencyHz)) continue;
      looked++;
      const ordinate = ordinateOf(carrier, residuals, fitted, frequencyHz);
      if (ordinate.share >= LEAST_SHARE_LEFT) found.push(ordinate);
    }
  }
  return found.length < FEWEST_ORDINATES ? null : found;
}
