import { dampedHz } from './damping-from-decay.ts';

/** How long to wait after a step of the drive frequency before filming. */
export interface WaitingTime {
  /** Seconds until the leftover has fallen to the wanted fraction of the new steady amplitude; 0 or more. */
  readonly waitS: number;
  /** The same in damped free cycles. */
  readonly cycles: number;
  /** Frequency of the beat between drive and dying free motion, Hz, and its period in s (null at exact tune). */
  readonly beatHz: number;
  readonly beatPeriodS: number | null;
}

/** What the wait depends on. */
export interface SettlingCase {
  readonly naturalHz: number;
  /** Viscous damping ratio in (0, 1). */
  readonly dampingRatio: number;
  readonly driveHz: number;
  /** Wanted leftover, a fraction of the steady amplitude, in (0, 1). */
  readonly leftover: number;
  /** Free motion at the step over the new steady amplitude; 1 where left out, as when starting from rest. */
  readonly startRatio?: number;
}

/**
 * Waiting time from the leftover wanted: the free motion dies as exp(-zeta omega_n t).
 * Amplitudes are taken only once the transient has died out (common practice).
 * @throws Error outside the stated ranges
 * Source: free decay of a viscously damped oscillator; about Q ln(1/leftover) / pi cycles.
 */
export function waitingTime({
  naturalHz,
  dampingRatio,
  driveHz,
  leftover,
  startRatio = 1,
}: SettlingCase): WaitingTime {
  if (
    !(
      naturalHz > 0 &&
      dampingRatio > 0 &&
      dampingRatio < 1 &&
      leftover > 0 &&
      leftover < 1 &&
      startRatio >= 0
    )
  )
    throw new Error(
      `no waiting time for natural frequency ${naturalHz}, damping ratio ${dampingRatio}, leftover ${leftover}, start ratio ${startRatio}`,
    );
  const freeHz = dampedHz(naturalHz, dampingRatio);
  const waitS = Math.max(Math.log(startRatio / leftover), 0) / (dampingRatio * 2 * Math.PI * naturalHz);
  const beatHz = Math.abs(driveHz - freeHz);
  return { waitS, cycles: waitS * freeHz, beatHz, beatPeriodS: beatHz > 0 ? 1 / beatHz : null };
}

/**
 * Amplitude of the free motion over the steady amplitude when a drive is switched on with the part at rest.
 *
 * @param frequencyRatio drive over natural frequency, above 0
 * @param dampingRatio in (0, 1)
 * @param steadyPhaseRad phase p of the steady motion cos(omega t - p) at the moment the drive starts (for a force
 *   that starts at its largest, p is the lag), or null for the phase that stirs up most
 * Source: initial conditions x = v = 0 on steady plus free motion (Rao, Mechanical Vibrations, from memory); the
 * largest over all phases is the larger eigenvalue of that quadratic form.
 */
export function transientFromRest(
  frequencyRatio: number,
  dampingRatio: number,
  steadyPhaseRad: number | null,
): number {
  const scale = 1 - dampingRatio ** 2;
  if (steadyPhaseRad === null) {
    const [a, b] = [1 / scale, frequencyRatio ** 2 / scale];
    const shared = (frequencyRatio * dampingRatio) / scale;
    return Math.sqrt((a + b) / 2 + Math.hypot((a - b) / 2, shared));
  }
  const atStart = Math.cos(steadyPhaseRad);
  const moving = frequencyRatio * Math.sin(steadyPhaseRad) + dampingRatio * atStart;
  return Math.hypot(atStart, moving / Math.sqrt(scale));
}

/**
 * Free motion over the new steady amplitude after the drive frequency is stepped while the part moves: at worst
 * the old motion and the new stand against each other.
 * @param fromAmplitude steady amplitude before the step, 0 for rest; same unit as `toAmplitude`, which is above 0
 */
export function startRatioAfterStep(fromAmplitude: number, toAmplitude: number): number {
  return 1 + fromAmplitude / toAmplitude;
}

/**
 * Largest amplitude on the way from rest to steady motion, over the steady amplitude: near 1 at resonance, near 2
 * far from it, where the beat first adds the free motion to the steady one.
 * Source: first crest of the envelope |1 - exp(-(alpha + i beta) t)|, where
 * alpha cos(beta t) + beta sin(beta t) = alpha exp(-alpha t).
 */
export function overshootRatio(naturalHz: number, dampingRatio: number, driveHz: number): number {
  const alpha = dampingRatio * 2 * Math.PI * naturalHz;
  const beta = 2 * Math.PI * Math.abs(driveHz - dampedHz(naturalHz, dampingRatio));
  if (beta === 0) return 1;
  const perRadian = alpha / beta;
  const rising = (phase: number) =>
    perRadian * Math.cos(phase) + Math.sin(phase) > perRadian * Math.exp(-perRadian * phase);
  let low = 0;
  let high = Math.PI;
  for (let k = 0; k < 50; k++) {
    const middle = (low + high) / 2;
    if (rising(middle)) low = middle;
    else high = middle;
  }
  const decay = Math.exp(-perRadian * low);
  return Math.hypot(1 - decay * Math.cos(low), decay * Math.sin(low));
}
