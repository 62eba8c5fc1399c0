import { type DesignGoal, designGoodness } from './design-criterion.ts';
import { addDwell, INFORMATION_SIZE, type Oscillator } from './dwell-information.ts';
import type { PlanSetting } from './plan-points.ts';

/** The task of choosing drive frequencies. */
export interface FrequencyChoice {
  readonly setting: PlanSetting;
  /** Equally likely oscillators over which the uncertainty is averaged; one where it is known. */
  readonly oscillators: readonly Oscillator[];
  /** Information already held about each oscillator in their order, see `noInformation`. */
  readonly held: readonly Float64Array[];
  readonly goal: DesignGoal;
  /** Frequencies to choose from, Hz, ascending. */
  readonly candidates: readonly number[];
  readonly count: number;
  /** No two chosen frequencies closer than this, Hz; 0 allows repeats. */
  readonly leastSpacingHz: number;
}

const CELLS = INFORMATION_SIZE ** 2;
const EXCHANGE_ROUNDS = 8;

// Half the goodness per wanted parameter is minus the logarithm of its uncertainty; with two wanted, a quarter.
const UNCERTAINTY_POWER = 0.25;

/** Goodness of the mean uncertainty: it shuns frequencies that would leave some of the oscillators undetermined. */
const ofMeanUncertainty = (sum: number, oscillators: number) =>
  -Math.log(sum / oscillators) / UNCERTAINTY_POWER;

/** Goodness, over all oscillators, of one more dwell beside what is held and dwells at the other frequencies. */
function goodnessBeside(choice: FrequencyChoice, others: readonly number[]): (driveHz: number) => number {
  const { oscillators, setting, goal } = choice;
  const beside = oscillators.map((oscillator, k) => {
    const information = choice.held[k]!.slice();
    for (const driveHz of others) addDwell(information, setting, oscillator, driveHz);
    return information;
  });
  const trial = new Float64Array(CELLS);
  return (driveHz) => {
    let sum = 0;
    for (let k = 0; k < oscillators.length; k++) {
      trial.set(beside[k]!);
      addDwell(trial, setting, oscillators[k]!, driveHz);
      sum += Math.exp(-UNCERTAINTY_POWER * designGoodness(trial, goal));
    }
    return ofMeanUncertainty(sum, oscillators.length);
  };
}

/**
 * Chooses drive frequencies that make an experiment most telling: one at a time first, then each exchanged for a
 * better candidate until none is found.
 *
 * @returns `count` frequencies, ascending; fewer where spacing leaves no more candidates
 * Source: exchange algorithm, V. V. Fedorov, Theory of Optimal Experiments (1972) (from memory), averaged
 * over what is possible (Bayesian design; Chaloner and Verdinelli, Statist. Sci. 10 (1995) 273, from memory).
 */
export function chooseFrequencies(choice: FrequencyChoice): number[] {
  const { oscillators, candidates, count, leastSpacingHz } = choice;
  const people = oscillators.length;
  // what a dwell at each candidate tells of each oscillator, once for all
  const told = new Float64Array(candidates.length * people * CELLS);
  for (let c = 0; c < candidates.length; c++) {
    for (let k = 0; k < people; k++) {
      const start = (c * people + k) * CELLS;
      addDwell(told.subarray(start, start + CELLS), choice.setting, oscillators[k]!, candidates[c]!);
    }
  }
  const held = new Float64Array(people * CELLS);
  choice.held.forEach((information, k) => {
    held.set(information, k * CELLS);
  });
  const chosen: number[] = [];
  const trial = new Float64Array(CELLS);

  const add = (c: number, sign: 1 | -1) => {
    const start = c * people * CELLS;
    for (let i = 0; i < people * CELLS; i++) held[i]! += sign * told[start + i]!;
  };
  const goodnessWith = (c: number): number => {
    let sum = 0;
    for (let k = 0; k < people; k++) {
      const from = (c * people + k) * CELLS;
      for (let i = 0; i < CELLS; i++) trial[i] = held[k * CELLS + i]! + told[from + i]!;
      sum += Math.exp(-UNCERTAINTY_POWER * designGoodness(trial, choice.goal));
    }
    return ofMeanUncertainty(sum, people);
  };
  const allowed = (c: number) =>
    leastSpacingHz === 0 ||
    chosen.every((other) => Math.abs(candidates[c]! - candidates[other]!) > 0.999 * leastSpacingHz);
  const best = (): number => {
    let winner = -1;
    let winning = Number.NEGATIVE_INFINITY;
    const free: number[] = [];
    for (let c = 0; c < candidates.length; c++) {
      if (!allowed(c)) continue;
      free.push(c);
      const goodness = goodnessWith(c);
      if (goodness > winning) {
        winner = c;
        winning = goodness;
      }
    }
    // too few dwells yet to determine anything: begin spread out
    return winner >= 0 ? winner : (free[Math.floor(((chosen.length + 0.5) / count) * free.length)] ?? -1);
  };

  while (chosen.length < count) {
    const next = best();
    if (next < 0) break;
    chosen.push(next);
    add(next, 1);
  }
  for (let round = 0, changed = true; changed && round < EXCHANGE_ROUNDS; round++) {
    changed = false;
    for (let slot = 0; slot < chosen.length; slot++) {
      const [old] = chosen.splice(slot, 1);
      if (old === undefined) continue;
      add(old, -1);
      const next = best();
      const better = next >= 0 && goodnessWith(next) > goodnessWith(old) + 1e-9;
      chosen.splice(slot, 0, better ? next : old);
      add(better ? next : old, 1);
      changed ||= better;
    }
  }
  return chosen.map((c) => candidates[c]!).sort((a, b) => a - b);
}

/** How far and how finely chosen frequencies are moved, Hz. */
export interface Refinement {
  /** Largest move in a round; halved when no frequency moves far any more. */
  readonly reachHz: number;
  readonly toleranceHz: number;
  readonly rounds: number;
  /** No frequency leaves this range. */
  readonly rangeHz: readonly [number, number];
}

/**
 * Moves chosen frequencies off the grid of candidates to where the goodness is greatest, one after the other, each
 * clear of its neighbours, by golden section.
 */
export function refineFrequencies(
  choice: FrequencyChoice,
  start: readonly number[],
  how: Refinement,
): number[] {
  const frequencies = [...start].sort((a, b) => a - b);
  const ratio = (Math.sqrt(5) - 1) / 2;
  let reach = how.reachHz;
  for (let round = 0; round < how.rounds; round++) {
    let farthest = 0;
    for (let slot = 0; slot < frequencies.length; slot++) {
      const here = frequencies[slot]!;
      const goodness = goodnessBeside(choice, frequencies.toSpliced(slot, 1));
      let low = Math.max(
        here - reach,
        (frequencies[slot - 1] ?? -Infinity) + choice.leastSpacingHz,
        how.rangeHz[0],
      );
      let high = Math.min(
        here + reach,
        (frequencies[slot + 1] ?? Infinity) - choice.leastSpacingHz,
        how.rangeHz[1],
      );
      if (!(high > low)) continue;
      while (high - low > how.toleranceHz) {
        const left = high - ratio * (high - low);
        const right = low + ratio * (high - low);
        if (goodness(left) > goodness(right)) high = right;
        else low = left;
      }
      const found = (low + high) / 2;
      if (goodness(found) <= goodness(here)) continue;
      frequencies[slot] = found;
      farthest = Math.max(farthest, Math.abs(found - here));
    }
    if (farthest < reach / 4) reach /= 2;
  }
  return frequencies;
}
