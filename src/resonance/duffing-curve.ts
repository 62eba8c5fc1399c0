/** A hardening or softening resonance under a force, by harmonic balance. */
export interface DuffingParameters {
  /** Static deflection of the linear spring, in the amplitude's unit. */
  readonly staticGain: number;
  /** Natural frequency at vanishing amplitude, Hz. */
  readonly naturalHz: number;
  /** Viscous damping ratio at vanishing amplitude. */
  readonly dampingRatio: number;
  /**
   * Hardening, 1 / amplitude^2: fn^2 grows by this fraction per amplitude squared; negative softens. It is 3/4 of
   * the cubic stiffness over the linear one.
   */
  readonly hardening: number;
}

/** One steady amplitude with its derivatives; there are one or three at each drive frequency. */
export interface DuffingBranch {
  readonly amplitude: number;
  readonly byStaticGain: number;
  readonly byNaturalHz: number;
  readonly byDampingRatio: number;
  readonly byHardening: number;
}

/**
 * Steady amplitudes at a drive frequency, smallest first: the positive roots of
 * y ((1 + h y - r^2)^2 + (2 zeta r)^2) = G^2 with y = A^2. Of three the middle one is unstable.
 * Source: harmonic balance to first order; Nayfeh and Mook, Nonlinear Oscillations (from memory).
 */
export function duffingBranches(parameters: DuffingParameters, driveHz: number): DuffingBranch[] {
  const { staticGain, naturalHz, dampingRatio, hardening: h } = parameters;
  const w = (driveHz / naturalHz) ** 2;
  const detuning = 1 - w;
  const loss = 4 * dampingRatio * dampingRatio * w;
  const square = staticGain * staticGain;
  const roots =
    Math.abs(h) * square < 1e-14 * (detuning * detuning + loss) ** 2
      ? [square / (detuning * detuning + loss)]
      : positiveCubicRoots(h * h, 2 * h * detuning, detuning * detuning + loss, -square);
  return roots.map((y) => {
    const stiffened = detuning + h * y;
    // E(y, ...) = y (stiffened^2 + loss) - G^2 = 0; dA = dy / (2 A)
    const byY = stiffened * stiffened + loss + 2 * h * y * stiffened;
    const amplitude = Math.sqrt(y);
    const per = -1 / (2 * amplitude * byY);
    const byW = y * (-2 * stiffened + 4 * dampingRatio * dampingRatio);
    return {
      amplitude,
      byStaticGain: per * -2 * staticGain,
      byNaturalHz: (per * byW * -2 * w) / naturalHz,
      byDampingRatio: per * y * 8 * dampingRatio * w,
      byHardening: per * 2 * y * y * stiffened,
    };
  });
}

/** Backbone: frequency at which the part swings freely with an amplitude, in Hz; null where softening ends it. */
export function backboneHz(naturalHz: number, hardening: number, amplitude: number): number | null {
  const square = 1 + hardening * amplitude * amplitude;
  return square > 0 ? naturalHz * Math.sqrt(square) : null;
}

/**
 * True where the curve folds over, so that amplitudes jump: |h| G^2 > 64 zeta^3 / (3 sqrt 3), for light damping.
 * Source: folding of y ((y - s)^2 + 4 zeta^2) = h G^2, y = h A^2, worked out from the harmonic balance.
 */
export function foldsOver({ staticGain, dampingRatio, hardening }: DuffingParameters): boolean {
  return Math.abs(hardening) * staticGain ** 2 > (64 * dampingRatio ** 3) / (3 * Math.sqrt(3));
}

/** Positive real roots of a y^3 + b y^2 + c y + d, smallest first, each refined by Newton's iteration. */
function positiveCubicRoots(a: number, b: number, c: number, d: number): number[] {
  const shift = b / (3 * a);
  const p = c / a - 3 * shift * shift;
  const q = 2 * shift ** 3 - (shift * c) / a + d / a;
  const discriminant = (q * q) / 4 + (p * p * p) / 27;
  let depressed: number[];
  if (discriminant > 0) {
    const root = Math.sqrt(discriminant);
    const u = Math.cbrt(-q / 2 + (q < 0 ? root : -root));
    depressed = [u === 0 ? 0 : u - p / (3 * u)];
  } else {
    const size = 2 * Math.sqrt(Math.max(0, -p / 3));
    const angle = Math.acos(Math.min(1, Math.max(-1, size === 0 ? 0 : (3 * q) / (p * size)))) / 3;
    depressed = [0, 1, 2].map((k) => size * Math.cos(angle - (2 * Math.PI * k) / 3));
  }
  const polished = depressed.map((t) => {
    let y = t - shift;
    for (let pass = 0; pass < 3; pass++) {
      const slope = c + y * (2 * b + 3 * a * y);
      if (slope !== 0) y -= (d + y * (c + y * (b + a * y))) / slope;
    }
    return y;
  });
  return polished.filter((y) => y > 0).sort((first, second) => first - second);
}
