/** A single-degree-of-freedom part driven by a force, its steady motion and what it began with. */
export interface Drive {
  readonly naturalHz: number;
  readonly dampingRatio: number;
  readonly driveHz: number;
  /** Steady amplitude, mm zero to peak. */
  readonly amplitude: number;
  /** Phase of the steady motion at t = 0, radians. */
  readonly phaseRad: number;
}

/** Exact displacement at time t of a start from rest at t = 0 (Rao, Mechanical Vibrations, section 3.4). */
export function startFromRest(drive: Drive): {
  at(timeS: number): number;
  transient: number;
  decayRate: number;
} {
  const w = 2 * Math.PI * drive.driveHz;
  const wn = 2 * Math.PI * drive.naturalHz;
  const wd = wn * Math.sqrt(1 - drive.dampingRatio ** 2);
  const s = drive.dampingRatio * wn;
  const { amplitude: a, phaseRad } = drive;
  const c = -a * Math.cos(phaseRad);
  const d = (a * w * Math.sin(phaseRad) + s * c) / wd;
  return {
    at: (t) =>
      a * Math.cos(w * t + phaseRad) + Math.exp(-s * t) * (c * Math.cos(wd * t) + d * Math.sin(wd * t)),
    transient: Math.hypot(c, d),
    decayRate: s,
  };
}

/** Frame times from 0 on. */
export function frames(count: number, rateHz = 60): Float64Array {
  return new Float64Array(count).map((_, i) => i / rateHz);
}
