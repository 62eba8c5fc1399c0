import { type Measured, measured } from '../numeric/measured.ts';
import { springMassShare } from './spring-mass-share.ts';
import { fitStraightLine, type StraightLine } from './straight-line-york.ts';

/** Natural frequency of one configuration with a known mass on the moving part. */
export interface MassPoint {
  readonly label: string;
  /** Mass in kg: the added mass, or the moving mass as weighed; the same meaning for every point. */
  readonly massKg: number;
  /** Standard uncertainty of that mass from its own weighing, kg; 0 where exact. */
  readonly uMassKg?: number;
  /** Undamped natural frequency, Hz, with its independent standard uncertainty. */
  readonly naturalHz: Measured;
}

/** What is known beside the points. Relative uncertainties are fractions (0.001 is 0.1 %), k = 1. */
export interface MassComparisonOptions {
  /** Relative uncertainty that all frequencies share, such as the generator's or the camera's clock. */
  readonly commonFrequencyU?: number;
  /** Relative uncertainty that all masses share, such as the balance's calibration. */
  readonly commonMassU?: number;
  /** Mass of the spring(s) between fixed end and load, kg: its moving share is then taken out, load by load. */
  readonly springMassKg?: number;
}

/**
 * Stiffness and effective mass from 1/f^2 against mass: 1/f^2 = (4 pi^2 / k)(mass + effective mass).
 * With added masses the effective mass is all that moves in the bare assembly; with weighed moving masses it is
 * what moves beside them, such as a share of the springs.
 */
export interface MassComparison {
  /** The line of 1/f^2 in s^2 against mass in kg; x is mass plus the spring's share where that is taken out. */
  readonly line: StraightLine;
  readonly stiffnessNPerM: Measured;
  readonly effectiveMassKg: Measured;
  /** Correlation coefficient of the two; null where either has no uncertainty. */
  readonly correlation: number | null;
  /** Effective mass without the springs' moving share; null without a spring mass. */
  readonly massBesideSpringKg: Measured | null;
  /** Smallest and largest moving share of the spring's mass over the points; null without a spring mass. */
  readonly springShare: readonly [number, number] | null;
  readonly notes: readonly string[];
}

/** Either the comparison, or null with the sentence that says what is missing. */
export type MassComparisonOutcome =
  | { readonly comparison: MassComparison; readonly reason: null }
  | { readonly comparison: null; readonly reason: string };

interface UsablePoint {
  massKg: number;
  uMassKg: number;
  periodSquared: number;
  uPeriodSquared: number | null;
}

function usable(points: readonly MassPoint[]): UsablePoint[] {
  return points.flatMap(({ massKg, uMassKg, naturalHz: { value, u } }) => {
    if (value === null || value <= 0 || !Number.isFinite(massKg)) return [];
    return [
      {
        massKg,
        uMassKg: uMassKg ?? 0,
        periodSquared: value ** -2,
        uPeriodSquared: u === null ? null : (2 * u) / value ** 3,
      },
    ];
  });
}

/** Moving share of the springs' mass at each point, kg, for a load of its mass and what else moves. */
const sharesOf = (points: readonly UsablePoint[], springMassKg: number, besideKg: number): number[] =>
  points.map(({ massKg }) => springMassShare(springMassKg, Math.max(massKg + besideKg, 0)).effectiveKg);

/**
 * Finds stiffness and effective moving mass from natural frequencies with different masses.
 *
 * The line is fitted with errors in both coordinates; a scatter beyond them widens the uncertainties and is told.
 * Damping, stiffness and spring must be the same in all points. Where the spring's mass is given its moving share,
 * which depends a little on the load, is computed for each load and taken out, so that k is free of its bias.
 *
 * @returns null with a sentence where the points do not determine them
 * Source: f = sqrt(k / m) / (2 pi); covariance by the law of propagation, JCGM 100:2008, 5.2.
 */
export function compareMasses(
  points: readonly MassPoint[],
  options: MassComparisonOptions = {},
): MassComparisonOutcome {
  const kept = usable(points);
  const missing = points.filter((point) => point.naturalHz.value === null).map((point) => point.label);
  const lacking = missing.length > 0 ? ` No natural frequency: ${missing.join(', ')}.` : '';
  if (kept.length < 2)
    return {
      comparison: null,
      reason: `Stiffness and effective mass need natural frequencies with at least two different masses; there ${kept.length === 1 ? 'is one' : 'are none'}.${lacking}`,
    };
  const allU = kept.every((point) => point.uPeriodSquared !== null && point.uPeriodSquared > 0);
  const fitWith = (shareKg: readonly number[]) =>
    fitStraightLine(
      {
        x: kept.map((point, i) => point.massKg + (shareKg[i] ?? 0)),
        y: kept.map((point) => point.periodSquared),
        ...(allU && {
          uX: kept.map((point) => point.uMassKg),
          uY: kept.map((point) => point.uPeriodSquared ?? 0),
        }),
      },
      { scatter: 'widen', xName: 'mass' },
    );

  // the springs' share depends on the load, the load on what moves beside the masses: a few rounds settle both
  const springMassKg = options.springMassKg ?? 0;
  let shareKg: number[] = kept.map(() => 0);
  let outcome = fitWith(shareKg);
  for (let round = 0; springMassKg > 0 && round < 50 && outcome.line !== null; round++) {
    const previous = outcome.line.intercept / outcome.line.slope;
    shareKg = sharesOf(kept, springMassKg, round === 0 ? 0 : previous);
    outcome = fitWith(shareKg);
    if (
      outcome.line !== null &&
      Math.abs(outcome.line.intercept / outcome.line.slope - previous) < 1e-12 * springMassKg
    )
      break;
  }
  const { line } = outcome;
  if (line === null) return { comparison: null, reason: outcome.reason + lacking };
  if (!(line.slope > 0))
    return {
      comparison: null,
      reason: `1/f^2 does not grow with mass in these points, so they give no stiffness: check that the masses belong to their frequencies.${lacking}`,
    };

  const stiffness = (4 * Math.PI ** 2) / line.slope;
  const beside = line.intercept / line.slope;
  const shares = springMassKg > 0 ? shareKg.map((kg) => kg / springMassKg) : [];
  const meanShareKg = shareKg.reduce((sum, kg) => sum + kg, 0) / shareKg.length;
  const effective = beside + meanShareKg;
  const { uStiffness, uMass, correlation } = propagate(line, stiffness, beside, options);
  return {
    reason: null,
    comparison: {
      line,
      stiffnessNPerM: measured(stiffness, uStiffness),
      effectiveMassKg: measured(effective, uMass),
      correlation,
      massBesideSpringKg: springMassKg > 0 ? measured(beside, uMass) : null,
      springShare: springMassKg > 0 ? [Math.min(...shares), Math.max(...shares)] : null,
      notes: notesOn(line, { allU, lacking, springMassKg, meanShareKg, beside, uMass }),
    },
  };
}

function propagate(line: StraightLine, stiffness: number, beside: number, options: MassComparisonOptions) {
  const { slope, uSlope, uIntercept, covariance } = line;
  if (uSlope === null || uIntercept === null || covariance === null)
    return { uStiffness: null, uMass: null, correlation: null };
  const massScale = options.commonMassU ?? 0;
  const frequencyScale = options.commonFrequencyU ?? 0;
  // k = 4 pi^2 / slope grows as mass and as frequency squared when their scales are wrong; the mass as mass only
  const stiffnessVariance =
    (stiffness * uSlope) ** 2 / slope ** 2 +
    (stiffness * massScale) ** 2 +
    (2 * stiffness * frequencyScale) ** 2;
  const massVariance =
    (uIntercept ** 2 - 2 * beside * covariance + (beside * uSlope) ** 2) / slope ** 2 +
    (beside * massScale) ** 2;
  const shared =
    (-stiffness * (covariance - beside * uSlope ** 2)) / slope ** 2 + stiffness * beside * massScale ** 2;
  const correlation = shared / Math.sqrt(stiffnessVariance * massVariance);
  return {
    uStiffness: Math.sqrt(stiffnessVariance),
    uMass: Math.sqrt(massVariance),
    correlation: Number.isFinite(correlation) ? correlation : null,
  };
}

interface NoteFacts {
  allU: boolean;
  lacking: string;
  springMassKg: number;
  meanShareKg: number;
  beside: number;
  uMass: number | null;
}

function notesOn(line: StraightLine, facts: NoteFacts): string[] {
  const notes: string[] = [];
  if (facts.lacking !== '') notes.push(facts.lacking.trim());
  if (!facts.allU)
    notes.push(
      'Not every frequency has an uncertainty, so all points count alike and uncertainties come from their scatter.',
    );
  if (line.dof === 0) notes.push('Two points fit any line: a third mass would show whether the line holds.');
  if (line.widenedBy > 1)
    notes.push(
      `The points scatter about the line more than their uncertainties allow; the uncertainties are widened ${line.widenedBy.toFixed(1)} times. Something else than the mass may differ between configurations.`,
    );
  if (facts.springMassKg > 0)
    notes.push(
      `Of the spring's own ${facts.springMassKg.toPrecision(3)} kg, ${((100 * facts.meanShareKg) / facts.springMassKg).toFixed(1)} % moves with the load (between 33.3 % under a heavy load and 40.5 % under none): ${facts.meanShareKg.toPrecision(3)} kg of the effective mass.`,
    );
  if (facts.uMass !== null && facts.beside < -2 * facts.uMass)
    notes.push(
      'What moves beside the stated masses comes out negative: a mass is overstated, or counts something that does not move.',
    );
  return notes;
}
