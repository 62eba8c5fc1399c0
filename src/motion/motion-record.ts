/**
 * Displacement of one marker along the motion axis against true time.
 * Both arrays have one entry per decoded frame, in order of time; times in seconds are strictly increasing.
 * A frame in which the marker was lost or doubtful has a displacement of NaN: it is a gap, never a guess.
 */
export interface MotionRecord {
  readonly timesS: Float64Array;
  readonly displacementMm: Float64Array;
}
