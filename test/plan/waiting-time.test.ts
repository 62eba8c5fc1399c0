import { describe, expect, it } from 'vitest';
import { dampedHz } from '../../src/plan/damping-from-decay.ts';
import {
  overshootRatio,
  startRatioAfterStep,
  transientFromRest,
  waitingTime,
} from '../../src/plan/waiting-time.ts';

const CASE = { naturalHz: 5, dampingRatio: 0.02, driveHz: 5.2, leftover: 0.01 };

describe('waiting time', () => {
  it.each([
    [0.005, 146.5853],
    [0.01, 73.2899],
    [0.02, 36.6394],
    [0.05, 14.6404],
    [0.1, 7.2926],
  ])(
    'damping ratio %d: %d damped cycles to 1 %% (derived from the decay exponential)',
    (dampingRatio, cycles) => {
      expect(waitingTime({ ...CASE, dampingRatio }).cycles).toBeCloseTo(cycles, 4);
    },
  );

  it.each([
    [0.05, 0.9536],
    [0.02, 1.2452],
    [0.01, 1.4659],
    [0.001, 2.1988],
  ])('leftover %d: %d cycles per unit of Q at light damping (ln(1/e)/pi)', (leftover, perQ) => {
    const dampingRatio = 1e-4;
    expect(waitingTime({ ...CASE, dampingRatio, leftover }).cycles * 2 * dampingRatio).toBeCloseTo(perQ, 4);
  });

  it('after Q cycles 4.32 % is left', () => {
    const { cycles } = waitingTime({ ...CASE, dampingRatio: 1e-4, leftover: 0.0432139 });
    expect(cycles * 2e-4).toBeCloseTo(1, 5);
  });

  it('natural frequency 5 Hz, ratio 0.02, drive 5.2 Hz: beat 0.2010001 Hz, period 4.9751 s, free/steady 1.0002', () => {
    const { beatHz, beatPeriodS } = waitingTime(CASE);
    expect(beatHz).toBeCloseTo(0.2010001, 7);
    expect(beatPeriodS).toBeCloseTo(4.9751219, 6);
    const r = 5.2 / 5;
    const lag = Math.atan2(2 * 0.02 * r, 1 - r * r);
    expect(transientFromRest(r, 0.02, lag)).toBeCloseTo(1.0002001, 6);
  });

  it('identity: without a phase it is the largest over all phases', () => {
    for (const [r, zeta] of [
      [0.5, 0.02],
      [1, 0.3],
      [1.6, 0.1],
    ] as const) {
      const phases = Array.from({ length: 3600 }, (_, i) => transientFromRest(r, zeta, (i * Math.PI) / 1800));
      expect(transientFromRest(r, zeta, null)).toBeCloseTo(Math.max(...phases), 5);
    }
  });

  it('identity: a step away from a large motion waits longer by its decay to the new one', () => {
    const still = waitingTime(CASE);
    const moving = waitingTime({ ...CASE, startRatio: startRatioAfterStep(9, 1) });
    expect(moving.waitS - still.waitS).toBeCloseTo(Math.log(10) / (0.02 * 2 * Math.PI * 5), 9);
    expect(startRatioAfterStep(0, 1)).toBe(1);
  });

  it('no wait where the start is already below the leftover', () => {
    expect(waitingTime({ ...CASE, startRatio: 0.005 }).waitS).toBe(0);
  });

  it('the envelope on the way from rest: steady plus free motion integrated in time gives the overshoot', () => {
    for (const driveHz of [4, 4.8, 5, 5.05, 5.3, 6]) {
      const alpha = 0.02 * 2 * Math.PI * 5;
      const beat = 2 * Math.PI * (driveHz - dampedHz(5, 0.02));
      let crest = 0;
      for (let t = 0; t < 20; t += 0.002) {
        const decay = Math.exp(-alpha * t);
        crest = Math.max(crest, Math.hypot(1 - decay * Math.cos(beat * t), decay * Math.sin(beat * t)));
      }
      expect(Math.abs(overshootRatio(5, 0.02, driveHz) - crest)).toBeLessThan(1e-4);
    }
  });

  it('refuses what has no settling time as a mistake of the caller', () => {
    expect(() => waitingTime({ ...CASE, dampingRatio: 0 })).toThrow(/no waiting time/);
    expect(() => waitingTime({ ...CASE, leftover: 1 })).toThrow(/no waiting time/);
  });
});
