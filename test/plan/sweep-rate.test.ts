import { describe, expect, it } from 'vitest';
import { sweepAdvice } from '../../src/plan/sweep-rate.ts';

/** Envelope of x'' + 2 zeta wn x' + wn^2 x = wn^2 exp(i phase(t)) under a linear sweep, by classical Runge-Kutta. */
function sweptPeak(
  naturalHz: number,
  dampingRatio: number,
  rateHzPerS: number,
): { ratio: number; delay: number } {
  const wn = 2 * Math.PI * naturalHz;
  const bandwidth = 2 * dampingRatio * naturalHz;
  const span = Math.min(20 * bandwidth, 0.9 * naturalHz);
  const direction = Math.sign(rateHzPerS);
  const startHz = naturalHz - direction * span;
  const endS = (span + 6 * bandwidth + 4 * Math.sqrt(Math.abs(rateHzPerS))) / Math.abs(rateHzPerS);
  const wd = 2 * Math.PI * rateHzPerS;
  // slowly varying complex amplitude: state is (re x, im x, re v, im v)
  const slope = (t: number, [xr, xi, vr, vi]: number[]): number[] => {
    const w = 2 * Math.PI * (startHz + rateHzPerS * t);
    const k = wn * wn - w * w;
    const c = 2 * dampingRatio * wn;
    // wn^2 - 2 i w v - (i wd - w^2) x - c (v + i w x) - wn^2 x
    return [
      vr!,
      vi!,
      wn * wn + 2 * w * vi! + wd * xi! - k * xr! - c * (vr! - w * xi!),
      -2 * w * vr! - wd * xr! - k * xi! - c * (vi! + w * xr!),
    ];
  };
  const w0 = 2 * Math.PI * startHz;
  const [a, b] = [wn * wn - w0 * w0, 2 * dampingRatio * wn * w0];
  let state = [(wn * wn * a) / (a * a + b * b), (-wn * wn * b) / (a * a + b * b), 0, 0];
  const dt = 0.02 / naturalHz;
  const add = (s: number[], k: number[], h: number) => s.map((value, i) => value + h * k[i]!);
  let best = 0;
  let bestHz = 0;
  for (let t = 0; t < endS; t += dt) {
    const k1 = slope(t, state);
    const k2 = slope(t + dt / 2, add(state, k1, dt / 2));
    const k3 = slope(t + dt / 2, add(state, k2, dt / 2));
    const k4 = slope(t + dt, add(state, k3, dt));
    state = state.map((value, i) => value + (dt / 6) * (k1[i]! + 2 * k2[i]! + 2 * k3[i]! + k4[i]!));
    const amplitude = Math.hypot(state[0]!, state[1]!);
    if (amplitude > best) {
      best = amplitude;
      bestHz = startHz + rateHzPerS * (t + dt);
    }
  }
  const peakHz = naturalHz * Math.sqrt(1 - 2 * dampingRatio ** 2);
  return {
    ratio: best * 2 * dampingRatio * Math.sqrt(1 - dampingRatio ** 2),
    delay: (bestHz - peakHz) / bandwidth,
  };
}

describe('sweep rate', () => {
  it('is 54 fn^2/Q^2 Hz/min, 216 fn^2 zeta^2, about 78 fn/Q^2 octaves/min (limit quoted for ISO 7626-2)', () => {
    const advice = sweepAdvice(5, 0.02, 2);
    expect(advice.fastestHzPerMin).toBeCloseTo(216 * 25 * 0.02 ** 2, 9);
    expect(advice.fastestOctavesPerMin / (5 / 25 ** 2)).toBeCloseTo(77.9, 1);
    expect(advice.sweepMin).toBeCloseTo(2 / 2.16, 9);
  });

  it.each([
    [10, 0.937, 0.953],
    [25, 0.942, 0.948],
  ])(
    'integrated at that rate with Q %d: peak %d upwards, %d downwards, 0.42 bandwidths late',
    (q, up, down) => {
      const zeta = 1 / (2 * q);
      const { fastestHzPerMin, peakDelayBandwidths, peakLoss } = sweepAdvice(10, zeta, 1);
      const upwards = sweptPeak(10, zeta, fastestHzPerMin / 60);
      const downwards = sweptPeak(10, zeta, -fastestHzPerMin / 60);
      expect(Math.abs(upwards.ratio - up)).toBeLessThan(0.003);
      expect(Math.abs(downwards.ratio - down)).toBeLessThan(0.003);
      expect(Math.abs(upwards.delay - peakDelayBandwidths)).toBeLessThan(0.02);
      expect(Math.abs(downwards.delay + peakDelayBandwidths)).toBeLessThan(0.02);
      expect(Math.abs(1 - peakLoss - (upwards.ratio + downwards.ratio) / 2)).toBeLessThan(0.003);
    },
  );

  it('refuses a system without a peak as a mistake of the caller', () => {
    expect(() => sweepAdvice(5, 0.6, 1)).toThrow(/no sweep rate/);
  });
});
