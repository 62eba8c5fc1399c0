import type { FrequencyChoice } from './choose-frequencies.ts';
import { type PromisedU, promisedU } from './design-criterion.ts';
import { addDwell } from './dwell-information.ts';

/** Relative standard uncertainties at which the test is good enough; left out: no target. */
export interface PlanTargets {
  readonly naturalHzRelativeU?: number;
  readonly dampingRatioRelativeU?: number;
}

/** A relative standard uncertainty before and after the proposed dwell; null where it cannot be told. */
export interface ExpectedChange {
  readonly before: number | null;
  readonly after: number | null;
}

/** Relative standard uncertainties before the next dwell; null where unknown. */
export interface Spreads {
  readonly naturalHz: number | null;
  readonly dampingRatio: number | null;
}

/** What a dwell does to both uncertainties. */
export interface Change {
  readonly naturalHz: ExpectedChange;
  readonly dampingRatio: ExpectedChange;
}

/** What a dwell at a frequency is expected to make of the uncertainties, by its effect on the information held. */
export function expectedChange(choice: FrequencyChoice, driveHz: number, before: Spreads): Change {
  const pairs = choice.oscillators.flatMap((oscillator, k) => {
    const held = choice.held[k]!;
    const then = held.slice();
    addDwell(then, choice.setting, oscillator, driveHz);
    const [now, after] = [promisedU(held), promisedU(then)];
    return now === null || after === null ? [] : [{ now, after }];
  });
  const after = (value: number | null, key: keyof PromisedU) => {
    if (value === null || pairs.length === 0) return null;
    return (value * pairs.reduce((sum, pair) => sum + pair.after[key] / pair.now[key], 0)) / pairs.length;
  };
  return {
    naturalHz: { before: before.naturalHz, after: after(before.naturalHz, 'naturalHz') },
    dampingRatio: { before: before.dampingRatio, after: after(before.dampingRatio, 'dampingRatio') },
  };
}

/**
 * The sentence that ends the test, or null where it should go on: the targets are reached, or the best further
 * dwell lowers neither uncertainty by more than `leastGain` (a fraction).
 */
export function verdictOn(change: Change, targets: PlanTargets, leastGain: number): string | null {
  const reached = (target: number | undefined, { before }: ExpectedChange) =>
    target === undefined || (before !== null && before <= target);
  const anyTarget = targets.naturalHzRelativeU !== undefined || targets.dampingRatioRelativeU !== undefined;
  if (
    anyTarget &&
    reached(targets.naturalHzRelativeU, change.naturalHz) &&
    reached(targets.dampingRatioRelativeU, change.dampingRatio)
  )
    return 'The wanted uncertainties are reached.';
  const gain = ({ before, after }: ExpectedChange) =>
    before === null || after === null || before === 0 ? 0 : 1 - after / before;
  if (Math.max(gain(change.naturalHz), gain(change.dampingRatio)) < leastGain)
    return `A further dwell would lower neither uncertainty by more than ${percent(leastGain)}: more of them are hardly worth their time.`;
  return null;
}

/** Why the dwell is proposed and what it is expected to bring. */
export function narrowing(driveHz: number, { naturalHz, dampingRatio }: Change, fitted: boolean): string {
  const step = ({ before, after }: ExpectedChange) =>
    before === null || after === null ? 'unknown' : `from ${percent(before)} to ${percent(after)}`;
  const grounds = fitted
    ? 'tells most at the present fit'
    : 'tells most of what the dwells so far leave open';
  return `A dwell at ${driveHz} Hz ${grounds}: standard uncertainty of the natural frequency ${step(naturalHz)}, of the damping ratio ${step(dampingRatio)}.`;
}

const percent = (fraction: number) => `${Number((100 * fraction).toPrecision(2))} %`;
