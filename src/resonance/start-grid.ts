import { shortWayRound } from './fit-problem.ts';
import { type ResonanceModel, unitValue } from './models.ts';
import type { Observations } from './observations.ts';
import type { StartPoint } from './start-quadratic.ts';

/** A start point with the static gain that suits it best and its cost (weighted sum of squares). */
export interface GridStart extends StartPoint {
  /** Negative where the response is seen with the opposite sign; 1 or -1 in lag-only fits. */
  readonly gain: number;
  readonly cost: number;
}

const BETWEEN_DWELLS = 6;
const OUTSIDE = [1.03, 1.1, 1.25, 1.5, 2];
const DAMPINGS = [3e-4, 1e-3, 3e-3, 0.006, 0.012, 0.025, 0.05, 0.1, 0.2, 0.4, 0.8];
const SPREAD = 30;

/**
 * Start values by trying natural frequencies between and around the dwells and a ladder of dampings, with the
 * static gain solved exactly at each (it is linear), and keeping the best of distinct frequencies, best first.
 * Works for every model and mode, and where noise spoils the linear starts.
 */
export function startsFromGrid(model: ResonanceModel, observations: Observations, keep = 2): GridStart[] {
  const best: GridStart[] = [];
  for (const naturalHz of candidateFrequencies(observations.driveHz)) {
    let local: GridStart | null = null;
    for (const rung of DAMPINGS) {
      const damping = model.damping === 'viscous' ? rung : 2 * rung;
      const tried = evaluateStart(model, observations, { naturalHz, damping });
      if (tried !== null && (local === null || tried.cost < local.cost)) local = tried;
    }
    if (local !== null) best.push(local);
  }
  best.sort((a, b) => a.cost - b.cost);
  const kept: GridStart[] = [];
  for (const start of best) {
    if (kept.length >= keep) break;
    const apart = kept.every((other) => Math.abs(start.naturalHz / other.naturalHz - 1) > 2 / SPREAD);
    if (apart) kept.push(start);
  }
  return kept;
}

/** Static gain and cost of a natural frequency and damping; null where the cost is not finite. */
export function evaluateStart(
  model: ResonanceModel,
  observations: Observations,
  start: StartPoint,
): GridStart | null {
  const { driveHz, amplitudeRow, lagRow, value, u } = observations;
  let modelSquare = 0;
  let modelObserved = 0;
  let observedSquare = 0;
  let lagCost = 0;
  let oppositeCost = 0;
  for (let i = 0; i < driveHz.length; i++) {
    const unit = unitValue(model, driveHz[i]!, start.naturalHz, start.damping);
    const a = amplitudeRow[i]!;
    if (a >= 0) {
      const h = Math.hypot(unit.re, unit.im) / u[a]!;
      const observed = value[a]! / u[a]!;
      modelSquare += h * h;
      modelObserved += h * observed;
      observedSquare += observed * observed;
    }
    const l = lagRow[i]!;
    if (l >= 0) {
      const difference = Math.atan2(-unit.im, unit.re) - value[l]!;
      lagCost += (shortWayRound(difference) / u[l]!) ** 2;
      oppositeCost += (shortWayRound(difference + Math.PI) / u[l]!) ** 2;
    }
  }
  const sign = oppositeCost < lagCost ? -1 : 1;
  const gain = modelSquare > 0 ? modelObserved / modelSquare : 1;
  const amplitudeCost = modelSquare > 0 ? Math.max(0, observedSquare - modelObserved * gain) : 0;
  const cost = amplitudeCost + Math.min(lagCost, oppositeCost);
  return Number.isFinite(cost) ? { ...start, gain: sign * gain, cost } : null;
}

function candidateFrequencies(driveHz: Float64Array): number[] {
  const sorted = [...new Set(driveHz)].sort((a, b) => a - b);
  const first = sorted[0]!;
  const last = sorted[sorted.length - 1]!;
  // many dwells need fewer tries between each two
  const between = Math.max(1, Math.min(BETWEEN_DWELLS, Math.round((2 * SPREAD) / sorted.length)));
  const candidates = OUTSIDE.flatMap((factor) => [first / factor, last * factor]);
  sorted.forEach((frequency, i) => {
    const gap = (sorted[i + 1] ?? frequency) - frequency;
    const steps = gap > 0 ? between : 1;
    for (let k = 0; k < steps; k++) candidates.push(frequency + (gap * k) / steps);
  });
  return candidates;
}
