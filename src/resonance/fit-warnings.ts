import { chiSquareCdf } from '../numeric/quantiles.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import type { Observations } from './observations.ts';
import { plainNumber } from './plain-number.ts';
import type { PlayedDownPoint } from './resonance-fit-types.ts';
import type { ScatterJudgement } from './scatter-judgement.ts';

/** A value with its standard uncertainty, null where that is not known. */
export interface FoundValue {
  readonly value: number;
  readonly u: number | null;
}

/** What the warnings look at. */
export interface FitFindings {
  readonly options: ResonanceFitOptions;
  readonly observations: Observations;
  readonly scatter: ScatterJudgement;
  readonly dof: number;
  /** Static gain with its standard uncertainty, null in lag-only fits. */
  readonly staticGain: FoundValue | null;
  readonly damping: FoundValue;
  /** Weighted residuals (model - observed) / u, one per row. */
  readonly residuals: Float64Array;
  readonly playedDown: readonly PlayedDownPoint[];
}

// Scatter this unlikely to be so small means that the stated uncertainties are too large.
const TOO_QUIET = 0.01;
const NOTABLE_LAG_DEG = 0.3;
const NOTABLE_GAIN = 0.01;
const SIGMAS = 3;

/** Everything a reader of the fit should know, as sentences; empty where there is nothing. */
export function fitWarnings(findings: FitFindings): string[] {
  const { options, observations, scatter, dof, damping, playedDown } = findings;
  const warnings = [...observations.notes];
  if (dof === 0) {
    warnings.push(
      'As many measured numbers as parameters: the curve passes through all and cannot be checked.',
    );
  }
  if (scatter.basis === 'widened' || scatter.varianceFactor === null) warnings.push(scatter.sentence);
  if (scatter.basis === 'own' && scatter.chi2 !== null && dof > 0) {
    if (chiSquareCdf(scatter.chi2, dof) < TOO_QUIET) {
      const factor = plainNumber(Math.sqrt(scatter.chi2 / dof), 2);
      warnings.push(
        `The dwells scatter only ${factor} times as much as their own uncertainties allow: these may be too large.`,
      );
    }
  }
  if (damping.u !== null && damping.u >= damping.value) {
    warnings.push(
      'The damping cannot be told from zero: no dwell is close enough to the peak. Add dwells nearer to it.',
    );
  } else if (damping.u !== null && damping.u > damping.value / 2) {
    warnings.push('The damping is hardly known; add dwells nearer to the peak.');
  }
  for (const point of playedDown) {
    const percent = plainNumber(100 * point.weight, 2);
    warnings.push(`${capital(point.name)} lies off the curve and counts ${percent} % only.`);
  }
  if (options.movingMassKg !== undefined && options.movingMassKg.u === null) {
    warnings.push(
      'The moving mass has no uncertainty: those of stiffness and damping constant leave it out.',
    );
  }
  return [...warnings, ...gainWarnings(findings), ...lagWarnings(findings)];
}

function gainWarnings({ options, staticGain }: FitFindings): string[] {
  if (staticGain === null) return [];
  if (staticGain.value < 0) {
    return [
      'The response runs against the drive far below resonance (lag 180 degrees off): check the direction of the motion axis, or the excitation chosen.',
    ];
  }
  const moved = options.excitation === 'base' || options.excitation === 'base-relative';
  const off = Math.abs(staticGain.value - 1);
  if (options.amplitudeUnit !== 'gain' || !moved || off < NOTABLE_GAIN || off < SIGMAS * (staticGain.u ?? 0))
    return [];
  return [
    `The base should come out with a gain of 1 and comes out with ${plainNumber(staticGain.value, 4)}: check the scale of both markers and the excitation chosen.`,
  ];
}

/** A lag that is wrong by the same amount everywhere is camera timing or geometry, not damping. */
function lagWarnings({ observations, residuals, scatter }: FitFindings): string[] {
  const rows = [...observations.lagRow].filter((row) => row >= 0);
  if (rows.length < 3) return [];
  const weights = rows.map((row) => 1 / observations.u[row]! ** 2);
  const total = weights.reduce((a, b) => a + b, 0);
  const mean =
    rows.reduce((sum, row, k) => sum - weights[k]! * residuals[row]! * observations.u[row]!, 0) / total;
  const u = Math.sqrt((scatter.varianceFactor ?? 1) / total);
  const meanDeg = (mean * 180) / Math.PI;
  if (Math.abs(mean) < SIGMAS * u || Math.abs(meanDeg) < NOTABLE_LAG_DEG) return [];
  const side = meanDeg > 0 ? 'larger' : 'smaller';
  return [
    `The lags are on average ${plainNumber(Math.abs(meanDeg), 2)} degrees ${side} than the curve: is the drive marker on the part that excites, and is the row time of the shutter allowed for?`,
  ];
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
