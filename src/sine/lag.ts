import { type Phasor, relativeNoise } from './residual-spectrum.ts';
import { presentSamples } from './samples.ts';
import type { SineFit } from './sine-fit.ts';
import { fitSineAtFrequency, type SineFitOptions } from './three-parameter.ts';

/** The response relative to the drive at one frequency. */
export interface LagFit {
  readonly frequencyHz: number;
  /** Response amplitude over drive amplitude. */
  readonly gain: number;
  readonly gainU: number;
  /** Phase by which the response follows the drive, degrees in [-90, 270); see `lagDegrees`. */
  readonly lagDeg: number;
  /** Standard uncertainty in degrees. Gain and lag are uncorrelated. */
  readonly lagU: number;
  readonly effectiveDof: number;
  readonly response: SineFit;
  readonly drive: SineFit;
}

/**
 * Lag in degrees from two phases in radians. Through a resonance it runs from 0 to 180; noise may carry it a little
 * beyond either end, so it is told in [-90, 270), with that range in the middle: -2 stays -2, 183 stays 183.
 */
export function lagDegrees(drivePhaseRad: number, responsePhaseRad: number): number {
  const degrees = ((drivePhaseRad - responsePhaseRad) * 180) / Math.PI;
  return degrees - 360 * Math.floor((degrees + 90) / 360);
}

function asPhasor(fit: SineFit): { residuals: Float64Array; phasor: Phasor } {
  const phasor = {
    real: fit.amplitude * Math.cos(fit.phaseRad),
    imaginary: fit.amplitude * Math.sin(fit.phaseRad),
  };
  return { residuals: fit.residuals, phasor };
}

/**
 * Lag and gain of a response against its drive, from sine fits of both at the same frequency over the frames in
 * which both were seen. An error of the frequency does not reach the lag, both phases being told at mid-record.
 * Noise common to both records (camera shake) is taken into account.
 *
 * @param timesS seconds, one per frame of both records; NaN displacements are gaps
 * @returns null where either fit is impossible
 */
export function fitLag(
  timesS: Float64Array,
  response: Float64Array,
  drive: Float64Array,
  frequencyHz: number,
  options: SineFitOptions = {},
): LagFit | null {
  const both = response.map((value, i) => value + 0 * drive[i]!);
  const samples = presentSamples(timesS, both);
  const driveValues = presentSamples(
    timesS,
    drive.map((value, i) => value + 0 * response[i]!),
  ).values;
  const ofResponse = fitSineAtFrequency(samples.timesS, samples.values, frequencyHz, options);
  const ofDrive = fitSineAtFrequency(samples.timesS, driveValues, frequencyHz, options);
  if (ofResponse === null || ofDrive === null) return null;

  const noise =
    options.noise === 'white'
      ? null
      : relativeNoise(samples, asPhasor(ofResponse), asPhasor(ofDrive), ofResponse.fitted, frequencyHz);
  const independent = {
    relativeU: Math.hypot(
      ofResponse.amplitudeU / ofResponse.amplitude,
      ofDrive.amplitudeU / ofDrive.amplitude,
    ),
    effectiveDof: Math.min(ofResponse.effectiveDof, ofDrive.effectiveDof),
  };
  const { relativeU, effectiveDof } =
    noise === null
      ? independent
      : {
          relativeU: Math.sqrt((2 * noise.variance) / samples.timesS.length),
          effectiveDof: Math.min(noise.effectiveDof, ofResponse.degreesOfFreedom),
        };

  const gain = ofResponse.amplitude / ofDrive.amplitude;
  return {
    frequencyHz,
    gain,
    gainU: gain * relativeU,
    lagDeg: lagDegrees(ofDrive.phaseRad, ofResponse.phaseRad),
    lagU: (relativeU * 180) / Math.PI,
    effectiveDof,
    response: ofResponse,
    drive: ofDrive,
  };
}
