import { describe, expect, test } from 'vitest';
import { subtractGround } from '../../src/scale/ground.ts';
import type { PointPx, PointTrack } from '../../src/scale/point-track.ts';

const N = 120;
const TIMES = Float64Array.from({ length: N }, (_, i) => i / 30);

type Motion = (t: number) => PointPx;

function trackOf(at: Motion, delayS = 0): PointTrack {
  const timesS = TIMES.map((t) => t + delayS);
  const points = Array.from(timesS, at);
  return {
    timesS,
    x: Float64Array.from(points, (p) => p[0]),
    y: Float64Array.from(points, (p) => p[1]),
  };
}

const shift: Motion = (t) => [6 * Math.sin(2.1 * t) + 2 * t, 3 * Math.cos(3.7 * t)];
const partX = (t: number): number => 400 + 30 * Math.cos(2 * Math.PI * 1.43 * t);

/** A scene point as a camera sees it that shifts and turns about the frame's middle. */
function seen(point: PointPx, t: number, turnRad: (t: number) => number): PointPx {
  const [dx, dy] = shift(t);
  const a = turnRad(t);
  const [x, y] = [point[0] - 320, point[1] - 180];
  return [320 + dx + x * Math.cos(a) - y * Math.sin(a), 180 + dy + x * Math.sin(a) + y * Math.cos(a)];
}

describe('camera motion taken out by ground markers', () => {
  test('one ground marker takes out any shift exactly', () => {
    const part = trackOf((t) => [partX(t) + shift(t)[0], 200 + shift(t)[1]]);
    const ground = trackOf((t) => [60 + shift(t)[0], 40 + shift(t)[1]]);
    const still = subtractGround(part, [ground], [[60, 40]]);
    TIMES.forEach((t, i) => {
      expect(still.x[i]).toBeCloseTo(partX(t), 9);
      expect(still.y[i]).toBeCloseTo(200, 9);
    });
  });

  test('without a rest position the mean of the ground marker stands for it', () => {
    const part = trackOf((t) => [partX(t) + shift(t)[0], 200]);
    const ground = trackOf((t) => [60 + shift(t)[0], 40]);
    const still = subtractGround(part, [ground]);
    const offset = still.x[0]! - partX(0);
    TIMES.forEach((t, i) => {
      expect(still.x[i]! - offset).toBeCloseTo(partX(t), 9);
    });
  });

  test('two ground markers take out rotation too, which one alone leaves in', () => {
    const turn = (t: number): number => 0.02 * Math.sin(1.3 * t);
    const rest: PointPx[] = [
      [60, 40],
      [580, 60],
    ];
    const part = trackOf((t) => seen([partX(t), 200], t, turn));
    const grounds = rest.map((p) => trackOf((t) => seen(p, t, turn)));
    const both = subtractGround(part, grounds, rest);
    const one = subtractGround(part, grounds.slice(0, 1), rest.slice(0, 1));
    const worst = (track: PointTrack): number =>
      Math.max(...TIMES.map((t, i) => Math.abs(track.x[i]! - partX(t))));
    expect(worst(both)).toBeLessThan(1e-9);
    expect(worst(one)).toBeGreaterThan(1);
  });

  test("a ground marker read out 12 ms earlier is carried to the part's time (shake of 0.6 Hz left under 0.01 px)", () => {
    const shake: Motion = (t) => [5 * Math.sin(2 * Math.PI * 0.6 * t), 0];
    const part = trackOf((t) => [shake(t)[0], 0], 0.012);
    const ground = trackOf(shake);
    const still = subtractGround(part, [ground], [[0, 0]]);
    const naive = part.x.map((x, i) => x - ground.x[i]!);
    for (let i = 2; i < N - 2; i++) expect(Math.abs(still.x[i]!)).toBeLessThan(0.01);
    expect(Math.max(...naive.map(Math.abs))).toBeGreaterThan(0.2);
  });

  test('a frame with a ground marker lost is a gap, and no ground marker changes nothing', () => {
    const part = trackOf((t) => [partX(t), 200]);
    const ground = trackOf(() => [60, 40]);
    ground.x[7] = Number.NaN;
    part.y[9] = Number.NaN;
    const still = subtractGround(part, [ground]);
    expect([7, 9].map((i) => still.x[i])).toEqual([Number.NaN, Number.NaN]);
    expect([6, 8, 10].every((i) => Number.isFinite(still.x[i]))).toBe(true);
    expect(subtractGround(part, [])).toBe(part);
  });

  test('mistakes of the caller are thrown', () => {
    const part = trackOf((t) => [partX(t), 200]);
    const lost = trackOf(() => [Number.NaN, Number.NaN]);
    expect(() => subtractGround(part, [lost])).toThrow(/never seen/);
    expect(() => subtractGround(part, [part], [])).toThrow(/one rest position/);
    const short = { timesS: TIMES.slice(1), x: part.x.slice(1), y: part.y.slice(1) };
    expect(() => subtractGround(part, [short])).toThrow(/frames/);
  });
});
