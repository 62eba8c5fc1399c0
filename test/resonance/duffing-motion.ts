/**
 * Steady amplitude of the fundamental of x'' + 2 zeta w x' + w^2 (x + beta x^3) = w^2 G cos(2 pi f t), by fourth-order
 * Runge-Kutta integration; the state is carried on from one drive frequency to the next, as stepping a rig does.
 */
export class DuffingRig {
  #x = 0;
  #v = 0;
  constructor(
    private readonly naturalHz: number,
    private readonly dampingRatio: number,
    private readonly beta: number,
    private readonly staticGain: number,
  ) {}

  /** Runs `cycles` of the drive to settle and measures the fundamental over the last eight. */
  dwell(driveHz: number, cycles = 160, stepsPerCycle = 48): number {
    const w0 = 2 * Math.PI * this.naturalHz;
    const w = 2 * Math.PI * driveHz;
    const dt = 1 / (driveHz * stepsPerCycle);
    const acceleration = (x: number, v: number, t: number) =>
      w0 * w0 * (this.staticGain * Math.cos(w * t) - x - this.beta * x * x * x) -
      2 * this.dampingRatio * w0 * v;
    let [cos, sin] = [0, 0];
    const first = (cycles - 8) * stepsPerCycle;
    for (let i = 0; i < cycles * stepsPerCycle; i++) {
      const t = i * dt;
      if (i >= first) {
        cos += this.#x * Math.cos(w * t);
        sin += this.#x * Math.sin(w * t);
      }
      const [x, v] = [this.#x, this.#v];
      const a1 = acceleration(x, v, t);
      const v2 = v + (dt / 2) * a1;
      const a2 = acceleration(x + (dt / 2) * v, v2, t + dt / 2);
      const v3 = v + (dt / 2) * a2;
      const a3 = acceleration(x + (dt / 2) * v2, v3, t + dt / 2);
      const v4 = v + dt * a3;
      const a4 = acceleration(x + dt * v3, v4, t + dt);
      this.#x = x + (dt / 6) * (v + 2 * v2 + 2 * v3 + v4);
      this.#v = v + (dt / 6) * (a1 + 2 * a2 + 2 * a3 + a4);
    }
    return (2 * Math.hypot(cos, sin)) / (8 * stepsPerCycle);
  }
}

/**
 * Exact free frequency of x'' + w^2 (x + beta x^3) = 0 at an amplitude, over the linear one: by the complete elliptic
 * integral, through the arithmetic-geometric mean (Abramowitz and Stegun 17.6, from memory).
 */
export function exactFreeRatio(beta: number, amplitude: number): number {
  const stiffened = 1 + beta * amplitude * amplitude;
  const m = (beta * amplitude * amplitude) / (2 * stiffened);
  let [a, g] = [1, Math.sqrt(1 - m)];
  for (let pass = 0; pass < 30; pass++) [a, g] = [(a + g) / 2, Math.sqrt(a * g)];
  const quarter = Math.PI / (2 * a);
  return (Math.PI * Math.sqrt(stiffened)) / (2 * quarter);
}
