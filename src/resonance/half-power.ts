import { curveCrossings, curvePeak, curveShape } from './curve-shape.ts';
import type { ResonanceModel } from './models.ts';

/** Natural frequency and damping read from the two half-power frequencies. */
export interface HalfPowerResult {
  readonly naturalHz: number;
  /** Damping ratio (viscous) or loss factor (structural). */
  readonly damping: number;
}

/**
 * Inverts the half-power points of a displacement amplitude curve without the small-damping approximation.
 * For a force with viscous damping: zeta = sin(atan((f2^2 - f1^2)/(f2^2 + f1^2)) / 2) and
 * fn^2 = (f1^2 + f2^2) / (2 (1 - 2 zeta^2)). Null where no damping of this model gives these points.
 *
 * @param lowerHz frequency below the peak at 1/sqrt 2 of the peak amplitude; `upperHz` the one above it
 * Source: solved from the closed-form half-power points of the force curve; relative motion and unbalance
 * follow by r -> 1/r, absolute motion of a moved base by bisection.
 */
export function fromHalfPowerPoints(
  model: ResonanceModel,
  lowerHz: number,
  upperHz: number,
): HalfPowerResult | null {
  if (!(lowerHz > 0 && upperHz > lowerHz)) return null;
  const a = lowerHz * lowerHz;
  const b = upperHz * upperHz;
  const relative = model.excitation === 'base-relative' || model.excitation === 'unbalance';
  if (model.damping === 'viscous' && model.excitation !== 'base') {
    const damping = Math.sin(0.5 * Math.atan((b - a) / (b + a)));
    const stretch = 2 * (1 - 2 * damping * damping);
    const square = relative ? (stretch * a * b) / (a + b) : (a + b) / stretch;
    return { naturalHz: Math.sqrt(square), damping };
  }
  if (model.damping === 'structural' && !relative) {
    return { naturalHz: Math.sqrt((a + b) / 2), damping: (b - a) / (b + a) };
  }
  return byBisection(model, upperHz / lowerHz, lowerHz);
}

/** The width upper/lower grows with damping, so one value of damping fits it. */
function byBisection(model: ResonanceModel, width: number, lowerHz: number): HalfPowerResult | null {
  let low = 1e-9;
  let high = 1;
  const crossings = (damping: number) => curveCrossings(curveShape(model, damping));
  for (let pass = 0; pass < 200 && high - low > 1e-15 * high; pass++) {
    const middle = (low + high) / 2;
    const { lower, upper } = crossings(middle);
    const tooWide = lower === null || upper === null || upper / lower > width;
    if (tooWide) high = middle;
    else low = middle;
  }
  const { lower, upper } = crossings(low);
  if (lower === null || upper === null || Math.abs(upper / lower / width - 1) > 1e-6) return null;
  return { naturalHz: lowerHz / lower, damping: low };
}

/**
 * Relative bias of the classic reading zeta = (f2 - f1) / (2 f_peak) for a force with viscous damping; 0.05 means
 * 5 % too high. Null where there is no peak or no lower half-power point (zeta above 0.3827).
 * That the classic form errs is known: Papagiannopoulos and Hatzigeorgiou 2011 (abstract read).
 */
export function classicHalfPowerBias(dampingRatio: number): number | null {
  const shape = curveShape({ excitation: 'force', damping: 'viscous' }, dampingRatio);
  const peak = curvePeak(shape);
  const { lower, upper } = curveCrossings(shape);
  if (peak === null || lower === null || upper === null) return null;
  return (upper - lower) / (2 * peak.ratio * dampingRatio) - 1;
}
