/**
 * What the frequencies are chosen for: all parameters together, natural frequency and damping together (the gain
 * does not matter), or one of the two alone.
 */
export type DesignGoal = 'all' | 'natural-frequency-and-damping' | 'natural-frequency' | 'damping-ratio';

const ROUNDING = 1e-12; // a remainder this small beside what was taken away is no information

/** What is left when the lag's zero and then the gain have been solved for; `ok` is false where anything is undetermined. */
interface Remainder {
  ok: boolean;
  zero: number;
  gain: number;
  natural: number;
  damping: number;
  shared: number;
  /** natural * damping - shared^2. */
  determinant: number;
}

const remainder: Remainder = {
  ok: false,
  zero: 0,
  gain: 0,
  natural: 0,
  damping: 0,
  shared: 0,
  determinant: 0,
};

/** Eliminates lag zero and gain from an information matrix; one scratch object, as this is the innermost loop. */
function reduce(information: Float64Array): Remainder {
  const zero = information[15]!;
  const z0 = information[12]! / zero;
  const z1 = information[13]! / zero;
  const z2 = information[14]! / zero;
  const gain = information[0]! - z0 * information[12]!;
  const naturalGain = (information[4]! - z1 * information[12]!) / gain;
  const dampingGain = (information[8]! - z2 * information[12]!) / gain;
  remainder.zero = zero;
  remainder.gain = gain;
  remainder.natural = information[5]! - z1 * information[13]! - naturalGain ** 2 * gain;
  remainder.damping = information[10]! - z2 * information[14]! - dampingGain ** 2 * gain;
  remainder.shared = information[9]! - z2 * information[13]! - naturalGain * dampingGain * gain;
  remainder.determinant = remainder.natural * remainder.damping - remainder.shared ** 2;
  remainder.ok =
    zero > 0 &&
    gain > ROUNDING * information[0]! &&
    remainder.natural > ROUNDING * information[5]! &&
    remainder.damping > ROUNDING * information[10]! &&
    remainder.determinant > ROUNDING * information[5]! * information[10]!;
  return remainder;
}

/**
 * How good an information matrix is for a goal, larger is better: minus the logarithm of the determinant of the
 * covariance of what is wanted. An increase of 2 ln 2 for one wanted parameter halves its uncertainty.
 *
 * @param information lower triangle, as `addDwell` leaves it
 * @returns -Infinity where the dwells do not determine what is wanted
 * Source: D- and Ds-optimality; Atkinson and Donev, Optimum Experimental Designs (from memory).
 */
export function designGoodness(information: Float64Array, goal: DesignGoal): number {
  const { ok, zero, gain, natural, damping, determinant } = reduce(information);
  if (!ok) return Number.NEGATIVE_INFINITY;
  switch (goal) {
    case 'all':
      return Math.log(determinant * gain * zero);
    case 'natural-frequency-and-damping':
      return Math.log(determinant);
    case 'natural-frequency':
      return Math.log(determinant / damping);
    case 'damping-ratio':
      return Math.log(determinant / natural);
  }
}

/** Relative standard uncertainties that an information matrix promises. */
export interface PromisedU {
  readonly gain: number;
  readonly naturalHz: number;
  readonly dampingRatio: number;
}

/**
 * Relative standard uncertainties of gain, natural frequency and damping ratio from an information matrix.
 * @returns null where the dwells do not determine them
 */
export function promisedU(information: Float64Array): PromisedU | null {
  const { ok, gain, natural, damping, shared, determinant } = reduce(information);
  if (!ok) return null;
  // the gain's variance grows by what it shares with the other two
  const zero = information[15]!;
  const byNatural = (information[4]! - (information[13]! * information[12]!) / zero) / gain;
  const byDamping = (information[8]! - (information[14]! * information[12]!) / zero) / gain;
  const fromOthers =
    (byNatural ** 2 * damping - 2 * byNatural * byDamping * shared + byDamping ** 2 * natural) / determinant;
  return {
    gain: Math.sqrt(1 / gain + fromOthers),
    naturalHz: Math.sqrt(damping / determinant),
    dampingRatio: Math.sqrt(natural / determinant),
  };
}
