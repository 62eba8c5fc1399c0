import { measured, NOT_MEASURED } from '../numeric/measured.ts';
import { coverageFactor } from '../numeric/quantiles.ts';
import { akaikeCorrected } from './akaike.ts';
import { type DerivedQuantities, deriveQuantities, NOTHING_DERIVED } from './derived.ts';
import { fitIntervals, NO_INTERVALS } from './fit-intervals.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import type { SolvedFit } from './fit-solve.ts';
import { fitWarnings } from './fit-warnings.ts';
import { fittedPoints, playedDownPoints } from './fitted-points.ts';
import { testLackOfFit } from './lack-of-fit.ts';
import { formulaText, modelText } from './model-text.ts';
import type { Observations } from './observations.ts';
import type { ParameterLayout } from './parameter-layout.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import type { FitMode, ResonancePoint } from './resonance-points.ts';
import type { WeighedFit } from './weighed-fit.ts';

/** What was asked, beside which the outcome is put. */
export interface FitFrame {
  readonly points: readonly ResonancePoint[];
  readonly observations: Observations;
  readonly options: ResonanceFitOptions;
  readonly mode: FitMode;
  readonly layout: ParameterLayout;
}

const DEFAULT_CONFIDENCE = 0.95;

/** The outcome of a fit whose numbers hold. */
export function assembleFit(frame: FitFrame, weighed: WeighedFit): ResonanceFit {
  const { options, observations } = frame;
  const { fit, scatter, covariance, rowWeights, residuals } = weighed;
  const { layout, solution } = fit;
  const { parameters } = solution;
  const n = parameters.length;
  const valueAt = (j: number) => ({
    value: parameters[j]!,
    u: covariance === null ? null : Math.sqrt(covariance[j * n + j]!),
  });
  const gain = layout.gain < 0 ? null : valueAt(layout.gain);
  const damping = valueAt(layout.damping);
  const dampingKnown = damping.u === null || damping.u < damping.value;

  const points = fittedPoints(frame.points, observations, { layout, parameters, residuals, rowWeights });
  const playedDown = playedDownPoints(points);
  const quantities = deriveQuantities(layout.model, fittedTriple(layout, parameters, covariance), options);
  const k =
    scatter.varianceFactor === null
      ? null
      : coverageFactor(options.confidence ?? DEFAULT_CONFIDENCE, scatter.coverageDof);
  const commonU = Math.abs(gain?.value ?? 0) * (options.commonRelativeU ?? 0);
  return {
    ...describe(frame, fit),
    missing: null,
    dof: solution.degreesOfFreedom,
    parameters: layout.names.map((_, j) => measured(parameters[j]!, valueAt(j).u)),
    covariance,
    correlation: correlationRows(covariance, n),
    quantities: dampingKnown ? quantities : withoutDamping(quantities),
    coverageFactor: k,
    intervals:
      k === null || options.intervals === false
        ? NO_INTERVALS
        : fitIntervals(weighed, observations, k, commonU),
    scatter,
    chi2: scatter.chi2,
    aicc: akaikeCorrected(
      solution.residualSumOfSquares!,
      residuals.length,
      n,
      scatter.basis === 'scatter' ? 'scatter' : 'known',
    ),
    lackOfFit: rowWeights === null ? testLackOfFit(observations, residuals, n) : null,
    points,
    playedDown,
    warnings: fitWarnings({
      options,
      observations,
      scatter,
      dof: solution.degreesOfFreedom,
      staticGain: gain,
      damping,
      residuals,
      playedDown,
    }),
  };
}

/** The outcome of a fit that the dwells do not allow: a sentence and no numbers. */
export function refusedFit(frame: FitFrame, missing: string | null, fit: SolvedFit | null): ResonanceFit {
  const { observations, layout } = frame;
  return {
    ...describe(frame, fit),
    missing: missing ?? 'No resonance of this model fits these dwells.',
    dof: null,
    parameters: layout.names.map(() => NOT_MEASURED),
    covariance: null,
    correlation: [],
    quantities: NOTHING_DERIVED,
    coverageFactor: null,
    intervals: NO_INTERVALS,
    scatter: null,
    chi2: null,
    aicc: null,
    lackOfFit: null,
    points: fittedPoints(frame.points, observations, null),
    playedDown: [],
    warnings: observations.notes,
  };
}

function describe({ options, mode, layout, observations }: FitFrame, fit: SolvedFit | null) {
  return {
    model: layout.model,
    mode,
    amplitudeUnit: options.amplitudeUnit ?? 'mm',
    formula: formulaText(layout.model, options),
    description: modelText(layout.model, options),
    pointCount: observations.points.length,
    iterations: fit?.solution.iterations ?? 0,
    stopReason: fit?.solution.stopReason ?? null,
    layout: fit?.layout ?? layout,
    parameterNames: layout.names,
    confidence: options.confidence ?? DEFAULT_CONFIDENCE,
  } as const;
}

/** Static gain, natural frequency and damping with their part of the covariance. */
function fittedTriple(layout: ParameterLayout, parameters: Float64Array, covariance: Float64Array | null) {
  const at = [layout.gain, layout.naturalHz, layout.damping];
  const n = parameters.length;
  const part =
    covariance === null
      ? null
      : Float64Array.from({ length: 9 }, (_, i) => {
          const a = at[Math.floor(i / 3)]!;
          const b = at[i % 3]!;
          return a < 0 || b < 0 ? 0 : covariance[a * n + b]!;
        });
  return {
    staticGain: layout.gain < 0 ? null : parameters[layout.gain]!,
    naturalHz: parameters[layout.naturalHz]!,
    damping: parameters[layout.damping]!,
    covariance: part,
  };
}

function correlationRows(covariance: Float64Array | null, n: number): number[][] {
  if (covariance === null) return [];
  return Array.from({ length: n }, (_, a) =>
    Array.from({ length: n }, (_, b) =>
      a === b ? 1 : covariance[a * n + b]! / Math.sqrt(covariance[a * n + a]! * covariance[b * n + b]!),
    ),
  );
}

/** A damping lost in its uncertainty takes with it all that is made from it. */
function withoutDamping(quantities: DerivedQuantities): DerivedQuantities {
  const { naturalHz, staticGain, stiffnessNPerM } = quantities;
  return { ...NOTHING_DERIVED, naturalHz, staticGain, stiffnessNPerM };
}
