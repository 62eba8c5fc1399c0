import type { Correction, KnownCorrection, Warning } from '../numeric/warning.ts';
import { rollingShutterEffect, rowPhaseDeg } from './rolling-shutter.ts';

/** Relative standard uncertainty of a stated row readout: such figures are measured by users, to some per cent. */
const READOUT_REL_U = 0.05;

/** Longest readout assumed where none is stated, s; the frame interval where that is shorter. */
const LONGEST_READOUT_S = 1 / 30;

/** Possible errors of an unknown readout below which nothing is said. */
const NEGLIGIBLE_LAG_DEG = 2;
const NEGLIGIBLE_LOSS = 0.005;

/** Where the markers are in the readout. */
export interface RowFacts {
  /** Readout, first coded row to last, s; 0 for a global shutter; null: not known. */
  readonly rowReadoutS: number | null;
  /** Whether every sample already has its row's own time (`rowTimes`). */
  readonly undone: boolean;
  /** Amplitude along the readout over the number of coded rows, 0 or more. */
  readonly amplitudeFraction: number;
  /** Readout fraction of the response at rest less that of the drive (`readoutFraction`); null without a drive marker. */
  readonly fractionDifference: number | null;
}

/** What the rolling shutter does to the lag of a dwell. */
export interface LagShift {
  /** To add to the seen lag, degrees. */
  readonly lagShiftDeg: number;
  /** Standard uncertainty of the lag from the shutter, degrees. */
  readonly lagUDeg: number;
}

const NOTHING: KnownCorrection & LagShift = { factor: 1, u: 0, lagShiftDeg: 0, lagUDeg: 0, warning: null };

/**
 * Rolling shutter of a dwell. With row times undone only the readout's own uncertainty is left. With a known
 * readout that was not undone, fundamental and lag are corrected in closed form (`rollingShutterEffect`,
 * `rowPhaseDeg`). With an unknown one nothing is corrected and the budget carries what a readout of up to the
 * frame interval (1/30 s at most) could do, as the root mean square over that range.
 *
 * @param rows null: nothing is known of the rows, and nothing is claimed of them
 */
export function rowCorrection(
  frequencyHz: number,
  frameRateHz: number,
  rows: RowFacts | null,
): Correction & LagShift {
  if (rows === null || rows.rowReadoutS === 0) return NOTHING;
  if (rows.rowReadoutS === null) return unknownReadout(frequencyHz, frameRateHz, rows);
  const fundamental = seenFundamental(frequencyHz, rows.rowReadoutS, rows.amplitudeFraction);
  if (fundamental === null) return { ...NOTHING, factor: null, u: null, warning: outrun() };
  const shift = rowPhaseDeg(frequencyHz, rows.rowReadoutS, rows.fractionDifference ?? 0);
  const factor = rows.undone ? 1 : 1 / fundamental;
  // the loss grows with the square of the readout, and so does what is left after undoing a wrong one
  const u = (rows.undone ? READOUT_REL_U ** 2 : 2 * READOUT_REL_U) * (1 / fundamental - 1);
  return {
    factor,
    u: factor * u,
    lagShiftDeg: rows.undone ? 0 : shift,
    lagUDeg: READOUT_REL_U * Math.abs(shift),
    warning: null,
  };
}

function unknownReadout(
  frequencyHz: number,
  frameRateHz: number,
  rows: RowFacts,
): KnownCorrection & LagShift {
  const longestS = Math.min(1 / frameRateHz, LONGEST_READOUT_S);
  const lagDeg = Math.abs(rowPhaseDeg(frequencyHz, longestS, rows.fractionDifference ?? 0));
  const fundamental = seenFundamental(frequencyHz, longestS, rows.amplitudeFraction);
  // where the longest readout would be outrun, the worst that leaves a sine: e = 1
  const loss = 1 / (fundamental ?? WORST_FUNDAMENTAL) - 1;
  const worthSaying = lagDeg > NEGLIGIBLE_LAG_DEG || loss > NEGLIGIBLE_LOSS;
  return {
    factor: 1,
    u: loss / Math.sqrt(5), // the loss grows with the square of a readout anywhere from 0 to the longest
    lagShiftDeg: 0,
    lagUDeg: lagDeg / Math.sqrt(3),
    warning: worthSaying ? unknown(lagDeg, loss) : null,
  };
}

/** 2 J1(1), the fundamental at the edge where the part outruns the readout. */
const WORST_FUNDAMENTAL = 0.88010117;

function seenFundamental(frequencyHz: number, readoutS: number, amplitudeFraction: number): number | null {
  if (2 * Math.PI * frequencyHz * readoutS * amplitudeFraction >= 1) return null;
  return rollingShutterEffect(frequencyHz, amplitudeFraction, readoutS).fundamental;
}

function unknown(lagDeg: number, loss: number): Warning {
  const parts = [
    ...(lagDeg > NEGLIGIBLE_LAG_DEG ? [`the lag by up to ${lagDeg.toPrecision(2)} degrees`] : []),
    ...(loss > NEGLIGIBLE_LOSS ? [`the amplitude by up to ${(100 * loss).toPrecision(2)} %`] : []),
  ];
  return {
    code: 'rolling-shutter-unknown',
    sentence:
      `The camera reads its rows one after the other, which could falsify ${parts.join(' and ')}; state rowReadout, or film ` +
      "with the motion and both markers along the picture's long side.",
  };
}

function outrun(): Warning {
  return {
    code: 'rolling-shutter-strong',
    sentence:
      'The part moves faster than the camera reads its rows, so its motion cannot be recovered; turn the camera so that the ' +
      "motion runs along the picture's long side, or film from further away.",
  };
}
