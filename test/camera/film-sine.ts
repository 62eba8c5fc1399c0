/** What a camera does to a sine along its rows: exposure and readout, by brute force. */
export interface FilmedSine {
  readonly frequencyHz: number;
  readonly frameRateHz: number;
  readonly frames: number;
  readonly exposureS: number;
  /** 0 for a global shutter. */
  readonly rowReadoutS: number;
  /** Row at rest, px, amplitude along the rows, px, and lag, rad: row = rest + amplitude cos(2 pi f t - lag). */
  readonly restPx: number;
  readonly amplitudePx: number;
  readonly lagRad: number;
}

/** Rows of the displayed frame. */
export const ROWS = 1080;

/** Points of the midpoint rule over the exposure: averages a third of a period to 1e-5. */
const POINTS = 150;

/** Frame times and the row seen in each: the marker's mean over the exposure of the row in which it is seen. */
export function filmSine(sine: FilmedSine): { timesS: Float64Array; rowPx: Float64Array } {
  const timesS = Float64Array.from({ length: sine.frames }, (_, i) => i / sine.frameRateHz);
  const w = 2 * Math.PI * sine.frequencyHz;
  const mean = (t: number): number => {
    let sum = 0;
    for (let k = 0; k < POINTS; k++) {
      sum += Math.cos(w * (t + sine.exposureS * ((k + 0.5) / POINTS - 0.5)) - sine.lagRad);
    }
    return sine.restPx + (sine.amplitudePx * sum) / POINTS;
  };
  const rowPx = timesS.map((t) => {
    let row = sine.restPx;
    for (let k = 0; k < (sine.rowReadoutS > 0 ? 12 : 1); k++)
      row = mean(t + (sine.rowReadoutS * (row + 0.5)) / ROWS);
    return row;
  });
  return { timesS, rowPx };
}
