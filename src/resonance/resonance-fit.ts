import { InputError } from '../errors.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import { assembleFit, type FitFrame, refusedFit } from './fit-report.ts';
import { solveFit } from './fit-solve.ts';
import { gatherObservations } from './observations.ts';
import { layoutParameters } from './parameter-layout.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import { defaultMode, type ResonancePoint } from './resonance-points.ts';
import { missingBeforeFit } from './sufficient-data.ts';
import { missingAfterFit } from './sufficient-fit.ts';
import { weighFit } from './weighed-fit.ts';

/**
 * Fits a resonance to dwells: amplitude, lag or both against drive frequency, each weighted by its independent
 * standard uncertainty. Start values are found from the dwells. Data that do not determine the resonance are
 * answered by `missing`, a sentence, with null numbers.
 *
 * @throws InputError where an option is out of range
 */
export function fitResonance(points: readonly ResonancePoint[], options: ResonanceFitOptions): ResonanceFit {
  checkOptions(options);
  const mode = options.mode ?? defaultMode(points);
  const model = { excitation: options.excitation, damping: options.damping ?? 'viscous' } as const;
  const terms = { rigidOffset: options.rigidOffset ?? false, slowResidual: options.slowResidual ?? false };
  const observations = gatherObservations(points, mode);
  const layout = layoutParameters(model, mode, terms, middleOf(observations.driveHz));
  const frame: FitFrame = { points, observations, options, mode, layout };

  const before = missingBeforeFit(observations, layout, mode);
  if (before !== null) return refusedFit(frame, before, null);
  const solved = solveFit(layout, observations);
  if (solved === null || !solved.solution.converged) {
    return refusedFit(frame, missingAfterFit(solved, null, observations, mode), solved);
  }
  const weighed = weighFit(solved, observations, options);
  const after = missingAfterFit(weighed.fit, weighed.covariance, observations, mode);
  return after === null ? assembleFit(frame, weighed) : refusedFit(frame, after, weighed.fit);
}

/** Middle of the range, where the slow residual is zero; 1 where there is nothing. */
function middleOf(driveHz: Float64Array): number {
  return driveHz.length === 0 ? 1 : (Math.min(...driveHz) + Math.max(...driveHz)) / 2;
}

function checkOptions({ commonRelativeU, confidence, movingMassKg }: ResonanceFitOptions): void {
  if (commonRelativeU !== undefined && !(commonRelativeU >= 0 && Number.isFinite(commonRelativeU))) {
    throw new InputError(`The common relative uncertainty must be 0 or more, not ${commonRelativeU}.`);
  }
  if (confidence !== undefined && !(confidence > 0 && confidence < 1)) {
    throw new InputError(`The coverage of the intervals must lie between 0 and 1, not ${confidence}.`);
  }
  if (movingMassKg !== undefined && !(movingMassKg.value > 0 && Number.isFinite(movingMassKg.value))) {
    throw new InputError(`The moving mass must be above 0 kg, not ${movingMassKg.value}.`);
  }
}
