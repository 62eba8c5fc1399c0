import { fitSine } from '../sine/four-parameter.ts';
import { strongestToneHz } from '../sine/interpolated-dft.ts';
import { presentSamples, type Samples, spanS } from '../sine/samples.ts';
import { judgeWindow } from './judge-window.ts';
import { asCore, growCore, type SteadyCore, sharpened } from './steady-core.ts';

// Seeds are this long; shorter ones cannot tell neighbouring frequencies, longer ones miss short dwells.
const SEED_PERIODS = 5;
const FEWEST_PERIODS = 5;
const MOST_SEEDS = 600;
// A stretch this many times a seed's length is taken for a dwell while others are still being looked for.
const SOLID_SEEDS = 2;
// A stretch may depart this much from one sine; a dwell's transient must have fallen to it by the end.
const TOLERANCE = 0.03;
// A stretch shorter than this share of the usual one is a passing moment of a transient.
const SHORTEST_SHARE = 0.2;
// Two stretches are the same motion when the later sine leaves less than this share of the earlier one.
const SAME_MOTION = 0.15;

/**
 * The stretches of a record that one sine describes, in order of time.
 *
 * @param settles true where the motion has transients, whose slow moments must not pass for dwells
 */
export function steadyCores(samples: Samples, settles: boolean): SteadyCore[] {
  const rough: SteadyCore[] = [];
  for (const seed of seeds(samples)) {
    // a seed across a change grows little and must not keep the ones beside it from growing
    const solid = rough.filter((core) => core.toS - core.fromS > SOLID_SEEDS * (seed.toS - seed.fromS));
    if (solid.some((core) => seed.fromS < core.toS && seed.toS > core.fromS)) continue;
    const core = growCore(samples, seed, freeAround(samples, solid, seed), TOLERANCE);
    if (periodsOf(core) >= FEWEST_PERIODS) rough.push(core);
  }
  // a seed across a change may have taken a corner from the dwell beside it: the longer ones take theirs back
  const fixed: SteadyCore[] = [];
  for (const core of rough.sort((a, b) => b.toS - b.fromS - (a.toS - a.fromS))) {
    const left = remaining(core, fixed);
    if (left === null) continue;
    fixed.push(growCore(samples, left, freeAround(samples, fixed, left), TOLERANCE));
  }
  const ended = fixed.map((core) => sharpened(samples, core));
  const settled = settles ? ended.filter((core) => hasSettled(samples, core)) : ended;
  const durations = settled.map((core) => core.toS - core.fromS).sort((a, b) => a - b);
  const usual = durations[durations.length >> 1] ?? 0;
  const cores = settled
    .filter((core) => core.toS - core.fromS >= SHORTEST_SHARE * usual)
    .sort((a, b) => a.fromS - b.fromS);
  return merged(samples, cores);
}

function periodsOf(core: SteadyCore): number {
  return (core.toS - core.fromS) * core.frequencyHz;
}

/** Short stretches that are one sine each, the purest first. */
function seeds(samples: Samples): SteadyCore[] {
  const toneHz = strongestToneHz(samples);
  if (toneHz === null) return [];
  const lengthS = Math.min(SEED_PERIODS / toneHz, spanS(samples) / 2);
  const stepS = Math.max(lengthS / 2, spanS(samples) / MOST_SEEDS);
  const found: SteadyCore[] = [];
  for (let fromS = samples.timesS[0]!; fromS + lengthS <= samples.timesS.at(-1)! + 1e-9; fromS += stepS) {
    const seed = asCore(samples, fromS, fromS + lengthS, null, TOLERANCE);
    if (seed !== null) found.push(seed);
  }
  return found.sort((a, b) => a.frequencyU - b.frequencyU);
}

/** The time around a stretch that no core has taken yet. */
function freeAround(samples: Samples, cores: readonly SteadyCore[], seed: SteadyCore): [number, number] {
  let [from, to] = [samples.timesS[0]!, samples.timesS[samples.timesS.length - 1]!];
  for (const core of cores) {
    if (core.toS <= seed.fromS) from = Math.max(from, core.toS);
    if (core.fromS >= seed.toS) to = Math.min(to, core.fromS);
  }
  return [from, to];
}

/** What is left of a stretch beside those fixed already; null where it is too little to be a dwell. */
function remaining(core: SteadyCore, fixed: readonly SteadyCore[]): SteadyCore | null {
  let { fromS, toS } = core;
  for (const other of fixed) {
    if (other.toS <= fromS || other.fromS >= toS) continue;
    if (other.fromS <= fromS) fromS = other.toS;
    else toS = other.fromS;
  }
  if ((toS - fromS) * core.frequencyHz < FEWEST_PERIODS) return null;
  return { ...core, fromS, toS };
}

/** Steady, or with a transient that has all but died by the end of the stretch. */
function hasSettled(samples: Samples, core: SteadyCore): boolean {
  // the end is known to about a period
  const part = presentSamples(samples.timesS, samples.values, [core.fromS, core.toS - 1 / core.frequencyHz]);
  const judged = judgeWindow(part, core.frequencyHz, 'unknown');
  if (judged === null) return false;
  const { joint } = judged.model;
  return judged.finding.kind === 'steady' || (joint?.conditioned === true && joint.leftoverAtEnd < TOLERANCE);
}

/** Neighbours that are one motion, interrupted by a knock or not yet quite settled, become one again. */
function merged(samples: Samples, cores: readonly SteadyCore[]): SteadyCore[] {
  const result: SteadyCore[] = [];
  for (const core of cores) {
    const before = result.at(-1);
    const joined = before === undefined ? null : joinedCore(samples, before, core);
    if (joined === null) result.push(core);
    else result[result.length - 1] = joined;
  }
  return result;
}

function joinedCore(samples: Samples, before: SteadyCore, after: SteadyCore): SteadyCore | null {
  const later = presentSamples(samples.timesS, samples.values, [after.fromS, after.toS]);
  const fit = fitSine(later.timesS, later.values, { startHz: after.frequencyHz, noise: 'white' });
  if (fit === null) return null;
  // does the later sine, carried back, describe the earlier stretch but for a dying transient?
  const earlier = presentSamples(samples.timesS, samples.values, [before.fromS, before.toS]);
  let sum = 0;
  earlier.timesS.forEach((time, i) => {
    const angle = 2 * Math.PI * fit.frequencyHz * (time - fit.referenceTimeS) + fit.phaseRad;
    sum += (earlier.values[i]! - fit.offset - fit.amplitude * Math.cos(angle)) ** 2;
  });
  const left = Math.sqrt((2 * sum) / earlier.timesS.length) / fit.amplitude;
  const noise = (Math.SQRT2 * fit.residualSd) / fit.amplitude;
  return left < SAME_MOTION + 2 * noise ? { ...after, fromS: before.fromS } : null;
}
