import type { Warning } from '../numeric/warning.ts';
import { fasterRateHz } from './frame-rates.ts';

/** Where a frequency appears when sampled at a frame rate. */
export interface FoldedFrequency {
  /** Frequency at which the motion is seen, 0 to half the frame rate, Hz. */
  readonly aliasHz: number;
  /** Whole multiple of the frame rate that was taken off. */
  readonly multiple: number;
  /** Whether the picture runs backwards: the seen phase and so the seen lag have the opposite sign. */
  readonly flipped: boolean;
}

/** Periods of the alias that a window must hold for amplitude and drift to be told apart. */
const MIN_ALIAS_PERIODS = 2;

/** An alias nearer than this fraction of the frame rate to 0 or to half of it is refused whatever the length. */
const MARGIN = 0.01;

/** Highest harmonic looked for on the fundamental. */
const HARMONICS = [2, 3] as const;

/** Alias of a frequency, abs(f - fs round(f / fs)). Both in Hz, the frame rate above 0. */
export function foldFrequency(frequencyHz: number, frameRateHz: number): FoldedFrequency {
  const multiple = Math.round(frequencyHz / frameRateHz);
  const difference = frequencyHz - multiple * frameRateHz;
  return { aliasHz: Math.abs(difference), multiple, flipped: difference < 0 };
}

/** True frequency, Hz, from a measured alias and the fold of the frequency that was set. */
export function unfoldFrequency(aliasHz: number, fold: FoldedFrequency, frameRateHz: number): number {
  return fold.multiple * frameRateHz + (fold.flipped ? -aliasHz : aliasHz);
}

/** True phase or lag, any unit, from one fitted at the alias: a flipped alias reverses its sign. */
export function unfoldPhase(phase: number, fold: FoldedFrequency): number {
  return fold.flipped ? -phase : phase;
}

/** Whether a dwell of known drive frequency can be measured at this frame rate, and where it appears. */
export interface AliasJudgement {
  readonly kind: 'direct' | 'folded' | 'refused';
  readonly fold: FoldedFrequency;
  readonly warning: Warning | null;
}

/**
 * Judges a dwell of known drive frequency. Below half the frame rate it is seen as it is; above, at its
 * alias, which the known frequency unfolds. Refused where the alias comes so near to 0 (whole multiples of
 * the frame rate: the part seems to stand) or to half the frame rate (odd multiples of half: only one phase
 * of the motion is ever seen) that the window cannot tell amplitude from offset and drift.
 *
 * @param frameRateHz true capture rate, frames per second
 * @param durationS length of the window, s
 */
export function judgeAlias(frequencyHz: number, frameRateHz: number, durationS: number): AliasJudgement {
  const fold = foldFrequency(frequencyHz, frameRateHz);
  const margin = Math.max(MIN_ALIAS_PERIODS / Math.max(durationS, Number.MIN_VALUE), MARGIN * frameRateHz);
  const direct = fold.multiple === 0;
  const fromHalf = frameRateHz / 2 - fold.aliasHz;
  if ((!direct && fold.aliasHz < margin) || fromHalf < Math.min(margin, frameRateHz / 8)) {
    return { kind: 'refused', fold, warning: refused(frequencyHz, frameRateHz) };
  }
  if (direct) return { kind: 'direct', fold, warning: null };
  return {
    kind: 'folded',
    fold,
    warning: {
      code: 'alias-folded',
      sentence:
        `${number(frequencyHz)} Hz is above half of ${number(frameRateHz)} frames/s and was measured at its alias, ` +
        `${number(fold.aliasHz)} Hz, trusting the set frequency; ${fasterRateHz(frequencyHz)} frames/s would show it directly.`,
    },
  };
}

/**
 * Harmonics whose alias falls on the drive frequency's own within one line width of the window, where
 * anything but a pure sine biases the amplitude: the second at a third of the frame rate, the third at a
 * quarter of it, and their foldings.
 *
 * @returns the lowest such harmonic, or null
 */
export function harmonicOnFundamental(
  frequencyHz: number,
  frameRateHz: number,
  durationS: number,
): number | null {
  const own = foldFrequency(frequencyHz, frameRateHz).aliasHz;
  for (const order of HARMONICS) {
    const harmonic = foldFrequency(order * frequencyHz, frameRateHz);
    if (harmonic.multiple > 0 && Math.abs(harmonic.aliasHz - own) < 1 / durationS) return order;
  }
  return null;
}

/** The caution for `harmonicOnFundamental`. */
export function harmonicWarning(order: number, frequencyHz: number, frameRateHz: number): Warning {
  const name = order === 2 ? 'second' : 'third';
  return {
    code: 'harmonic-folded',
    sentence:
      `At ${number(frameRateHz)} frames/s the ${name} harmonic of ${number(frequencyHz)} Hz is seen at the drive frequency itself ` +
      'and adds to its amplitude; if the motion may not be a pure sine, film at another frame rate.',
  };
}

/**
 * What can be said of a motion whose frequency nobody set: what is seen may be an alias.
 *
 * @returns the caution; it is the caller's to show it where no drive frequency is known
 */
export function unknownFrequencyWarning(measuredHz: number, frameRateHz: number): Warning {
  const next = frameRateHz - measuredHz;
  return {
    code: 'alias-unknown',
    sentence:
      `The motion is seen at ${number(measuredHz)} Hz, but without a set frequency it cannot be told from ${number(next)} Hz or ` +
      'higher aliases; state driveHz, or film once more at another frame rate and compare.',
  };
}

function refused(frequencyHz: number, frameRateHz: number): Warning {
  return {
    code: 'alias-refused',
    sentence:
      `${number(frequencyHz)} Hz is too near a multiple of half of ${number(frameRateHz)} frames/s, so the part seems to stand or shows ` +
      `one phase only; film at ${fasterRateHz(frequencyHz)} frames/s.`,
  };
}

/** Up to four significant digits without trailing zeros. */
function number(value: number): string {
  return String(Number(value.toPrecision(4)));
}
