import { InputError } from '../errors.ts';
import type { Warning } from '../numeric/warning.ts';
import type { PointPx } from './point-track.ts';

/** Standard uncertainty of one clicked coordinate, px, where the user states none: half a pixel. */
export const DEFAULT_CLICK_U_PX = 0.5;

/**
 * Standard uncertainty of a rule's length where the user states none: 0.05 % of the length, at least 0.1 mm.
 * A workshop rule of 300 mm is good to a few tenths of a millimetre; a better one should be stated.
 */
export function defaultLengthUMm(lengthMm: number): number {
  return Math.max(0.1, 5e-4 * lengthMm);
}

/** Below this many pixels between the scale points, half a pixel of click error is more than 0.3 %. */
const SHORT_SCALE_PX = 200;

/** Two scale points in the frame and the true distance between them. */
export interface ScalePoints {
  readonly fromPx: PointPx;
  readonly toPx: PointPx;
  /** True distance of the two points, mm; positive. */
  readonly lengthMm: number;
  /** Standard uncertainty of the length, mm; `defaultLengthUMm` where absent. */
  readonly lengthUMm?: number | undefined;
  /** Standard uncertainty of each clicked coordinate, px; `DEFAULT_CLICK_U_PX` where absent. */
  readonly clickUPx?: number | undefined;
}

/** Millimetres per displayed pixel, with the relative standard uncertainties it brings to every amplitude. */
export interface Scale {
  readonly kind: 'uniform';
  readonly mmPerPx: number;
  /** Standard uncertainty of `mmPerPx`, mm per px: length and clicks together. */
  readonly uMmPerPx: number;
  /** u(length) / length. */
  readonly relULength: number;
  /** sqrt(2) u(click) / distance. */
  readonly relUClicks: number;
  /** Distance of the two scale points, px. */
  readonly distancePx: number;
  readonly warning: Warning | null;
}

/**
 * Scale from two points on a rule: s = L / d, (u_s / s)^2 = (u_L / L)^2 + 2 (u_click / d)^2, after the law
 * of propagation (JCGM 100, 5.1.2) with independent clicks.
 * @throws InputError where the length is not positive, an uncertainty is negative, or the points are alike.
 */
export function scaleFromPoints(points: ScalePoints): Scale {
  const { fromPx, toPx, lengthMm } = points;
  if (![...fromPx, ...toPx].every(Number.isFinite)) {
    throw new InputError(
      'Scale points need two numbers each, x and y in pixels; mark both ends of the rule again.',
    );
  }
  if (!(lengthMm > 0) || !Number.isFinite(lengthMm)) {
    throw new InputError(
      `Scale length is ${lengthMm} mm; give the true distance of the two scale points, above 0.`,
    );
  }
  const lengthUMm = points.lengthUMm ?? defaultLengthUMm(lengthMm);
  const clickUPx = points.clickUPx ?? DEFAULT_CLICK_U_PX;
  if (!(lengthUMm >= 0) || !(clickUPx >= 0) || !Number.isFinite(lengthUMm + clickUPx)) {
    throw new InputError(
      'Uncertainties of scale length and click must be 0 or more; correct lengthU or clickU.',
    );
  }
  const distancePx = Math.hypot(toPx[0] - fromPx[0], toPx[1] - fromPx[1]);
  if (distancePx < 1) {
    throw new InputError(
      `Scale points are alike (${distancePx.toFixed(2)} px apart); mark two points far apart on the rule.`,
    );
  }
  const mmPerPx = lengthMm / distancePx;
  const relULength = lengthUMm / lengthMm;
  const relUClicks = (Math.SQRT2 * clickUPx) / distancePx;
  return {
    kind: 'uniform',
    mmPerPx,
    uMmPerPx: mmPerPx * Math.hypot(relULength, relUClicks),
    relULength,
    relUClicks,
    distancePx,
    warning: distancePx < SHORT_SCALE_PX ? shortScale(distancePx, relUClicks) : null,
  };
}

function shortScale(distancePx: number, relUClicks: number): Warning {
  const percent = (100 * relUClicks).toPrecision(2);
  return {
    code: 'scale-short',
    sentence:
      `The scale points are only ${distancePx.toFixed(0)} px apart, so clicking alone leaves every amplitude ` +
      `uncertain by ${percent} %; mark points further apart on the rule.`,
  };
}

/**
 * The same scale carried to the plane of motion: mm per px multiplied by the parallax factor, the relative
 * uncertainties unchanged (that of the parallax is its own line of the budget).
 */
export function scaleInMotionPlane(scale: Scale, parallaxFactor: number): Scale {
  return {
    ...scale,
    mmPerPx: scale.mmPerPx * parallaxFactor,
    uMmPerPx: scale.uMmPerPx * parallaxFactor,
  };
}
