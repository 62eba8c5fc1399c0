import { solveSymmetric } from '../numeric/linear-algebra.ts';

// Two thirds of a second at 60 frames per second: a cycle or more of most dwells.
const MEMORY = 40;
// Three unknowns from n - 2 equations: with fewer frames noise decides.
const LEAST_FOR_RECURSION = 7;
// Intervals this close to the median count as even; phone clocks jitter by 1 % and drop whole frames.
const EVEN_WITHIN = 0.05;
// The same when only a first guess of the frequency is wanted.
const ROUGHLY_EVEN_WITHIN = 0.4;
// Frames that an unevenly timed prediction is fitted to.
const SINE_MEMORY = 24;
// No prediction moves further than the largest step seen, by this factor and this many pixels.
const STEP_FACTOR = 1.5;
const STEP_SLACK_PX = 2;

/** The coefficients of v[i] = lag1 v[i-1] + lag2 v[i-2] + constant. */
interface Recursion {
  readonly lag1: number;
  readonly lag2: number;
  readonly constant: number;
}

/**
 * Predicts where a marker will be in the next frame. With even frame times: a second-order linear recursion with
 * offset, fitted by least squares over the last frames, which is exact for any steady, growing or decaying
 * sinusoid. With uneven times: a sine through the last frames at their true times, its frequency started from
 * the recursion. With too few frames: a parabola through the last three. Times may run backwards.
 */
export class Predictor {
  private readonly times = new Float64Array(MEMORY);
  private readonly x = new Float64Array(MEMORY);
  private readonly y = new Float64Array(MEMORY);
  private count = 0;

  /** Number of frames remembered. */
  get length(): number {
    return this.count;
  }

  /** Remembers where the marker was. */
  push(timeS: number, x: number, y: number): void {
    if (this.count === MEMORY) {
      for (const series of [this.times, this.x, this.y]) series.copyWithin(0, 1);
      this.count--;
    }
    this.times[this.count] = timeS;
    this.x[this.count] = x;
    this.y[this.count] = y;
    this.count++;
  }

  /** Forgets everything, as after a loss. */
  clear(): void {
    this.count = 0;
  }

  /** The largest distance between two frames in memory, px. */
  largestStepPx(): number {
    let largest = 0;
    for (let i = 1; i < this.count; i++) {
      const dx = this.x[i]! - this.x[i - 1]!;
      const dy = this.y[i]! - this.y[i - 1]!;
      largest = Math.max(largest, dx * dx + dy * dy);
    }
    return Math.sqrt(largest);
  }

  /** Where the marker should be at `timeS`, px; null when nothing is remembered. */
  predict(timeS: number): { readonly x: number; readonly y: number } | null {
    const { count } = this;
    if (count === 0) return null;
    const last = count - 1;
    const interval = this.medianInterval();
    const limit = STEP_FACTOR * this.largestStepPx() + STEP_SLACK_PX;
    const along = (values: Float64Array): number => {
      const guess = this.predictAxis(values, timeS, interval);
      const step = guess - values[last]!;
      return values[last]! + Math.max(-limit, Math.min(limit, Number.isFinite(step) ? step : 0));
    };
    return { x: along(this.x), y: along(this.y) };
  }

  private predictAxis(values: Float64Array, timeS: number, interval: number): number {
    const { count, times } = this;
    const last = count - 1;
    if (count < LEAST_FOR_RECURSION || interval === 0) return this.parabola(values, timeS);
    const even = (to: number, from: number): boolean => Math.abs((to - from) / interval - 1) <= EVEN_WITHIN;
    if (even(timeS, times[last]!) && even(times[last]!, times[last - 1]!)) {
      const recursion = this.fitRecursion(values, interval, EVEN_WITHIN);
      if (recursion) {
        return recursion.lag1 * values[last]! + recursion.lag2 * values[last - 1]! + recursion.constant;
      }
    }
    const rough = this.fitRecursion(values, interval, ROUGHLY_EVEN_WITHIN);
    return (rough && this.sine(values, timeS, interval, rough)) ?? this.parabola(values, timeS);
  }

  private medianInterval(): number {
    const { count, times } = this;
    if (count < 2) return 0;
    const intervals = new Float64Array(count - 1);
    for (let i = 1; i < count; i++) intervals[i - 1] = times[i]! - times[i - 1]!;
    intervals.sort();
    return intervals[(count - 1) >> 1]!;
  }

  /** Least squares over all triples of evenly spaced frames; null where there are too few. */
  private fitRecursion(values: Float64Array, interval: number, within: number): Recursion | null {
    const { count, times } = this;
    let n = 0;
    let sum1 = 0;
    let sum2 = 0;
    let sum0 = 0;
    let s11 = 0;
    let s12 = 0;
    let s22 = 0;
    let s10 = 0;
    let s20 = 0;
    const middle = values[count - 1]!;
    for (let i = 2; i < count; i++) {
      const first = (times[i - 1]! - times[i - 2]!) / interval;
      const second = (times[i]! - times[i - 1]!) / interval;
      if (Math.abs(first - 1) > within || Math.abs(second - 1) > within) continue;
      const v0 = values[i]! - middle;
      const v1 = values[i - 1]! - middle;
      const v2 = values[i - 2]! - middle;
      n++;
      sum0 += v0;
      sum1 += v1;
      sum2 += v2;
      s11 += v1 * v1;
      s12 += v1 * v2;
      s22 += v2 * v2;
      s10 += v1 * v0;
      s20 += v2 * v0;
    }
    if (n < LEAST_FOR_RECURSION - 2) return null;
    s11 -= (sum1 * sum1) / n;
    s12 -= (sum1 * sum2) / n;
    s22 -= (sum2 * sum2) / n;
    s10 -= (sum1 * sum0) / n;
    s20 -= (sum2 * sum0) / n;
    // A marker at rest gives equations of noise alone; the ridge turns them into "stay where you are".
    const ridge = 1e-4 + 1e-9 * (s11 + s22);
    s11 += ridge;
    s22 += ridge;
    const determinant = s11 * s22 - s12 * s12;
    const lag1 = (s10 * s22 - s20 * s12) / determinant;
    const lag2 = (s11 * s20 - s12 * s10) / determinant;
    const constant = (sum0 - lag1 * sum1 - lag2 * sum2) / n + middle * (1 - lag1 - lag2);
    return { lag1, lag2, constant };
  }

  /** A sine through the last frames at their true times, two Gauss-Newton steps in frequency; null where none fits. */
  private sine(values: Float64Array, timeS: number, interval: number, start: Recursion): number | null {
    const { count, times } = this;
    const cosine = start.lag1 / (2 * Math.sqrt(Math.max(1e-12, -start.lag2)));
    if (!(start.lag2 < 0) || !(Math.abs(cosine) < 1)) return null;
    let omega = Math.acos(cosine) / interval;
    const from = Math.max(0, count - SINE_MEMORY);
    const origin = times[count - 1]!;
    let fitted: Float64Array | null = null;
    for (let round = 0; round < 3; round++) {
      const free = round < 2 && fitted !== null ? 4 : 3;
      const normal = new Float64Array(free * free);
      const target = new Float64Array(free);
      const row = new Float64Array(free);
      for (let i = from; i < count; i++) {
        const t = times[i]! - origin;
        row[0] = 1;
        row[1] = Math.cos(omega * t);
        row[2] = Math.sin(omega * t);
        if (fitted && free === 4) row[3] = t * (fitted[2]! * row[1] - fitted[1]! * row[2]);
        for (let a = 0; a < free; a++) {
          for (let b = 0; b < free; b++) normal[a * free + b]! += row[a]! * row[b]!;
          target[a]! += row[a]! * values[i]!;
        }
      }
      const solved = solveSymmetric(normal, free, target);
      if (!solved) break;
      fitted = solved;
      if (free === 4) omega += Math.max(-0.2 * Math.abs(omega), Math.min(0.2 * Math.abs(omega), solved[3]!));
    }
    if (!fitted) return null;
    const t = timeS - origin;
    return fitted[0]! + fitted[1]! * Math.cos(omega * t) + fitted[2]! * Math.sin(omega * t);
  }

  /** A parabola, or a line, or a point, through the last frames. */
  private parabola(values: Float64Array, timeS: number): number {
    const { count, times } = this;
    const last = count - 1;
    const c = values[last]!;
    if (count < 2 || times[last] === times[last - 1]) return c;
    const dt = timeS - times[last]!;
    const slope = (c - values[last - 1]!) / (times[last]! - times[last - 1]!);
    if (count < 3 || times[last - 1] === times[last - 2]) return c + slope * dt;
    const before = (values[last - 1]! - values[last - 2]!) / (times[last - 1]! - times[last - 2]!);
    const bend = (slope - before) / (times[last]! - times[last - 2]!);
    return c + slope * dt + bend * dt * (timeS - times[last - 1]!);
  }
}
