import { akaikeCorrected } from './akaike.ts';
import type { ResonanceFitOptions } from './fit-options.ts';
import { modelText } from './model-text.ts';
import { DAMPINGS, type Damping, type Excitation } from './models.ts';
import { plainNumber } from './plain-number.ts';
import { fitResonance } from './resonance-fit.ts';
import type { ResonanceFit } from './resonance-fit-types.ts';
import { defaultMode, type ResonancePoint } from './resonance-points.ts';

/** A model that competes for the dwells. */
export interface ModelCandidate {
  readonly excitation: Excitation;
  readonly damping: Damping;
  readonly rigidOffset?: boolean;
  readonly slowResidual?: boolean;
}

/** One candidate with its fit. */
export interface ComparedModel {
  readonly candidate: ModelCandidate;
  readonly description: string;
  readonly fit: ResonanceFit;
  /** AICc less the least one; null where the fit has no numbers or there are too few dwells for the criterion. */
  readonly delta: number | null;
  /** Akaike weight among the distinct curves in [0, 1]: how the evidence divides; null with `delta`. */
  readonly weight: number | null;
  /** Index of an earlier candidate whose curve is the same in these data; null where there is none. */
  readonly sameAs: number | null;
}

/** Candidates side by side, in the order given. */
export interface ModelComparison {
  readonly models: readonly ComparedModel[];
  /** Index of the candidate with the least AICc; null where none could be fitted. */
  readonly best: number | null;
  /** What it means, plainly. */
  readonly sentence: string;
}

// The usual reading of differences in AICc (Burnham and Anderson 2002, section 2.6; from memory).
const EQUAL = 2;
const CLEAR = 7;
const SAME = 1e-6;

/** Viscous and structural damping, each with and without a rigid offset, for one excitation. */
export function usualCandidates(excitation: Excitation): ModelCandidate[] {
  return [false, true].flatMap((rigidOffset) =>
    DAMPINGS.map((damping) => ({ excitation, damping, rigidOffset })),
  );
}

/**
 * Fits each candidate to the same dwells and ranks them by AICc. Where the dwells bring their own uncertainty and
 * no candidate explains the scatter, chi2 is divided by that of the best (quasi-likelihood), so that a scatter
 * that nothing explains does not decide for the richest model.
 *
 * @param options of the fits; excitation, damping and extra terms come from the candidates
 */
export function compareModels(
  points: readonly ResonancePoint[],
  candidates: readonly ModelCandidate[],
  options: Omit<ResonanceFitOptions, 'excitation' | 'damping'> = {},
): ModelComparison {
  const mode = options.mode ?? defaultMode(points);
  const fits = candidates.map((candidate) =>
    fitResonance(points, { ...options, ...candidate, mode, robust: false, intervals: false }),
  );
  const criteria = comparableCriteria(fits);
  const least = Math.min(...criteria.filter((value) => value !== null));
  const sameAs = fits.map((fit, i) => {
    const earlier = fits.findIndex(
      (other, k) => k < i && isSameCurve(fit, other, criteria[i]!, criteria[k]!),
    );
    return earlier < 0 ? null : earlier;
  });
  const shares = criteria.map((value, i) =>
    value === null || sameAs[i] !== null ? 0 : Math.exp(-(value - least) / 2),
  );
  const total = shares.reduce((a, b) => a + b, 0);
  const models = candidates.map((candidate, i): ComparedModel => {
    const criterion = criteria[i]!;
    const twin = sameAs[i]!;
    return {
      candidate,
      description: modelText(candidate, candidate),
      fit: fits[i]!,
      delta: criterion === null ? null : criterion - least,
      weight: criterion === null ? null : shares[twin ?? i]! / total,
      sameAs: twin,
    };
  });
  const best = criteria.indexOf(least);
  return { models, best: best < 0 ? null : best, sentence: describe(models, best) };
}

function comparableCriteria(fits: readonly ResonanceFit[]): (number | null)[] {
  const reduced = fits.flatMap((fit) =>
    fit.chi2 !== null && fit.dof !== null && fit.dof > 0 && fit.scatter?.basis === 'widened'
      ? [fit.chi2 / fit.dof]
      : [],
  );
  const fitted = fits.filter((fit) => fit.missing === null).length;
  const inflation = reduced.length === fitted && fitted > 0 ? Math.min(...reduced) : 1;
  return fits.map((fit) => {
    if (fit.missing !== null || fit.dof === null) return null;
    if (fit.chi2 === null || fit.scatter?.basis === 'scatter') return fit.aicc;
    const count = fit.parameterNames.length;
    return akaikeCorrected(fit.chi2 / inflation, fit.dof + count, count + (inflation > 1 ? 1 : 0), 'known');
  });
}

/** Force and a moved spring end, relative motion and unbalance, and more in amplitude alone, are one curve. */
function isSameCurve(a: ResonanceFit, b: ResonanceFit, ca: number | null, cb: number | null): boolean {
  if (ca === null || cb === null || Math.abs(ca - cb) > SAME * (1 + Math.abs(ca))) return false;
  if (a.parameterNames.length !== b.parameterNames.length) return false;
  const [fa, fb] = [a.quantities.naturalHz.value!, b.quantities.naturalHz.value!];
  return Math.abs(fa / fb - 1) < SAME && a.model.damping === b.model.damping;
}

function describe(models: readonly ComparedModel[], best: number): string {
  const winner = models[best];
  if (winner === undefined) {
    return 'No candidate can be compared: too few dwells for the number of parameters, or no fit.';
  }
  const twins = models.filter((model) => model.sameAs === best).map((model) => model.description);
  const rivals = models
    .filter((model, i) => i !== best && model.delta !== null && model.sameAs === null)
    .sort((a, b) => a.delta! - b.delta!);
  const verdict =
    rivals.length > 0
      ? verdictOf(winner, rivals)
      : `"${winner.description}" fits, and no other curve can be compared.`;
  const same =
    twins.length === 0
      ? ''
      : ` ${capital(twins.join('; '))} ${twins.length === 1 ? 'gives' : 'give'} the same curve: only the rig can tell.`;
  const misfit =
    winner.fit.lackOfFit !== null && winner.fit.lackOfFit.pValue < 0.05
      ? ' Even so it misses the dwells by more than chance.'
      : '';
  return `${verdict}${same}${misfit}`;
}

function verdictOf(winner: ComparedModel, rivals: readonly ComparedModel[]): string {
  const rival = rivals[0]!;
  const by = `AICc lower by ${plainNumber(rival.delta!, 2)}`;
  if (rival.delta! >= CLEAR) {
    return `The dwells speak clearly for "${winner.description}" (${by} than "${rival.description}").`;
  }
  if (rival.delta! >= EQUAL) {
    return `The dwells speak for "${winner.description}" rather than "${rival.description}", not strongly (${by}).`;
  }
  const equal = rivals.filter((model) => model.delta! < EQUAL).map((model) => `"${model.description}"`);
  return `The dwells cannot tell "${winner.description}" from ${equal.join(' or ')} (AICc within 2): choose by what the rig is, and take the simpler one in doubt.`;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
