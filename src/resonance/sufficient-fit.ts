import { curvePeak, curveShape } from './curve-shape.ts';
import type { SolvedFit } from './fit-solve.ts';
import type { Observations } from './observations.ts';
import { plainNumber } from './plain-number.ts';
import type { FitMode } from './resonance-points.ts';
import { distinctFrequencies } from './sufficient-data.ts';

// The peak must lie this many standard uncertainties inside the dwells' range before amplitudes alone may place it.
const BRACKET = 2;
// A natural frequency known no better than this is not known.
const LARGEST_RELATIVE_U = 0.2;
// A damping this small against the distance of the nearest dwell from the peak (relative) changes no amplitude
// by more than a few parts in ten thousand: the solver's way of saying zero.
const NO_DAMPING = 0.01;

/**
 * What is missing for the outcome of a fit to be used, as one sentence that says what to run; null where nothing
 * is: no minimum found, dwells on one flank only, natural frequency or sense of the lag not determined.
 *
 * @param covariance of the free parameters, row-major; null where no size of it is known
 */
export function missingAfterFit(
  fit: SolvedFit | null,
  covariance: Float64Array | null,
  observations: Observations,
  mode: FitMode,
): string | null {
  const frequencies = distinctFrequencies(observations.driveHz);
  const first = frequencies[0]!;
  const last = frequencies[frequencies.length - 1]!;
  const range = `between ${plainNumber(first, 4)} and ${plainNumber(last, 4)} Hz`;
  if (fit === null || !fit.solution.converged) {
    return (
      oneFlank(observations) ??
      noDamping(fit, observations.driveHz) ??
      `No resonance of this model can be found in the dwells ${range}. Add dwells on both sides of the peak, or check the excitation chosen.`
    );
  }
  const { layout, solution } = fit;
  const naturalHz = solution.parameters[layout.naturalHz]!;
  const damping = solution.parameters[layout.damping]!;
  if (mode !== 'amplitude' && damping < 0) {
    return 'The lags fall where they should rise through resonance: the response seems to lead. Check which marker is drive and which is response, and the sign of the lag.';
  }
  const n = layout.names.length;
  const u = covariance === null ? 0 : Math.sqrt(covariance[layout.naturalHz * n + layout.naturalHz]!);
  if (u > LARGEST_RELATIVE_U * naturalHz) {
    return (
      oneFlank(observations) ??
      `The dwells ${range} leave the natural frequency open by ${plainNumber((100 * u) / naturalHz, 2)} %. Add dwells nearer the peak, on both sides.`
    );
  }

  const peak = curvePeak(curveShape(layout.model, Math.abs(damping)));
  const peakHz = (peak?.ratio ?? 1) * naturalHz;
  // a lag places the resonance from one side as long as it has turned far enough
  const slack = mode === 'amplitude' ? -BRACKET * u : Math.abs(damping) * naturalHz;
  if (last < peakHz - slack) {
    return `All dwells lie below the resonance (it would be near ${plainNumber(peakHz)} Hz). Add dwells above ${plainNumber(last, 4)} Hz until the amplitude falls again.`;
  }
  if (first > peakHz + slack) {
    return `All dwells lie above the resonance (it would be near ${plainNumber(peakHz)} Hz). Add dwells below ${plainNumber(first, 4)} Hz until the amplitude falls again.`;
  }
  return null;
}

/** A fit that ran to no damping at all has a place for the peak but no dwell close enough to see its height. */
function noDamping(fit: SolvedFit | null, driveHz: Float64Array): string | null {
  if (fit === null) return null;
  const naturalHz = fit.solution.parameters[fit.layout.naturalHz]!;
  const damping = Math.abs(fit.solution.parameters[fit.layout.damping]!);
  const nearest = Math.min(...driveHz.map((f) => Math.abs(f / naturalHz - 1)));
  const inside = naturalHz > Math.min(...driveHz) && naturalHz < Math.max(...driveHz);
  if (!inside || damping > NO_DAMPING * nearest) return null;
  return `The dwells do not come close enough to the peak, near ${plainNumber(naturalHz, 4)} Hz, to show any damping. Add dwells nearer to it.`;
}

/** Sentence for amplitudes that only rise or only fall; null where they do neither. */
function oneFlank({ driveHz, amplitudeRow, value }: Observations): string | null {
  const points = [...driveHz.keys()]
    .filter((i) => amplitudeRow[i]! >= 0)
    .map((i) => ({ driveHz: driveHz[i]!, amplitude: value[amplitudeRow[i]!]! }))
    .sort((a, b) => a.driveHz - b.driveHz);
  if (points.length < 2) return null;
  const first = points[0]!;
  const last = points[points.length - 1]!;
  const largest = points.reduce((a, b) => (b.amplitude > a.amplitude ? b : a));
  if (largest.driveHz === last.driveHz) {
    return `The amplitude is largest at the highest drive frequency, ${plainNumber(last.driveHz, 4)} Hz: the peak lies above the dwells. Add dwells above it until the amplitude falls again.`;
  }
  if (largest.driveHz === first.driveHz) {
    return `The amplitude is largest at the lowest drive frequency, ${plainNumber(first.driveHz, 4)} Hz: the peak lies below the dwells. Add dwells below it until the amplitude falls again.`;
  }
  return null;
}
