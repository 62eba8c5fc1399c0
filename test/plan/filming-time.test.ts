import { describe, expect, it } from 'vitest';
import { correlatedNoiseFactor, filmingTime } from '../../src/plan/filming-time.ts';
import { seededNormal } from './seeded-random.ts';

describe('filming time', () => {
  it('240 frames at 60/s with noise 0.1 px: sd of the amplitude 9.12871e-3 px (Cramér-Rao, Kay 1993)', () => {
    const result = filmingTime({ driveHz: 3, frameRateHz: 60, noisePx: 0.1, uWantedPx: 9.12872e-3 });
    expect(result).toMatchObject({ frames: 240, periods: 12, limit: null });
    expect(result.filmS).toBeCloseTo(4, 12);
    expect(result.uAmplitudePx).toBeCloseTo(9.12871e-3, 8);
  });

  it('is a whole number of drive periods and never less than five', () => {
    const result = filmingTime({ driveHz: 1.62, frameRateHz: 30, noisePx: 0.03, uWantedPx: 0.1 });
    expect(result.periods).toBe(5);
    expect(result.filmS * 1.62).toBeCloseTo(5, 9);
    const fast = filmingTime({ driveHz: 20, frameRateHz: 60, noisePx: 0.03 });
    expect(fast.frames).toBeGreaterThanOrEqual(60);
    expect((fast.filmS * 20) % 1).toBeCloseTo(0, 9);
  });

  it('correlated noise, rho 0.5: variance factor 2.976506, 2.508835, 0.797039 at 0.01, 0.05, 0.2 of the frame rate', () => {
    expect(correlatedNoiseFactor(0.5, 0.6, 60)).toBeCloseTo(2.976506, 6);
    expect(correlatedNoiseFactor(0.5, 3, 60)).toBeCloseTo(2.508835, 6);
    expect(correlatedNoiseFactor(0.5, 12, 60)).toBeCloseTo(0.797039, 6);
  });

  it('seeded simulation: sine fits of clips of that length scatter as promised', () => {
    const normal = seededNormal(2);
    const driveHz = 2.3;
    const { frames, uAmplitudePx } = filmingTime({ driveHz, frameRateHz: 30, noisePx: 0.2, uWantedPx: 0.02 });
    const runs = 600;
    let squares = 0;
    for (let run = 0; run < runs; run++) {
      let [c, s] = [0, 0]; // over whole periods the fit is a projection
      for (let n = 0; n < frames; n++) {
        const w = (2 * Math.PI * driveHz * n) / 30;
        const y = 4 * Math.cos(w) + 0.2 * normal();
        c += (2 / frames) * y * Math.cos(w);
        s += (2 / frames) * y * Math.sin(w);
      }
      squares += (Math.hypot(c, s) - 4) ** 2 / runs;
    }
    expect(Math.sqrt(squares) / uAmplitudePx!).toBeGreaterThan(0.93);
    expect(Math.sqrt(squares) / uAmplitudePx!).toBeLessThan(1.07);
  });

  it('says so where the wanted uncertainty would take too long', () => {
    const result = filmingTime({ driveHz: 2, frameRateHz: 30, noisePx: 0.5, uWantedPx: 0.001 });
    expect(result.filmS).toBe(180);
    expect(result.limit).toMatch(/16667 s of film; 180 s give 0\.0096 px/);
  });

  it('refuses impossible rates as a mistake of the caller', () => {
    expect(() => filmingTime({ driveHz: 0, frameRateHz: 30, noisePx: 0.1 })).toThrow(/no filming time/);
  });
});
