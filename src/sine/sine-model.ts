/**
 * The linear part of a sine model about a reference time:
 * a cos(w (t - tr)) + b sin(w (t - tr)) + slow baseline + harmonics, with w = 2 pi frequencyHz.
 */
export interface SineModel {
  readonly frequencyHz: number;
  /** Time in seconds at which the phase is told; best the middle of the record. */
  readonly referenceTimeS: number;
  /** Half the record's span in seconds: the baseline's polynomials run from -1 to 1 over the record. */
  readonly halfSpanS: number;
  /** Terms of the baseline: 0 none, 1 an offset, 2 and a slope, 3 and a curvature. */
  readonly baselineTerms: number;
  /** Multiples of the frequency fitted beside it, for example [2, 3]. */
  readonly harmonics: readonly number[];
}

/** Number of columns of the model's design: cosine, sine, baseline terms, then two for each harmonic. */
export function columnCount(model: Pick<SineModel, 'baselineTerms' | 'harmonics'>): number {
  return 2 + model.baselineTerms + 2 * model.harmonics.length;
}

/** Legendre polynomial of degree 0 to 3 at u; they keep offset, slope and curvature apart. */
export function legendre(degree: number, u: number): number {
  if (degree === 0) return 1;
  if (degree === 1) return u;
  if (degree === 2) return 1.5 * u * u - 0.5;
  if (degree === 3) return (2.5 * u * u - 1.5) * u;
  throw new Error(`baseline polynomial of degree ${degree} is not supported`);
}

/** Fills `row` (length at least columnCount) with the design row at time `timeS`. */
export function fillDesignRow(model: SineModel, timeS: number, row: Float64Array): void {
  const time = timeS - model.referenceTimeS;
  const angle = 2 * Math.PI * model.frequencyHz * time;
  row[0] = Math.cos(angle);
  row[1] = Math.sin(angle);
  let column = 2;
  for (let degree = 0; degree < model.baselineTerms; degree++) {
    row[column++] = legendre(degree, model.halfSpanS > 0 ? time / model.halfSpanS : 0);
  }
  for (const multiple of model.harmonics) {
    row[column++] = Math.cos(multiple * angle);
    row[column++] = Math.sin(multiple * angle);
  }
}

/** The model's design for all times, row-major, timesS.length x columns; `extraColumns` are left zero at the end. */
export function sineDesign(model: SineModel, timesS: Float64Array, extraColumns = 0): Float64Array {
  const columns = columnCount(model) + extraColumns;
  const design = new Float64Array(timesS.length * columns);
  for (let i = 0; i < timesS.length; i++) {
    fillDesignRow(model, timesS[i]!, design.subarray(i * columns, (i + 1) * columns));
  }
  return design;
}
