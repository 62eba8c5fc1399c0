import { eigenvalues, thinSvd } from '../numeric/linear-algebra.ts';

/** Poles of a free decay: decay rate in 1/s and damped angular frequency in rad/s. */
export interface DecayPole {
  readonly decayRatePerS: number;
  readonly omegaRadPerS: number;
}

const PENCIL_SHARE = 1 / 3; // of the record: near the bound over a wide range of noise (Hua and Sarkar)
const MOST_COLUMNS = 60; // longer pencils gain nothing that the refinement does not give, and cost with the third power

/**
 * Pole pair of one decaying sine by the matrix pencil: the two largest singular vectors of the data matrix, whose shift
 * from row to row is the pole. Noise-free data give it exactly; it is a start value for a least-squares fit.
 *
 * @param values evenly spaced, their mean level taken off
 * @param intervalS time between them, s
 * @returns null where the values do not oscillate
 * Source: Hua and Sarkar, IEEE Trans. ASSP 38 (1990) 814 (from memory).
 */
export function pencilPole(values: Float64Array, intervalS: number): DecayPole | null {
  const n = values.length;
  const columns = Math.min(MOST_COLUMNS, Math.floor(n * PENCIL_SHARE)) + 1;
  const rows = n - columns + 1;
  if (columns < 3 || rows < 3) return null;
  const data = new Float64Array(rows * columns);
  for (let i = 0; i < rows; i++) for (let j = 0; j < columns; j++) data[i * columns + j] = values[i + j] ?? 0;
  const { right, singularValues } = thinSvd(data, rows, columns);
  if (!((singularValues[1] ?? 0) > 0)) return null;
  // two right vectors, without their last and without their first entry: V1+ V0 has the poles as eigenvalues
  const k = Math.min(rows, columns);
  const at = (row: number, vector: number): number => right[row * k + vector] ?? 0;
  const gram = [0, 0, 0, 0];
  const cross = [0, 0, 0, 0];
  for (let row = 0; row + 1 < columns; row++) {
    for (let a = 0; a < 2; a++) {
      for (let b = 0; b < 2; b++) {
        gram[2 * a + b] = (gram[2 * a + b] ?? 0) + at(row, a) * at(row, b);
        cross[2 * a + b] = (cross[2 * a + b] ?? 0) + at(row, a) * at(row + 1, b);
      }
    }
  }
  const [g00 = 0, g01 = 0, g10 = 0, g11 = 0] = gram;
  const [c00 = 0, c01 = 0, c10 = 0, c11 = 0] = cross;
  const determinant = g00 * g11 - g01 * g10;
  if (!(determinant > 0)) return null;
  const shift = Float64Array.of(
    (g11 * c00 - g01 * c10) / determinant,
    (g11 * c01 - g01 * c11) / determinant,
    (g00 * c10 - g10 * c00) / determinant,
    (g00 * c11 - g10 * c01) / determinant,
  );
  return poleOf(eigenvalues(shift, 2), intervalS);
}

/**
 * The same by two-pole linear prediction (Prony): each value from the two before it, by least squares. Exact without
 * noise, biased with it.
 */
export function predictionPole(values: Float64Array, intervalS: number): DecayPole | null {
  let s11 = 0;
  let s12 = 0;
  let s22 = 0;
  let r1 = 0;
  let r2 = 0;
  for (let i = 2; i < values.length; i++) {
    const [now, one, two] = [values[i] ?? 0, values[i - 1] ?? 0, values[i - 2] ?? 0];
    s11 += one * one;
    s12 += one * two;
    s22 += two * two;
    r1 += now * one;
    r2 += now * two;
  }
  const determinant = s11 * s22 - s12 * s12;
  if (!(determinant > 0)) return null;
  const p = (r1 * s22 - r2 * s12) / determinant;
  const q = (s11 * r2 - s12 * r1) / determinant;
  // z^2 = p z + q
  const half = p / 2;
  const below = half * half + q;
  if (below >= 0) return null;
  return poleOf({ real: Float64Array.of(half), imaginary: Float64Array.of(Math.sqrt(-below)) }, intervalS);
}

function poleOf(
  roots: { readonly real: Float64Array; readonly imaginary: Float64Array },
  intervalS: number,
): DecayPole | null {
  const real = roots.real[0] ?? 0;
  const imaginary = Math.abs(roots.imaginary[0] ?? 0);
  const size = Math.hypot(real, imaginary);
  if (!(imaginary > 0) || !(size > 0)) return null;
  return {
    decayRatePerS: -Math.log(size) / intervalS,
    omegaRadPerS: Math.atan2(imaginary, real) / intervalS,
  };
}
