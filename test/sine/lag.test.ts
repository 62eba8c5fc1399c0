import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { fitLag, lagDegrees } from '../../src/sine/lag.ts';
import { gaussian } from './seeded-noise.ts';

const sinsin = JSON.parse(readFileSync(new URL('../data/sinsin.json', import.meta.url), 'utf8'));
const column = (name: string) => Float64Array.from(sinsin[name] as number[]);

describe('lag of a response against its drive', () => {
  test.each([
    ['y2', 45],
    ['y3', 90],
    ['y4', 135],
    ['y5', 180],
  ])('NIST SINSIN.DAT: y1 follows %s by %d degrees at 5/3 of its amplitude', (drive, lagDeg) => {
    const lag = fitLag(column('t'), column('y1'), column(drive), 0.1)!;
    expect(lag.lagDeg).toBeCloseTo(lagDeg, 2);
    expect(lag.gain).toBeCloseTo(5 / 3, 4);
  });

  test('told in [-90, 270): noise about 0 and 180 does not wrap', () => {
    const degrees = (lag: number) => lagDegrees((lag * Math.PI) / 180 + 7, 7);
    for (const lag of [-89, -2, 0, 1, 90, 179, 183, 269]) expect(degrees(lag)).toBeCloseTo(lag, 9);
    expect(degrees(271)).toBeCloseTo(-89, 9);
    expect(degrees(-91)).toBeCloseTo(269, 9);
    expect(degrees(360 + 30)).toBeCloseTo(30, 9);
  });

  const times = new Float64Array(200).map((_, i) => i / 60);
  const drive = times.map((t) => 2 * Math.cos(2 * Math.PI * 3 * t));
  const response = times.map((t) => 6 * Math.cos(2 * Math.PI * 3 * t - 1));

  test('camera shake common to both, in phase and in proportion, leaves the lag sure', () => {
    const normal = gaussian(8);
    const shake = times.map(() => 0.1 * normal());
    const own = times.map(() => 0.001 * normal());
    const apart = times.map(() => 0.1 * normal());
    const same = (scale: number, base: Float64Array) => base.map((x, i) => x + scale * shake[i]!);
    // a response in phase with the drive, its share of the shake in proportion to its amplitude: the ratio is untouched
    const inPhase = drive.map((x, i) => 3 * x + own[i]!);
    const shared = fitLag(times, same(3, inPhase), same(1, drive), 3)!;
    const separate = fitLag(
      times,
      same(3, inPhase),
      drive.map((x, i) => x + apart[i]!),
      3,
    )!;
    expect(shared.lagU).toBeLessThan(0.05 * separate.lagU);
    expect(Math.abs(shared.lagDeg)).toBeLessThan(4 * shared.lagU);
  });

  test('only frames in which both were seen count, and a known frequency slightly wrong does not matter', () => {
    const holed = drive.map((x, i) => (i % 9 === 0 ? Number.NaN : x));
    const lag = fitLag(times, response, holed, 3)!;
    expect(lag.response.frames).toBe(holed.filter((x) => !Number.isNaN(x)).length);
    expect(lag.lagDeg).toBeCloseTo(180 / Math.PI, 8);
    expect(fitLag(times, response, drive, 3.003)!.lagDeg).toBeCloseTo(180 / Math.PI, 1);
  });

  test('cannot know: no drive in view gives null', () => {
    expect(fitLag(times, response, new Float64Array(200).fill(Number.NaN), 3)).toBeNull();
    expect(fitLag(times, response, new Float64Array(200), 3)).toBeNull();
  });
});
