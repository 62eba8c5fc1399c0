import { demodulate } from '../motion/demodulate.ts';
import type { Samples } from '../sine/samples.ts';
import { type DecayFit, fitDecay } from './decay-fit.ts';
import { strongestTone } from './strongest-tone.ts';

/** The part of a record that is a free decay, with its fit. */
export interface DecayWindow {
  readonly windowS: readonly [number, number];
  readonly fit: DecayFit;
}

const STARTS_PER_PERIOD = 4;
const PERIODS_SEARCHED = 8; // after the largest swing: a release or a stopped drive is over by then
const AS_GOOD = 1.15; // residual over that of later starts up to which a start belongs to the free decay
const GONE = 0.01; // of the first swing: below this the record tells nothing more of the decay
const FEWEST_PERIODS = 3;

function part(samples: Samples, fromS: number, toS: number): Samples {
  const { timesS } = samples;
  let from = 0;
  while (from < timesS.length && (timesS[from] ?? 0) < fromS) from += 1;
  let to = timesS.length;
  while (to > from && (timesS[to - 1] ?? 0) > toS) to -= 1;
  return { timesS: timesS.slice(from, to), values: samples.values.slice(from, to) };
}

/** Where the swing is largest, and where it has gone, from the amplitude in blocks of whole periods. */
function bounds(
  samples: Samples,
  frequencyHz: number,
): { readonly largestS: number; readonly goneS: number } | null {
  const blocks = demodulate(samples, frequencyHz);
  if (blocks === null || blocks.timesS.length < 2) return null;
  const amplitude = Array.from(blocks.timesS, (_, k) =>
    Math.hypot(blocks.real[k] ?? 0, blocks.imaginary[k] ?? 0),
  );
  const largest = Math.max(...amplitude);
  const at = amplitude.indexOf(largest);
  const gone = amplitude.findIndex((value, k) => k > at && value < GONE * largest);
  return {
    largestS: (blocks.timesS[at] ?? 0) - 1 / frequencyHz,
    goneS: gone < 0 ? (samples.timesS.at(-1) ?? 0) : (blocks.timesS[gone] ?? 0),
  };
}

/**
 * Finds the free decay in a record that may begin with the part held, driven or pushed, and end in noise: the earliest
 * start from which a decaying sine describes the rest as well as it does from later starts.
 *
 * @returns null where no free decay of three periods or more is found
 */
export function findDecay(samples: Samples): DecayWindow | null {
  const tone = strongestTone(samples);
  if (tone === null) return null;
  const { frequencyHz } = tone;
  const reach = bounds(samples, frequencyHz);
  if (reach === null) return null;
  const firstS = Math.max(samples.timesS[0] ?? 0, reach.largestS);
  const found: { readonly fromS: number; readonly fit: DecayFit }[] = [];
  for (let k = 0; k <= PERIODS_SEARCHED * STARTS_PER_PERIOD; k++) {
    const fromS = firstS + k / (STARTS_PER_PERIOD * frequencyHz);
    if (reach.goneS - fromS < FEWEST_PERIODS / frequencyHz) break;
    const fit = fitDecay(part(samples, fromS, reach.goneS));
    if (fit?.converged && (fit.decayRatePerS.value ?? 0) > 0) found.push({ fromS, fit });
  }
  const sorted = found.map((each) => each.fit.residualSd).sort((a, b) => a - b);
  const usual = sorted[Math.floor(sorted.length / 4)] ?? 0;
  const first = found.find((each) => each.fit.residualSd <= AS_GOOD * usual);
  return first ? { windowS: [first.fit.originS, first.fit.endS], fit: first.fit } : null;
}
