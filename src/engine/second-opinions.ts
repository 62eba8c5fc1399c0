import type { Measured } from '../numeric/measured.ts';
import type { FrequencyAtAmplitude } from '../resonance/amplitude-frequency.ts';
import { circleOpinion } from '../resonance/circle-resonance.ts';
import type { ResonanceFitOptions } from '../resonance/fit-options.ts';
import { readHalfPower } from '../resonance/half-power-data.ts';
import { compareModels, usualCandidates } from '../resonance/model-comparison.ts';
import { motionAmplitudes } from '../resonance/motion-amplitudes.ts';
import { findNonlinearity } from '../resonance/nonlinearity.ts';
import type { ResonanceFit } from '../resonance/resonance-fit-types.ts';
import type { ResonancePoint } from '../resonance/resonance-points.ts';
import type { Configuration } from '../testfile/schema.ts';
import type { SecondOpinions } from './results.ts';

/** Damping ratio from a damping that is a loss factor where the damping is structural. */
function asRatio(damping: Measured, structural: boolean): Measured {
  if (!structural) return damping;
  return {
    value: damping.value === null ? null : damping.value / 2,
    u: damping.u === null ? null : damping.u / 2,
  };
}

/** Everything that the same dwells say beside the fit: circle, half-power reading, other models, non-linearity. */
export function secondOpinions(
  configuration: Configuration,
  points: readonly ResonancePoint[],
  fit: ResonanceFit,
  options: ResonanceFitOptions,
  levels: readonly FrequencyAtAmplitude[],
): SecondOpinions {
  const structural = fit.model.damping === 'structural';
  const circle = points.some((point) => point.lagDeg !== null) ? circleOpinion(points, fit) : null;
  const halfPower = readHalfPower(points, fit.model);
  const { excitation, damping: _damping, rigidOffset: _offset, ...shared } = options;
  const models = compareModels(points, usualCandidates(excitation), shared);
  const directions = new Map(configuration.dwells.map((dwell) => [dwell.id, dwell.direction]));
  const stepped = points.map((point) => {
    const direction = directions.get(point.id ?? '');
    return direction ? { ...point, direction } : point;
  });
  const nonlinearity = findNonlinearity(stepped, fit, levels);
  const { peakAmplitude, peakHz } = fit.quantities;
  const inMm = fit.amplitudeUnit === 'mm';
  const motion = motionAmplitudes(inMm ? peakAmplitude : { value: null, u: null }, peakHz);
  return {
    circle: circle && {
      naturalHz: circle.naturalHz,
      dampingRatio: asRatio(circle.damping, structural),
      disagrees: circle.disagrees,
      sentence: circle.sentence,
    },
    halfPower: {
      peakHz: halfPower.peakHz,
      lowerHz: halfPower.lowerHz,
      upperHz: halfPower.upperHz,
      bandwidthHz: halfPower.bandwidthHz,
      naturalHz: halfPower.naturalHz,
      dampingRatio: asRatio(halfPower.damping, structural),
      missing: halfPower.missing,
    },
    models: {
      sentence: models.sentence,
      ranking: models.models.map((each) => ({
        model: each.description,
        delta: each.delta,
        weight: each.weight,
      })),
    },
    nonlinearity: { noticed: nonlinearity.noticed, sentences: nonlinearity.sentences },
    peakVelocityMmPerS: motion.velocityMmPerS,
    peakAccelerationMPerS2: motion.accelerationMPerS2,
    peakAccelerationG: motion.accelerationG,
  };
}
