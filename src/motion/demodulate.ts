import { NormalEquations } from '../numeric/normal-equations.ts';
import { medianIntervalS, type Samples, spanS } from '../sine/samples.ts';

/**
 * Complex amplitude of a motion at one frequency, block after block: motion = Re(z exp(2 pi i f (t - referenceTimeS))),
 * so a steady motion at that frequency has the same z in every block. All arrays have one entry per block.
 */
export interface PhasorSeries {
  readonly frequencyHz: number;
  readonly referenceTimeS: number;
  /** Middle of each block, seconds. */
  readonly timesS: Float64Array;
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
  /** Frames in each block. */
  readonly frames: Float64Array;
  /** Periods in each block. */
  readonly periodsPerBlock: number;
  /** Noise standard deviation of one frame, from what the blocks' own fits leave; null where nothing is left over. */
  readonly frameNoise: number | null;
}

// A block needs frames enough for a sine and an offset with something to spare.
const FEWEST_FRAMES = 8;
// A block that lost more than this share of its frames says nothing of its own.
const LEAST_SHARE_PRESENT = 0.6;
const MOST_BLOCKS = 120;

/** Whole periods per block: one where the frame rate allows, more for quick drives and long records. */
export function periodsPerBlock(samples: Samples, frequencyHz: number): number {
  const framesPerPeriod = 1 / (frequencyHz * medianIntervalS(samples));
  const periods = spanS(samples) * frequencyHz;
  return Math.max(1, Math.ceil(FEWEST_FRAMES / framesPerPeriod), Math.ceil(periods / MOST_BLOCKS));
}

/**
 * Complex demodulation at the drive frequency, by a least-squares sine and offset in each block of whole periods on
 * the frames' own times: free of the ripple at twice the frequency, and unharmed by lost frames. Blocks that lost
 * more than 40 % of their frames are left out.
 *
 * @returns null where fewer than two blocks can be formed
 */
export function demodulate(samples: Samples, frequencyHz: number): PhasorSeries | null {
  const { timesS, values } = samples;
  if (!(frequencyHz > 0) || timesS.length < FEWEST_FRAMES) return null;
  const periods = periodsPerBlock(samples, frequencyHz);
  const blockS = periods / frequencyHz;
  const startS = timesS[0]!;
  // half a frame of grace, so that rounding of the times does not cost the last block
  const count = Math.floor((spanS(samples) + 1.5 * medianIntervalS(samples)) / blockS);
  const referenceTimeS = startS + spanS(samples) / 2;
  const framesExpected = blockS / medianIntervalS(samples);

  const blocks: { time: number; real: number; imaginary: number; frames: number }[] = [];
  let leftSquares = 0;
  let leftFreedom = 0;
  const row = new Float64Array(3);
  for (let block = 0, i = 0; block < count; block++) {
    const endS = startS + (block + 1) * blockS - 1e-6 * blockS;
    const equations = new NormalEquations(3);
    let frames = 0;
    let timeSum = 0;
    for (; i < timesS.length && timesS[i]! < endS; i++) {
      const angle = 2 * Math.PI * frequencyHz * (timesS[i]! - referenceTimeS);
      row[0] = Math.cos(angle);
      row[1] = Math.sin(angle);
      row[2] = 1;
      equations.add(row, values[i]!);
      timeSum += timesS[i]!;
      frames++;
    }
    if (frames < 5 || frames < LEAST_SHARE_PRESENT * framesExpected) continue;
    const solved = equations.solve();
    if (solved === null) continue;
    blocks.push({
      time: timeSum / frames,
      real: solved.coefficients[0]!,
      imaginary: -solved.coefficients[1]!,
      frames,
    });
    leftSquares += solved.residualSumOfSquares;
    leftFreedom += frames - 3;
  }
  if (blocks.length < 2) return null;
  return {
    frequencyHz,
    referenceTimeS,
    timesS: Float64Array.from(blocks, ({ time }) => time),
    real: Float64Array.from(blocks, ({ real }) => real),
    imaginary: Float64Array.from(blocks, ({ imaginary }) => imaginary),
    frames: Float64Array.from(blocks, ({ frames }) => frames),
    periodsPerBlock: periods,
    frameNoise: leftFreedom > 0 ? Math.sqrt(leftSquares / leftFreedom) : null,
  };
}
