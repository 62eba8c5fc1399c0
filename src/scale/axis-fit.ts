import { type LinearFit, linearLeastSquares } from '../numeric/linear-algebra.ts';
import { isSeen, type PointTrack, seenCount } from './point-track.ts';

/** Ellipse that a marker runs: its axes as zero-to-peak amplitudes in the track's unit, and where the long one points. */
export interface FundamentalMotion {
  readonly major: number;
  readonly minor: number;
  /** Standard uncertainty of the minor amplitude. */
  readonly uMinor: number;
  /** Direction of the long axis, from +x toward +y, rad. */
  readonly angleRad: number;
  readonly uAngleRad: number;
}

/** Columns of the fit: cosine, sine, offset, linear and quadratic drift. */
const COLUMNS = 5;

/**
 * Ellipse of the motion at one frequency: both coordinates fitted by linear least squares with the sine,
 * an offset and a quadratic drift, then the principal axis of (cx, sx), (cy, sy). The angle's uncertainty
 * is that of the in-phase amplitude across the long axis over its length.
 *
 * @returns null where the fit is not determined (few frames, or a frequency at a whole multiple of half the
 *   frame rate)
 */
export function fundamentalMotion(track: PointTrack, frequencyHz: number): FundamentalMotion | null {
  const rows = seenCount(track);
  if (rows <= COLUMNS) return null;
  const { design, x, y } = designOf(track, rows, frequencyHz);
  const fitX = linearLeastSquares(design, rows, COLUMNS, x);
  const fitY = linearLeastSquares(design, rows, COLUMNS, y);
  if (fitX === null || fitY === null) return null;
  const [cx, sx] = [fitX.coefficients[0]!, fitX.coefficients[1]!];
  const [cy, sy] = [fitY.coefficients[0]!, fitY.coefficients[1]!];
  const sum = cx * cx + sx * sx + cy * cy + sy * sy;
  const difference = cx * cx + sx * sx - cy * cy - sy * sy;
  const product = 2 * (cx * cy + sx * sy);
  const spread = Math.hypot(difference, product);
  const angleRad = 0.5 * Math.atan2(product, difference);
  const major = Math.sqrt((sum + spread) / 2);
  const uAcross = acrossU(fitX, fitY, angleRad);
  return {
    major,
    minor: Math.sqrt(Math.max(0, (sum - spread) / 2)),
    uMinor: uAcross,
    angleRad,
    uAngleRad: Math.atan2(uAcross, major),
  };
}

/** Standard uncertainty of a sine's amplitude across the axis, from the residuals across it, neighbours allowed to be alike. */
function acrossU(fitX: LinearFit, fitY: LinearFit, angleRad: number): number {
  const across = fitX.residuals.map(
    (rx, i) => fitY.residuals[i]! * Math.cos(angleRad) - rx * Math.sin(angleRad),
  );
  let square = 0;
  let lagged = 0;
  for (let i = 0; i < across.length; i++) {
    square += across[i]! ** 2;
    if (i > 0) lagged += across[i]! * across[i - 1]!;
  }
  const variance = square / fitX.degreesOfFreedom;
  const rho = square > 0 ? Math.min(0.95, Math.max(0, lagged / square)) : 0;
  const perColumn = (fitX.unscaledCovariance[0]! + fitX.unscaledCovariance[COLUMNS + 1]!) / 2;
  return Math.sqrt((variance * perColumn * (1 + rho)) / (1 - rho));
}

/**
 * Principal axis of the scatter of all frames after a straight-line drift is taken off each coordinate. The
 * amplitudes are those of a sine of the same variance, sqrt(2) times the standard deviation. Angle variance
 * l1 l2 / (n (l1 - l2)^2) for scatter variances l1 > l2 (Anderson 1963, from memory).
 */
export function scatter(track: PointTrack): FundamentalMotion | null {
  const rows = seenCount(track);
  if (rows < 4) return null;
  const { design, x, y } = designOf(track, rows, 0);
  const line = new Float64Array(rows * 2);
  for (let i = 0; i < rows; i++) {
    line[2 * i] = 1;
    line[2 * i + 1] = design[i * COLUMNS + 3]!;
  }
  const restX = linearLeastSquares(line, rows, 2, x)?.residuals;
  const restY = linearLeastSquares(line, rows, 2, y)?.residuals;
  if (restX === undefined || restY === undefined) return null;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let i = 0; i < rows; i++) {
    xx += restX[i]! ** 2 / rows;
    xy += (restX[i]! * restY[i]!) / rows;
    yy += restY[i]! ** 2 / rows;
  }
  const spread = Math.hypot(xx - yy, 2 * xy);
  if (!(spread > 0)) return null;
  const large = (xx + yy + spread) / 2;
  const small = Math.max(0, (xx + yy - spread) / 2);
  return {
    major: Math.sqrt(2 * large),
    minor: Math.sqrt(2 * small),
    uMinor: Math.sqrt(small / rows),
    angleRad: 0.5 * Math.atan2(2 * xy, xx - yy),
    uAngleRad: Math.min(Math.PI / 4, Math.sqrt((large * small) / rows) / spread),
  };
}

/** Design rows (cosine, sine, 1, u, u^2 with u the time scaled to -1..1) and the seen coordinates. */
function designOf(
  track: PointTrack,
  rows: number,
  frequencyHz: number,
): { design: Float64Array; x: Float64Array; y: Float64Array } {
  const first = track.timesS[0]!;
  const last = track.timesS[track.timesS.length - 1]!;
  const middle = (first + last) / 2;
  const half = Math.max((last - first) / 2, Number.MIN_VALUE);
  const design = new Float64Array(rows * COLUMNS);
  const x = new Float64Array(rows);
  const y = new Float64Array(rows);
  let row = 0;
  for (let i = 0; i < track.timesS.length; i++) {
    if (!isSeen(track, i)) continue;
    const t = track.timesS[i]! - middle;
    design.set(
      [
        Math.cos(2 * Math.PI * frequencyHz * t),
        Math.sin(2 * Math.PI * frequencyHz * t),
        1,
        t / half,
        (t / half) ** 2,
      ],
      row * COLUMNS,
    );
    x[row] = track.x[i]!;
    y[row] = track.y[i]!;
    row++;
  }
  return { design, x, y };
}
