import type { DwellResult, Results } from '../../../src/engine/results.ts';

/** A dwell as a point of the response. */
export interface ResponsePoint {
  readonly id: string;
  readonly driveHz: number;
  /** mm zero-to-peak, or response over drive. */
  readonly amplitude: number;
  readonly amplitudeU: number | null;
  /** What of it is not shared with the other dwells: what the fit weighs by. */
  readonly independentU: number | null;
  readonly lagDeg: number | null;
  readonly lagU: number | null;
  readonly excluded: boolean;
  readonly verdict: DwellResult['verdict'];
}

/** The measured dwells of a configuration as points; as gains where the fit is of the gain. */
export function responsePoints(
  results: Results | null,
  configuration: string,
  asGain: boolean,
): ResponsePoint[] {
  const points: ResponsePoint[] = [];
  for (const each of results?.dwells ?? []) {
    if (each.configuration !== configuration) continue;
    const driveHz = each.driveHz ?? each.frequency.value;
    const size = asGain ? each.gain : each.amplitude;
    if (driveHz === null || size.value === null) continue;
    points.push({
      id: each.id,
      driveHz,
      amplitude: size.value,
      amplitudeU: size.u,
      independentU: asGain ? size.u : each.independentU,
      lagDeg: each.lag.value,
      lagU: each.lag.u,
      excluded: each.excluded !== null,
      verdict: each.verdict,
    });
  }
  return points;
}

/** From where to where a response is drawn: the points with a little room. */
export function frequencyRange(
  points: readonly ResponsePoint[],
  naturalHz: number | null,
): [number, number] | null {
  const all = [...points.map((each) => each.driveHz), ...(naturalHz === null ? [] : [naturalHz])];
  if (all.length === 0) return null;
  const [low, high] = [Math.min(...all), Math.max(...all)];
  const room = Math.max((high - low) * 0.06, high * 0.01);
  return [Math.max(low * 0.5, low - room), high + room];
}
