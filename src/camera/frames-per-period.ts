import type { Warning } from '../numeric/warning.ts';
import { fasterRateHz } from './frame-rates.ts';

/** Below this many frames a period the second harmonic is above half the frame rate. */
const MIN_FRAMES_PER_PERIOD = 4;

/** How densely a dwell is filmed. */
export interface FrameDensity {
  readonly framesPerPeriod: number;
  readonly warning: Warning | null;
}

/**
 * Frames per period of the drive. Under four, amplitude and lag are still measured (a sine of known frequency
 * needs no more), but harmonics fold and a part that strikes its stop cannot be told from one that does
 * not. Under two the dwell is folded, and `judgeAlias` speaks of that instead.
 *
 * @param frameRateHz true capture rate, frames/s
 */
export function frameDensity(frequencyHz: number, frameRateHz: number): FrameDensity {
  const framesPerPeriod = frameRateHz / frequencyHz;
  if (framesPerPeriod >= MIN_FRAMES_PER_PERIOD || framesPerPeriod < 2)
    return { framesPerPeriod, warning: null };
  return {
    framesPerPeriod,
    warning: {
      code: 'few-frames',
      sentence:
        `Only ${framesPerPeriod.toFixed(1)} frames a period: amplitude and lag hold, but striking stops and other harmonics cannot be ` +
        `seen; film at ${fasterRateHz(frequencyHz)} frames/s to see them.`,
    },
  };
}
