import type { FitMode, ResonancePoint } from './resonance-points.ts';
import { usable } from './resonance-points.ts';

/** The measured numbers of a fit, one row each: amplitudes, lags or both. */
export interface Observations {
  /** The usable points, in the order given. */
  readonly points: readonly ResonancePoint[];
  readonly driveHz: Float64Array;
  /** Row of each point's amplitude and lag, -1 where it has none in this fit. */
  readonly amplitudeRow: Int32Array;
  readonly lagRow: Int32Array;
  /** Amplitude (as given) or lag in radians of each row. */
  readonly value: Float64Array;
  /** Standard uncertainty of each row in the same unit, positive. */
  readonly u: Float64Array;
  /** Where the uncertainties come from. */
  readonly origin: 'own' | 'filled' | 'equal';
  /** What had to be assumed, as sentences. */
  readonly notes: readonly string[];
}

const DEG = Math.PI / 180;

/**
 * Picks the rows that a fit of this mode uses and settles their uncertainties.
 * Where no amplitude has an uncertainty all rows get the same (`equal`: only the scatter can tell its size);
 * where some have, the others get the largest of them. A lag without uncertainty gets the relative one of its
 * amplitude in radians, which is what noise of one size in the record gives (Kay 1993, from memory).
 */
export function gatherObservations(points: readonly ResonancePoint[], mode: FitMode): Observations {
  const used = points.filter((point) => usable(point, mode));
  const notes: string[] = [];
  const amplitudes = used.map((point) => point.amplitude.value);
  const { u: amplitudeU, origin: amplitudeOrigin } = settleAmplitudeU(used, mode, notes);
  const lagKnown = used.map((point) => positive(point.lagDeg?.u ?? null));
  const largestLagU = Math.max(0, ...lagKnown.map((u) => u ?? 0));

  const amplitudeRow = new Int32Array(used.length).fill(-1);
  const lagRow = new Int32Array(used.length).fill(-1);
  const value: number[] = [];
  const u: number[] = [];
  let derivedLagU = false;
  used.forEach((point, i) => {
    const amplitude = amplitudes[i] ?? null;
    if (mode !== 'lag' && amplitude !== null && amplitude > 0) {
      amplitudeRow[i] = value.push(amplitude) - 1;
      u.push(amplitudeU[i]!);
    }
    const lag = point.lagDeg?.value ?? null;
    if (mode !== 'amplitude' && lag !== null) {
      lagRow[i] = value.push(lag * DEG) - 1;
      const own = lagKnown[i] ?? null;
      if (own === null) derivedLagU = true;
      const relative = amplitude !== null && amplitude > 0 ? amplitudeU[i]! / amplitude : null;
      u.push(own !== null ? own * DEG : mode === 'lag' ? largestLagU * DEG || 1 : (relative ?? 1));
    }
  });
  const noLagU = largestLagU === 0;
  if (mode === 'lag' && derivedLagU) {
    notes.push(
      noLagU
        ? 'No lag has an uncertainty: all dwells weigh alike and the uncertainty comes from their scatter.'
        : 'Lags without an uncertainty were given the largest of the others.',
    );
  }
  const origin = mode === 'lag' ? (noLagU ? 'equal' : derivedLagU ? 'filled' : 'own') : amplitudeOrigin;
  return {
    points: used,
    driveHz: Float64Array.from(used, (point) => point.driveHz),
    amplitudeRow,
    lagRow,
    value: Float64Array.from(value),
    u: Float64Array.from(u),
    origin,
    notes,
  };
}

function positive(u: number | null): number | null {
  return u !== null && u > 0 && Number.isFinite(u) ? u : null;
}

function settleAmplitudeU(
  used: readonly ResonancePoint[],
  mode: FitMode,
  notes: string[],
): { u: number[]; origin: Observations['origin'] } {
  const own = used.map((point) => positive(point.amplitude.u));
  const known = own.filter((u) => u !== null);
  if (known.length === used.length) return { u: known, origin: 'own' };
  if (known.length === 0) {
    if (mode !== 'lag') {
      notes.push(
        'No amplitude has an uncertainty: all dwells weigh alike and the uncertainty comes from their scatter.',
      );
    }
    // one hundredth of the largest: only a size for the arithmetic, the scatter sets the real one
    const size = 0.01 * Math.max(0, ...used.map((point) => point.amplitude.value ?? 0));
    return { u: used.map(() => size || 1), origin: 'equal' };
  }
  const largest = Math.max(...known);
  if (mode !== 'lag') notes.push('Amplitudes without an uncertainty were given the largest of the others.');
  return { u: own.map((u) => u ?? largest), origin: 'filled' };
}
