import { InputError } from '../errors.ts';
import type { Warning } from '../numeric/warning.ts';
import {
  applyHomography,
  composeHomographies,
  directHomography,
  type Homography,
  homogeneousW,
  homographyJacobian,
  invertHomography,
  normalisation,
  refineHomography,
} from './homography.ts';
import { spansPlane } from './plane-span.ts';
import { isSeen, type PointPx, type PointTrack } from './point-track.ts';
import { DEFAULT_CLICK_U_PX } from './scale.ts';

/** A point of the plane of motion: where it is in the frame, px, and where it truly is in the plane, mm. */
export interface PlanePoint {
  readonly at: PointPx;
  readonly mm: readonly [number, number];
}

/** How well the marked points and one plane seen by a pinhole camera agree. */
export interface PlaneResidual {
  /** Root mean square distance between marked points and the plane's view, px; null with four points, which always agree. */
  readonly rmsPx: number | null;
  /** Index of the point furthest off, into the points given; null with four points. */
  readonly worstPoint: number | null;
}

/** True millimetres of any pixel in the plane of motion. */
export interface PlaneMapping {
  readonly kind: 'plane';
  /** Pixels to millimetres. */
  readonly pxToMm: Homography;
  readonly residual: PlaneResidual;
  /** The points the mapping was made of; their uncertainty is propagated from here. */
  readonly points: readonly PlanePoint[];
  /** Standard uncertainty of each coordinate of a marked point, px: the click's, or what the residuals show if more. */
  readonly pointUPx: number;
  readonly warning: Warning | null;
}

/**
 * Mapping from four or more points of the plane of motion: direct linear solution on normalised points, then
 * least squares on the pixel distances, since it is the pixels that are uncertain. More than four points give
 * a check: residuals, and a warning naming the point that does not fit.
 *
 * @param clickUPx standard uncertainty of a clicked coordinate, px
 * @throws InputError with fewer than four points, with no four of which no three are in line, or where the
 *   points cannot be one view of one plane (two of them swapped)
 */
export function planeMapping(
  points: readonly PlanePoint[],
  clickUPx: number = DEFAULT_CLICK_U_PX,
): PlaneMapping {
  if (points.length < 4) {
    throw new InputError(
      `The plane has ${points.length} points; mark four or more, spread over the plane of motion.`,
    );
  }
  if (!points.every((p) => [...p.at, ...p.mm].every(Number.isFinite))) {
    throw new InputError('Every plane point needs x and y in pixels and x and y in mm; complete the list.');
  }
  const seen = points.map((p) => p.at);
  const trueMm = points.map((p): PointPx => [p.mm[0], p.mm[1]]);
  if (!spansPlane(seen) || !spansPlane(trueMm)) {
    throw new InputError(
      'The plane points lie in line, or repeat; mark four points of which no three are in line.',
    );
  }
  const pxToMm = solve(seen, trueMm);
  requireOneView(pxToMm, seen);
  const residual = residualOf(pxToMm, points);
  const dof = 2 * points.length - 8;
  const seenUPx = residual.rmsPx === null ? 0 : residual.rmsPx * Math.sqrt(points.length / dof);
  return {
    kind: 'plane',
    pxToMm,
    residual,
    points,
    pointUPx: Math.max(clickUPx, seenUPx),
    warning: residualWarning(residual, seenUPx, clickUPx),
  };
}

/** True position in the plane, mm, of a displayed pixel. */
export function planePointMm(mapping: PlaneMapping, atPx: PointPx): PointPx {
  return applyHomography(mapping.pxToMm, atPx);
}

/** A track in pixels as a track in millimetres in the plane; gaps stay gaps. */
export function trackToPlane(trackPx: PointTrack, mapping: PlaneMapping): PointTrack {
  const x = new Float64Array(trackPx.x.length).fill(Number.NaN);
  const y = new Float64Array(trackPx.y.length).fill(Number.NaN);
  for (let i = 0; i < x.length; i++) {
    if (isSeen(trackPx, i)) [x[i], y[i]] = planePointMm(mapping, [trackPx.x[i]!, trackPx.y[i]!]);
  }
  return { timesS: trackPx.timesS, x, y };
}

/**
 * Local scale at a pixel for a motion along `direction` in the plane (mm coordinates, unit vector): mm of
 * true motion for one pixel of seen motion.
 */
export function localMmPerPx(mapping: PlaneMapping, atPx: PointPx, direction: PointPx): number {
  return localScale(mapping.pxToMm, atPx, direction);
}

/**
 * Relative standard uncertainty of the local scale, from the uncertainty of every marked point: each
 * coordinate is moved by its u, the mapping made anew, and the changes added in quadrature (law of
 * propagation with numerical sensitivities, JCGM 100, 5.1.3 note 2).
 */
export function localScaleRelU(mapping: PlaneMapping, atPx: PointPx, direction: PointPx): number {
  const reference = localMmPerPx(mapping, atPx, direction);
  const trueMm = mapping.points.map((p): PointPx => [p.mm[0], p.mm[1]]);
  let sum = 0;
  for (let k = 0; k < mapping.points.length; k++) {
    for (const axis of [0, 1] as const) {
      const scales = [-1, 1].map((sign) => {
        const moved = mapping.points.map((p, j): PointPx => {
          if (j !== k) return p.at;
          return axis === 0
            ? [p.at[0] + sign * mapping.pointUPx, p.at[1]]
            : [p.at[0], p.at[1] + sign * mapping.pointUPx];
        });
        return localScale(solve(moved, trueMm), atPx, direction);
      });
      sum += ((scales[1]! - scales[0]!) / 2) ** 2;
    }
  }
  return Math.sqrt(sum) / reference;
}

function localScale(pxToMm: Homography, atPx: PointPx, direction: PointPx): number {
  const [a, b, c, d] = homographyJacobian(pxToMm, atPx);
  const determinant = a * d - b * c;
  // pixels moved for one mm along the direction
  const px = (d * direction[0] - b * direction[1]) / determinant;
  const py = (-c * direction[0] + a * direction[1]) / determinant;
  return 1 / Math.hypot(px, py);
}

/** Pixels to millimetres, least squares in pixels: fits mm to px, where the errors are, and inverts. */
function solve(seen: readonly PointPx[], trueMm: readonly PointPx[]): Homography {
  const normalSeen = normalisation(seen);
  const normalMm = normalisation(trueMm);
  const from = trueMm.map((p) => applyHomography(normalMm, p));
  const to = seen.map((p) => applyHomography(normalSeen, p));
  const start = directHomography(from, to);
  const refined = start === null ? null : refineHomography(start, from, to);
  const inverse = refined === null ? null : invertHomography(refined.h);
  const back = invertHomography(normalMm);
  if (inverse === null || back === null) {
    throw new InputError(
      'The plane points do not determine the view; mark four points of which no three are in line.',
    );
  }
  return composeHomographies(back, composeHomographies(inverse, normalSeen));
}

/** All marked points must lie on one side of the horizon: true for any picture of one plane. */
function requireOneView(pxToMm: Homography, seen: readonly PointPx[]): void {
  const side = Math.sign(homogeneousW(pxToMm, seen[0]!));
  if (seen.every((p) => Math.sign(homogeneousW(pxToMm, p)) === side)) return;
  throw new InputError(
    'The plane points cannot be one view of one plane; two of them are likely swapped: check their mm.',
  );
}

function residualOf(pxToMm: Homography, points: readonly PlanePoint[]): PlaneResidual {
  const mmToPx = invertHomography(pxToMm);
  if (points.length === 4 || mmToPx === null) return { rmsPx: null, worstPoint: null };
  const off = points.map((p) => {
    const [x, y] = applyHomography(mmToPx, [p.mm[0], p.mm[1]]);
    return Math.hypot(x - p.at[0], y - p.at[1]);
  });
  return {
    rmsPx: Math.sqrt(off.reduce((sum, d) => sum + d * d, 0) / off.length),
    worstPoint: off.indexOf(Math.max(...off)),
  };
}

function residualWarning(residual: PlaneResidual, seenUPx: number, clickUPx: number): Warning | null {
  if (residual.worstPoint === null || seenUPx <= 3 * clickUPx) return null;
  return {
    code: 'plane-residual',
    sentence:
      `The plane points miss one plane by ${(residual.rmsPx ?? 0).toFixed(1)} px; point ${residual.worstPoint + 1} is furthest off: ` +
      'check its millimetres and mark it again.',
  };
}
