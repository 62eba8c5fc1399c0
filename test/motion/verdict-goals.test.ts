import { describe, expect, test } from 'vitest';
import { judgeDwell } from '../../src/motion/verdict.ts';
import { autoregressive, drifting, gaussian, uniform } from '../sine/seeded-noise.ts';

const DWELLS = 200;

/**
 * Dwells of a simulated oscillator: damping ratio 0.004 to 0.1, 1.5 to 9 Hz, driven near and away from resonance, 3 to
 * 15 s at 30 or 60 frames/s, white, correlated or drifting noise of 0.02 to 0.12 on 10 to 30, one frame in fifty lost.
 */
function dwells(seed: number, unsteady: boolean) {
  const next = uniform(seed);
  const normal = gaussian(seed + 1);
  const made: { verdict: string; amplitudeError: number }[] = [];
  while (made.length < DWELLS) {
    const dampingRatio = 0.004 * 25 ** next();
    const naturalHz = 1.5 * 6 ** next();
    const driveHz = naturalHz * (1 + (next() < 0.5 ? 0.03 : 0.3) * (2 * next() - 1));
    const rateHz = next() < 0.5 ? 30 : 60;
    const amplitude = 10 + 20 * next();
    const spanS = Math.max(4 / driveHz, 3 + 12 * next());
    const decay = dampingRatio * 2 * Math.PI * naturalHz;
    // unsteady: still more than 3 % of the amplitude where the record ends, so no part of it is steady
    const atEnd = 0.03 + 0.4 * next() ** 2;
    const leftover = unsteady ? atEnd * Math.exp(decay * spanS) : 0.003 * next();
    if (leftover > 1.5) continue;
    const count = Math.round(spanS * rateHz);
    const noise = [
      () => new Float64Array(count).map(() => normal()),
      () => autoregressive(normal, count, 0.7),
      () => drifting(normal, count, 0.15),
    ][Math.floor(3 * next())]!();
    const noiseSd = 0.02 + 0.1 * next();
    const [phase, freePhase] = [2 * Math.PI * next(), 2 * Math.PI * next()];
    const omega = 2 * Math.PI * naturalHz * Math.sqrt(1 - dampingRatio ** 2);
    const timesS = new Float64Array(count).map((_, i) => 1 + i / rateHz);
    const displacementMm = timesS.map((t, i) => {
      const steady = amplitude * Math.cos(2 * Math.PI * driveHz * t + phase);
      const free = amplitude * leftover * Math.exp(-decay * (t - 1)) * Math.cos(omega * (t - 1) + freePhase);
      return next() < 0.02 ? Number.NaN : 3 + steady + free + noiseSd * noise[i]!;
    });
    const judged = judgeDwell({ timesS, displacementMm }, { driveHz });
    const found = judged.fit?.amplitude ?? 0;
    made.push({ verdict: judged.verdict, amplitudeError: Math.abs(found / amplitude - 1) });
  }
  return made;
}

describe('goals, against simulated dwells whose truth is known', () => {
  test('none of 200 dwells with more than 3 % of transient left is called steady', () => {
    const verdicts = dwells(20, true).map(({ verdict }) => verdict);
    expect(verdicts.filter((verdict) => verdict === 'steady')).toHaveLength(0);
    // and they are judged, not given up
    expect(verdicts.filter((verdict) => verdict === 'failed' || verdict === 'lost')).toHaveLength(0);
  });

  test('at most 5 % of 200 steady dwells raise an alarm, and the amplitudes of the others hold to 0.6 %', () => {
    const judged = dwells(30, false);
    const steady = judged.filter(({ verdict }) => verdict === 'steady');
    expect(steady.length).toBeGreaterThanOrEqual(0.95 * DWELLS);
    expect(Math.max(...steady.map(({ amplitudeError }) => amplitudeError))).toBeLessThan(0.006);
  });
});
