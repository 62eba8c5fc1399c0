import type { LeastSquaresProblem, LeastSquaresSolution } from '../numeric/least-squares-problem.ts';
import { solveLeastSquares } from '../numeric/levenberg-marquardt.ts';
import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { fCdf } from '../numeric/quantiles.ts';
import { backboneHz, foldsOver } from './duffing-curve.ts';
import { duffingStarts, nearestBranch } from './duffing-start.ts';
import { gatherObservations, type Observations } from './observations.ts';
import { plainNumber } from './plain-number.ts';
import type { ResonancePoint } from './resonance-points.ts';
import { judgeScatter } from './scatter-judgement.ts';
import { distinctFrequencies } from './sufficient-data.ts';

/** A bent resonance fitted to the amplitudes of one configuration at one drive level. */
export interface DuffingFit {
  readonly staticGain: Measured;
  /** Natural frequency at vanishing amplitude, Hz. */
  readonly naturalHz: Measured;
  readonly dampingRatio: Measured;
  /** Hardening in 1 / amplitude^2; negative softens. */
  readonly hardening: Measured;
  /** Relative shift of the free frequency at the largest amplitude measured, against vanishing amplitude. */
  readonly relativeShift: number | null;
  /** Probability of a bending this large by chance in a straight resonance; null where unknown. */
  readonly pValue: number | null;
  /** True where the bending is significant; null where it cannot be told. */
  readonly bent: boolean | null;
  /** True where the curve found folds over: amplitudes jump, and differ between upward and downward steps. */
  readonly jumps: boolean | null;
  /** Where the estimate holds: the relative error of the backbone that higher orders would bring; null unknown. */
  readonly backboneError: number | null;
  readonly missing: string | null;
  readonly sentence: string;
}

const SIGNIFICANCE = 0.01;
// Beyond this growth of fn^2 one harmonic no longer describes the motion.
const WEAK = 0.3;

/**
 * Fits y ((1 + h y - r^2)^2 + (2 zeta r)^2) = G^2, y = A^2, to amplitudes (excitation `force` or `spring-end`,
 * viscous damping, cubic stiffness), each dwell on the branch nearest to it, so that upward and downward steps
 * may be mixed. Five distinct drive frequencies or more.
 */
export function fitDuffing(points: readonly ResonancePoint[]): DuffingFit {
  const observations = gatherObservations(points, 'amplitude');
  const count = distinctFrequencies(observations.driveHz).length;
  if (count < 5) {
    return unknown(`A bent resonance needs dwells at 5 different drive frequencies; there are ${count}.`);
  }
  const { driveHz, value, u } = observations;
  const problem = duffingProblem(observations);
  let best: LeastSquaresSolution | null = null;
  for (const start of duffingStarts(driveHz, value, u)) {
    const solution = solveLeastSquares(
      problem,
      [start.staticGain, start.naturalHz, start.dampingRatio, start.hardening],
      { maxEvaluations: 200 },
    );
    const closer =
      best === null || (solution.residualSumOfSquares ?? Infinity) < (best.residualSumOfSquares ?? Infinity);
    if (solution.converged && closer) best = solution;
  }
  if (best === null) return unknown('No bent resonance fits these amplitudes.');
  return report(best, observations);
}

function duffingProblem({ driveHz, value, u }: Observations): LeastSquaresProblem {
  const branchAt = (p: Float64Array, i: number) =>
    nearestBranch(
      { staticGain: p[0]!, naturalHz: p[1]!, dampingRatio: p[2]!, hardening: p[3]! },
      driveHz[i]!,
      value[i]!,
    );
  return {
    parameterCount: 4,
    residualCount: value.length,
    residuals(p, out) {
      for (let i = 0; i < out.length; i++) {
        const branch = branchAt(p, i);
        out[i] = branch === null ? Number.NaN : (branch.amplitude - value[i]!) / u[i]!;
      }
    },
    jacobian(p, out) {
      for (let i = 0; i < value.length; i++) {
        const branch = branchAt(p, i)!;
        const { byStaticGain, byNaturalHz, byDampingRatio, byHardening } = branch;
        out.set(
          [byStaticGain / u[i]!, byNaturalHz / u[i]!, byDampingRatio / u[i]!, byHardening / u[i]!],
          4 * i,
        );
      }
    },
  };
}

function report(solution: LeastSquaresSolution, observations: Observations): DuffingFit {
  const { parameters, residualSumOfSquares, degreesOfFreedom, unscaledCovariance } = solution;
  const [staticGain, naturalHz, damping, hardening] = Array.from(parameters) as [
    number,
    number,
    number,
    number,
  ];
  const dampingRatio = Math.abs(damping);
  const scatter = judgeScatter(observations, 'auto', residualSumOfSquares!, degreesOfFreedom);
  const factor = scatter.varianceFactor;
  const u = (j: number) =>
    factor === null || unscaledCovariance === null ? null : Math.sqrt(unscaledCovariance[5 * j]! * factor);
  const largest = Math.max(...observations.value);
  const growth = hardening * largest * largest;
  const shifted = backboneHz(naturalHz, hardening, largest);
  const relativeShift = shifted === null ? null : shifted / naturalHz - 1;
  const uHardening = u(3);
  const dof = Math.min(scatter.coverageDof, 1e6);
  const pValue =
    uHardening === null || uHardening === 0 ? null : 1 - fCdf((hardening / uHardening) ** 2, 1, dof);
  const bent = pValue === null ? null : pValue < SIGNIFICANCE;
  const curve = { staticGain: Math.abs(staticGain), naturalHz, dampingRatio, hardening };
  const jumps = bent === true ? foldsOver(curve) : bent;
  return {
    staticGain: measured(curve.staticGain, u(0)),
    naturalHz: measured(naturalHz, u(1)),
    dampingRatio: measured(dampingRatio, u(2)),
    hardening: measured(hardening, uHardening),
    relativeShift,
    pValue,
    bent,
    jumps,
    backboneError: Math.abs(growth) <= WEAK ? (growth * growth) / 48 : null,
    missing: null,
    sentence: sentenceFor(bent, hardening, relativeShift, jumps, Math.abs(growth) <= WEAK),
  };
}

function sentenceFor(
  bent: boolean | null,
  hardening: number,
  shift: number | null,
  jumps: boolean | null,
  weak: boolean,
): string {
  if (bent === null) return 'Whether the peak is bent cannot be told: the uncertainty is not known.';
  if (!bent)
    return 'The peak is straight within its uncertainty: no sign of a stiffness that changes with amplitude.';
  const kind = hardening > 0 ? 'hardens' : 'softens';
  const by =
    shift === null ? '' : `, free frequency ${plainNumber(100 * shift, 2)} % at the largest amplitude`;
  const jump = jumps ? ' The curve folds over: expect jumps, and other amplitudes on the way down.' : '';
  const limit = weak ? '' : ' The bending is too strong for this estimate; take it as a sign only.';
  return `The peak is bent: the stiffness ${kind} with amplitude${by}.${jump}${limit} Natural frequency and damping of the straight fit hold for this drive level only.`;
}

function unknown(missing: string): DuffingFit {
  return {
    staticGain: NOT_MEASURED,
    naturalHz: NOT_MEASURED,
    dampingRatio: NOT_MEASURED,
    hardening: NOT_MEASURED,
    relativeShift: null,
    pValue: null,
    bent: null,
    jumps: null,
    backboneError: null,
    missing,
    sentence: missing,
  };
}
