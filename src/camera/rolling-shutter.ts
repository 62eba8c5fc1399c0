import { InputError } from '../errors.ts';
import { besselJ } from '../numeric/bessel-j.ts';

/** Clockwise turn, degrees, by which the coded frame is shown (the clip's rotation tag). */
export type DisplayRotationDeg = 0 | 90 | 180 | 270;

/** How the sensor's rows are read out, in terms of the frame as displayed. */
export interface RowReadout {
  /** Time from the first coded row to the last, s; 0 for a global shutter. */
  readonly rowReadoutS: number;
  /** Size of the frame as displayed, px. */
  readonly displayedWidthPx: number;
  readonly displayedHeightPx: number;
  readonly rotationDeg: DisplayRotationDeg;
}

/**
 * How far down the readout a displayed point is: 0 just before the first coded row, 1 just after the last,
 * (row + 0.5) / rows with `row` counted in the frame as coded. A clip shown turned by 90 or 270 degrees is
 * read out along the displayed x.
 */
export function readoutFraction(readout: RowReadout, xPx: number, yPx: number): number {
  const { displayedWidthPx: width, displayedHeightPx: height } = readout;
  switch (readout.rotationDeg) {
    case 0:
      return (yPx + 0.5) / height;
    case 90:
      return (width - 0.5 - xPx) / width;
    case 180:
      return (height - 0.5 - yPx) / height;
    case 270:
      return (xPx + 0.5) / width;
  }
}

/** Unit vector of the readout in the frame as displayed: the way rows follow each other in time. */
export function readoutDirection(rotationDeg: DisplayRotationDeg): readonly [number, number] {
  switch (rotationDeg) {
    case 0:
      return [0, 1];
    case 90:
      return [-1, 0];
    case 180:
      return [0, -1];
    case 270:
      return [1, 0];
  }
}

/** A frame is read before the next begins; doubled or uneven stamps leave the mean interval this uncertain. */
const LONGEST_READOUT = 1.5;

/**
 * True time of every sample of one marker: frame time + readout * (row + 0.5) / rows, with the row where the
 * marker itself was in that frame. This undoes the shutter for a moving marker too: the fundamental comes
 * back whole and the second harmonic that the shutter made is gone. The frame's time is that of the middle
 * of the exposure just above the first row; a constant offset of the file's clock does no harm.
 *
 * @param frameTimesS one per frame, s, strictly increasing
 * @param xPx yPx the marker as displayed, px, before any correction; NaN where lost
 * @returns one time per frame, strictly increasing; in a gap the row is interpolated in time between the
 *   frames around it (held at the ends), so that the clock has no holes
 * @throws InputError for a readout below 0, or one too long for frames this close together
 */
export function rowTimes(
  frameTimesS: Float64Array,
  xPx: Float64Array,
  yPx: Float64Array,
  readout: RowReadout,
): Float64Array {
  const n = frameTimesS.length;
  if (xPx.length !== n || yPx.length !== n) throw new Error('one position per frame');
  requireReadout(readout.rowReadoutS, frameTimesS);
  const fraction = Float64Array.from(xPx, (x, i) => readoutFraction(readout, x, yPx[i]!));
  fillGaps(fraction, frameTimesS);
  const times = frameTimesS.map((t, i) => t + readout.rowReadoutS * fraction[i]!);
  for (let i = 1; i < n; i++) if (!(times[i]! > times[i - 1]!)) throw tooLong(readout.rowReadoutS);
  return times;
}

function requireReadout(rowReadoutS: number, frameTimesS: Float64Array): void {
  if (!(rowReadoutS >= 0) || !Number.isFinite(rowReadoutS)) {
    throw new InputError(`rowReadout is ${rowReadoutS} s; give 0 or more, or leave it out.`);
  }
  const n = frameTimesS.length;
  const meanIntervalS = n > 1 ? (frameTimesS[n - 1]! - frameTimesS[0]!) / (n - 1) : Number.POSITIVE_INFINITY;
  if (rowReadoutS > LONGEST_READOUT * meanIntervalS) throw tooLong(rowReadoutS);
}

function tooLong(rowReadoutS: number): InputError {
  return new InputError(
    `A row readout of ${rowReadoutS} s is longer than the frames are apart; correct rowReadout (usually 0.005 to 0.03 s).`,
  );
}

/** Linear in time between seen neighbours, held at the ends, the middle of the frame where nothing was seen. */
function fillGaps(values: Float64Array, timesS: Float64Array): void {
  let last = -1;
  for (let i = 0; i <= values.length; i++) {
    if (i < values.length && !Number.isFinite(values[i])) continue;
    for (let gap = last + 1; gap < i; gap++) {
      if (last < 0 && i === values.length) values[gap] = 0.5;
      else if (last < 0) values[gap] = values[i]!;
      else if (i === values.length) values[gap] = values[last]!;
      else {
        const part = (timesS[gap]! - timesS[last]!) / (timesS[i]! - timesS[last]!);
        values[gap] = values[last]! + part * (values[i]! - values[last]!);
      }
    }
    last = i;
  }
}

/** What a rolling shutter does to a sine along its readout when it is not undone. */
export interface RollingShutterEffect {
  /** Phase that passes while the readout crosses the amplitude, rad: e = 2 pi f (time per row) (amplitude in rows). */
  readonly crossingRad: number;
  /** Seen over true fundamental, 2 J1(e) / e. */
  readonly fundamental: number;
  /** Seen second harmonic over true amplitude, J2(2e) / e; its phase is fixed, so it is no resonance of the part. */
  readonly secondHarmonic: number;
}

/**
 * Fundamental and second harmonic of y = A sin(2 pi f (t + tau y)), a sine seen through a rolling shutter
 * along its own direction: Kepler's equation with eccentricity e = 2 pi f tau A, whose series has the
 * coefficients 2 J_n(n e) / (n e). Derived here; the series is classical (Kepler's equation, from memory).
 *
 * @param amplitudeAlongReadoutPx zero to peak, px along the readout; 0 or more
 * @param rowTimeS time per coded row, s
 * @throws Error where e reaches 1: the part would outrun the readout
 */
export function rollingShutterEffect(
  frequencyHz: number,
  amplitudeAlongReadoutPx: number,
  rowTimeS: number,
): RollingShutterEffect {
  const crossingRad = 2 * Math.PI * frequencyHz * rowTimeS * amplitudeAlongReadoutPx;
  if (!(crossingRad >= 0 && crossingRad < 1))
    throw new Error(`crossing phase ${crossingRad} rad is not in [0, 1)`);
  if (crossingRad < 1e-6) return { crossingRad, fundamental: 1, secondHarmonic: crossingRad / 2 };
  return {
    crossingRad,
    fundamental: (2 * besselJ(1, crossingRad)) / crossingRad,
    secondHarmonic: besselJ(2, 2 * crossingRad) / crossingRad,
  };
}

/**
 * Phase by which a marker lower in the readout runs ahead of one higher up, degrees: 360 f (readout) (difference
 * of readout fractions). Left in, measured lag = true lag - this, for response fraction - drive fraction.
 */
export function rowPhaseDeg(frequencyHz: number, rowReadoutS: number, fractionDifference: number): number {
  return 360 * frequencyHz * rowReadoutS * fractionDifference;
}
