import type { Measured } from '../numeric/measured.ts';
import { dampedHz, dampingFromDecay } from './damping-from-decay.ts';

/** Where the first guess at the natural frequency comes from; any one of these is enough. */
export type FrequencySource =
  /** Result of a measured free decay. */
  | { readonly kind: 'ring-down'; readonly naturalHz: Measured; readonly dampingRatio: Measured }
  /** So many free cycles took so many seconds by a stopwatch or a clip. */
  | {
      readonly kind: 'timed-period';
      readonly cycles: number;
      readonly timeS: number;
      readonly uTimeS?: number;
    }
  /** Stiffness and moving mass, with standard uncertainties. */
  | {
      readonly kind: 'stiffness-mass';
      readonly stiffnessNPerM: number;
      readonly uStiffnessNPerM?: number;
      readonly massKg: number;
      readonly uMassKg?: number;
    }
  /** A frequency that is known or guessed, with its standard uncertainty. */
  | { readonly kind: 'stated'; readonly naturalHz: number; readonly uHz?: number };

/** A guess at the damping: a ratio with a range it very likely lies in, or a decay that was watched. */
export type DampingGuess =
  | { readonly ratio: number; readonly low?: number; readonly high?: number }
  | { readonly remaining: number; readonly cycles: number };

/**
 * What is known before the first dwell. The natural frequency has a standard uncertainty above 0; the damping
 * ratio (for structural damping half the loss factor) lies between `low` and `high` nine times in ten.
 */
export interface StartingKnowledge {
  readonly naturalHz: { readonly value: number; readonly u: number };
  readonly dampingRatio: { readonly value: number; readonly low: number; readonly high: number };
  /** What was assumed because it was not said, one sentence each. */
  readonly notes: readonly string[];
}

/** Either the knowledge, or null with the sentence that says what is missing. */
export type StartingOutcome =
  | { readonly knowledge: StartingKnowledge; readonly reason: null }
  | { readonly knowledge: null; readonly reason: string };

// All of these are common practice, no source; each is said in a note where it is used.
const STOPWATCH_U_S = 0.15; // start and stop by hand
const STIFFNESS_RELATIVE_U = 0.05; // catalogue springs
const STATED_RELATIVE_U = 0.05;
const RING_DOWN_RELATIVE_U = 0.01;
const DAMPING_WITHOUT_A_GUESS = { value: 0.02, low: 0.004, high: 0.1 };
const DAMPING_RANGE_FACTOR = 2; // a bare guess may be off by this factor either way
const SMALLEST_DAMPING_SPREAD = 0.1; // damping changes with amplitude: even a ring-down does not fix it better
const TWO_SIDED_90 = 1.645;

/**
 * Gathers the first guess of natural frequency and damping with their uncertainties.
 * The reciprocal of the timed free period is the first guess of the resonance (common practice).
 *
 * @returns null with a sentence where there is nothing to start from
 * Source: f = cycles / time, corrected for damping; f = sqrt(k / m) / (2 pi); JCGM 100:2008, 5.1.
 */
export function startingKnowledge(
  source: FrequencySource | null,
  guess: DampingGuess | null,
): StartingOutcome {
  if (source === null)
    return missing(
      'To plan, give a first natural frequency: measure a ring-down, time some free cycles, or give stiffness and moving mass.',
    );
  const notes: string[] = [];
  const damping = dampingOf(source, guess, notes);
  if (typeof damping === 'string') return missing(damping);

  switch (source.kind) {
    case 'ring-down': {
      const { value, u } = source.naturalHz;
      if (value === null || value <= 0)
        return missing('The ring-down gave no natural frequency: repeat it, or time some free cycles.');
      if (u === null) notes.push('The ring-down states no uncertainty of its frequency; 1 % is assumed.');
      return known(value, u ?? RING_DOWN_RELATIVE_U * value, damping, notes);
    }
    case 'timed-period': {
      const { cycles, timeS } = source;
      if (!(cycles > 0 && timeS > 0)) return missing('A timed period needs cycles and seconds above 0.');
      if (source.uTimeS === undefined)
        notes.push(`Timing by hand is taken as good to ${STOPWATCH_U_S} s; more cycles make it better.`);
      const damped = cycles / timeS;
      const value = (damped * damped) / dampedHz(damped, damping.value);
      return known(value, (value * (source.uTimeS ?? STOPWATCH_U_S)) / timeS, damping, notes);
    }
    case 'stiffness-mass': {
      const { stiffnessNPerM: k, massKg: m } = source;
      if (!(k > 0 && m > 0)) return missing('Stiffness and moving mass must both be above 0.');
      if (source.uStiffnessNPerM === undefined)
        notes.push('No uncertainty of the stiffness is stated; 5 % is assumed.');
      const value = Math.sqrt(k / m) / (2 * Math.PI);
      const relative = Math.hypot(
        (source.uStiffnessNPerM ?? STIFFNESS_RELATIVE_U * k) / k,
        (source.uMassKg ?? 0) / m,
      );
      return known(value, (value * relative) / 2, damping, notes);
    }
    case 'stated': {
      if (!(source.naturalHz > 0)) return missing('The natural frequency to start from must be above 0 Hz.');
      if (source.uHz === undefined)
        notes.push('No uncertainty of the natural frequency is stated; 5 % is assumed.');
      return known(source.naturalHz, source.uHz ?? STATED_RELATIVE_U * source.naturalHz, damping, notes);
    }
  }
}

const missing = (reason: string): StartingOutcome => ({ knowledge: null, reason });

function known(
  value: number,
  u: number,
  dampingRatio: StartingKnowledge['dampingRatio'],
  notes: readonly string[],
): StartingOutcome {
  // a stated uncertainty of 0 would leave nothing to plan for
  return {
    knowledge: { naturalHz: { value, u: Math.max(u, 1e-6 * value) }, dampingRatio, notes },
    reason: null,
  };
}

function dampingOf(
  source: FrequencySource,
  guess: DampingGuess | null,
  notes: string[],
): StartingKnowledge['dampingRatio'] | string {
  const measuredRatio = source.kind === 'ring-down' ? source.dampingRatio.value : null;
  if (source.kind === 'ring-down' && measuredRatio !== null && measuredRatio > 0 && measuredRatio < 1) {
    const spread = Math.max(
      (TWO_SIDED_90 * (source.dampingRatio.u ?? 0)) / measuredRatio,
      SMALLEST_DAMPING_SPREAD,
    );
    return around(measuredRatio, 1 + spread);
  }
  if (guess === null) {
    notes.push(
      'Nothing is known of the damping; a ratio between 0.004 and 0.1 is assumed. A ring-down would tell.',
    );
    return DAMPING_WITHOUT_A_GUESS;
  }
  if ('remaining' in guess) {
    const { remaining, cycles } = guess;
    if (!(remaining > 0 && remaining < 1 && cycles > 0))
      return 'The watched decay needs cycles above 0 and a remaining fraction between 0 and 1.';
    return around(dampingFromDecay(remaining, cycles), 1.5);
  }
  const { ratio, low, high } = guess;
  if (!(ratio > 0 && ratio < 1)) return 'The damping ratio to start from must lie between 0 and 1.';
  if (
    (low !== undefined && !(low > 0 && low <= ratio)) ||
    (high !== undefined && !(high < 1 && high >= ratio))
  )
    return 'The range of the damping ratio must lie between 0 and 1 and hold the guess.';
  if (low === undefined || high === undefined)
    notes.push('The damping guess is taken as good to a factor of two either way.');
  const wide = around(ratio, DAMPING_RANGE_FACTOR);
  return { value: ratio, low: low ?? wide.low, high: high ?? wide.high };
}

const around = (value: number, factor: number) => ({
  value,
  low: value / factor,
  high: Math.min(value * factor, 0.99),
});
