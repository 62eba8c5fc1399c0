import {
  type AmplitudeFrequency,
  amplitudeFrequency,
  type FrequencyAtAmplitude,
} from './amplitude-frequency.ts';
import { type DuffingFit, fitDuffing } from './duffing-fit.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import type { ResonancePoint } from './resonance-points.ts';
import { compareStepDirections, type StepDirection } from './step-direction.ts';

/** A dwell that knows from which side its drive frequency was reached. */
export interface SteppedPoint extends ResonancePoint {
  readonly direction?: 'up' | 'down';
}

/** Every sign of a stiffness or damping that depends on the motion; parts that cannot be judged say why. */
export interface NonlinearityFindings {
  readonly stepDirection: StepDirection;
  /** Null where the excitation or damping is one for which no bent curve is offered. */
  readonly bending: DuffingFit | null;
  readonly amplitudeFrequency: AmplitudeFrequency;
  /** True where any sign is significant; null where nothing could be judged. */
  readonly noticed: boolean | null;
  /** The sentences of what was found, most telling first; empty where nothing was. */
  readonly sentences: readonly string[];
}

/**
 * Looks for non-linearity: upward against downward steps, a bent peak, and a natural frequency that changes with
 * amplitude.
 *
 * @param points dwells of one configuration at one drive level
 * @param fit their resonance fit; a bent curve is offered for `force` and `spring-end` with viscous damping
 * @param levels natural frequencies at other amplitudes (drive levels, stretches of a ring-down)
 */
export function findNonlinearity(
  points: readonly SteppedPoint[],
  fit: ResonanceFit,
  levels: readonly FrequencyAtAmplitude[] = [],
): NonlinearityFindings {
  const stepDirection = compareStepDirections(
    points.filter((point) => point.direction === 'up'),
    points.filter((point) => point.direction === 'down'),
  );
  const { excitation, damping } = fit.model;
  const offered = (excitation === 'force' || excitation === 'spring-end') && damping === 'viscous';
  const bending = offered ? fitDuffing(points) : null;
  const byAmplitude = amplitudeFrequency(levels);
  const signs = [
    { found: byAmplitude.changes, sentence: byAmplitude.sentence },
    { found: bending?.bent ?? null, sentence: bending?.sentence ?? '' },
    { found: stepDirection.differs, sentence: stepDirection.sentence },
  ];
  const judged = signs.filter((sign) => sign.found !== null);
  return {
    stepDirection,
    bending,
    amplitudeFrequency: byAmplitude,
    noticed: judged.length === 0 ? null : judged.some((sign) => sign.found === true),
    sentences: judged.filter((sign) => sign.found === true).map((sign) => sign.sentence),
  };
}
