import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import { type LagFit, lagDegrees } from '../sine/lag.ts';
import type { SineFit } from '../sine/sine-fit.ts';
import type { BestValues } from './dwell-judgement.ts';
import type { JointFit } from './joint-fit.ts';

/** Where nothing was measured. */
export const NO_VALUES: BestValues = {
  source: null,
  amplitude: NOT_MEASURED,
  lagDeg: NOT_MEASURED,
  gain: NOT_MEASURED,
  effectiveDof: null,
};

/**
 * The steady amplitude, lag and gain to go on with: from the window where it is steady, else from the joint fit where
 * it is well conditioned, else from the unsteady window, whose values are no more than a sine through what moved.
 */
export function bestValues(
  steady: boolean,
  fit: SineFit,
  lag: LagFit | null,
  joint: JointFit | null,
): BestValues {
  if (!steady && joint?.conditioned) return fromJoint(joint, lag);
  return {
    source: steady ? 'window' : 'unsteady-window',
    amplitude: measured(fit.amplitude, fit.amplitudeU),
    lagDeg: lag === null ? NOT_MEASURED : measured(lag.lagDeg, lag.lagU),
    gain: lag === null ? NOT_MEASURED : measured(lag.gain, lag.gainU),
    effectiveDof: fit.effectiveDof,
  };
}

function fromJoint(joint: JointFit, lag: LagFit | null): BestValues {
  const amplitude = measured(joint.amplitude, joint.amplitudeU);
  const { effectiveDof } = joint;
  if (lag === null) {
    return { source: 'joint-fit', amplitude, lagDeg: NOT_MEASURED, gain: NOT_MEASURED, effectiveDof };
  }
  // both phases at the same moment; the drive has no transient
  const { drive } = lag;
  const turned = 2 * Math.PI * joint.frequencyHz * (drive.referenceTimeS - joint.referenceTimeS);
  const lagU = (Math.hypot(joint.phaseU, drive.phaseU) * 180) / Math.PI;
  const gain = joint.amplitude / drive.amplitude;
  const gainU = gain * Math.hypot(joint.amplitudeU / joint.amplitude, drive.amplitudeU / drive.amplitude);
  return {
    source: 'joint-fit',
    amplitude,
    lagDeg: measured(lagDegrees(drive.phaseRad, joint.phaseRad + turned), lagU),
    gain: measured(gain, gainU),
    effectiveDof: Math.min(effectiveDof, drive.effectiveDof),
  };
}
