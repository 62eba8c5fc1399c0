import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import type { DwellJudgement, JudgeOptions } from '../../src/motion/dwell-judgement.ts';
import { judgeDwell } from '../../src/motion/verdict.ts';
import { gaussian } from '../sine/seeded-noise.ts';
import { frames, startFromRest } from './driven-oscillator.ts';

const wave = (frequencyHz: number, timeS: number, phase = 0) =>
  Math.cos(2 * Math.PI * frequencyHz * timeS + phase);

function judge(
  timesS: Float64Array,
  motion: (timeS: number) => number,
  options: Partial<JudgeOptions> = {},
  noiseSd = 0.03,
): DwellJudgement {
  const normal = gaussian(timesS.length);
  const displacementMm = timesS.map((t) => motion(t) + noiseSd * normal());
  return judgeDwell({ timesS, displacementMm }, { driveHz: 5, ...options });
}

const codes = (judged: DwellJudgement) => judged.warnings.map(({ code }) => code);

/** Every number in a result, however deep. */
function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value];
  if (ArrayBuffer.isView(value)) return Array.from(value as Float64Array);
  if (value !== null && typeof value === 'object') return Object.values(value).flatMap(numbersIn);
  return [];
}

describe('steady dwells', () => {
  test('a sine with noise is steady over all of it, its amplitude within the stated interval', () => {
    const judged = judge(frames(600), (t) => 10 * wave(5, t, 1));
    expect(judged.verdict).toBe('steady');
    expect(judged.sentence).toMatch(/^Steady from 0 s to .* 50 periods/);
    expect(Math.abs(judged.best.amplitude.value! - 10)).toBeLessThan(4 * judged.best.amplitude.u!);
    expect(judged.best.source).toBe('window');
    expect(Math.abs(judged.freeFit!.frequencyHz - 5)).toBeLessThan(4 * judged.freeFit!.frequencyU!);
    expect(judged.jointFit).toBeNull();
    expect(judged.warnings).toEqual([]);
    expect(judged.waitS).toBe(0);
    expect(judged.frames).toBe(600);
  });

  test('start-up and then steady: the window begins when the transient has gone, the amplitude is exact to 0.02 %', () => {
    const rest = startFromRest({
      naturalHz: 4.8,
      dampingRatio: 0.03,
      driveHz: 5,
      amplitude: 12,
      phaseRad: 0.3,
    });
    const judged = judge(frames(900), rest.at);
    expect(judged.verdict).toBe('steady');
    const trueLeftover = (rest.transient / 12) * Math.exp(-rest.decayRate * judged.windowS![0]);
    expect(trueLeftover).toBeLessThan(0.0012);
    expect(judged.leftover.value! / trueLeftover).toBeCloseTo(1, 1);
    expect(Math.abs(judged.fit!.amplitude / 12 - 1)).toBeLessThan(2e-4);
    expect(Math.abs(judged.jointFit!.naturalHz.value! - 4.8)).toBeLessThan(4 * judged.jointFit!.naturalHz.u!);
    expect(Math.abs(judged.jointFit!.dampingRatio.value! - 0.03)).toBeLessThan(
      4 * judged.jointFit!.dampingRatio.u!,
    );
  });

  test('drive switched on within the clip: the steady part is found', () => {
    const rest = startFromRest({
      naturalHz: 5.1,
      dampingRatio: 0.05,
      driveHz: 5,
      amplitude: 10,
      phaseRad: 0,
    });
    const judged = judge(frames(900), (t) => (t < 4 ? 0 : rest.at(t - 4)));
    expect(judged.verdict).toBe('steady');
    expect(judged.windowS![0]).toBeGreaterThan(6);
    expect(Math.abs(judged.fit!.amplitude / 10 - 1)).toBeLessThan(2e-3);
  });

  test('motion that stops before the clip ends: the window ends before it', () => {
    const judged = judge(frames(900), (t) =>
      t < 10 ? 10 * wave(5, t) : 10 * Math.exp(10 - t) * wave(5.1, t),
    );
    expect(judged.verdict).toBe('steady');
    expect(judged.windowS![1]).toBeLessThan(10.1);
    expect(Math.abs(judged.fit!.amplitude / 10 - 1)).toBeLessThan(1e-3);
  });

  test('frequency not given is measured; above half the frame rate a given one is measured at its alias', () => {
    const measured = judge(frames(600), (t) => 10 * wave(5.123, t), { driveHz: null });
    expect(measured.verdict).toBe('steady');
    expect(Math.abs(measured.frequencyHz! - 5.123)).toBeLessThan(1e-3);
    const alias = judge(frames(600, 30), (t) => 10 * wave(41, t), { driveHz: 41 });
    expect(alias.verdict).toBe('steady');
    expect(alias.frequencyHz).toBe(41);
    expect(Math.abs(alias.fit!.amplitude / 10 - 1)).toBeLessThan(1e-3);
  });

  test.each([5.005, 5.25])(
    'a drive that runs at %d Hz though 5 Hz was set is measured there, and told',
    (runsHz) => {
      const judged = judge(frames(600), (t) => 10 * wave(runsHz, t));
      expect(judged.verdict).toBe('steady');
      expect(Math.abs(judged.frequencyHz! - runsHz)).toBeLessThan(1e-3);
      expect(Math.abs(judged.fit!.amplitude / 10 - 1)).toBeLessThan(1e-3);
      expect(codes(judged)).toContain('frequency-differs');
    },
  );

  test('with the drive in view: its frequency, lag and gain', () => {
    const timesS = frames(600);
    const driveRecord = { timesS, displacementMm: timesS.map((t) => 2 * wave(5.01, t)) };
    const judged = judge(timesS, (t) => 10 * wave(5.01, t, -Math.PI / 3), { driveRecord });
    expect(judged.verdict).toBe('steady');
    expect(judged.frequencyHz).toBeCloseTo(5.01, 6);
    expect(Math.abs(judged.best.lagDeg.value! - 60)).toBeLessThan(4 * judged.best.lagDeg.u!);
    expect(Math.abs(judged.best.gain.value! - 5)).toBeLessThan(4 * judged.best.gain.u!);
  });

  test('a foreign tone is taken out and named; harmonics are named with their likely causes', () => {
    const foreign = judge(frames(600), (t) => 10 * wave(5, t) + 2 * wave(8.3, t));
    expect(foreign.verdict).toBe('steady');
    expect(foreign.warnings.find(({ code }) => code === 'other-tone')!.sentence).toContain('8.3');
    const bent = judge(frames(600), (t) => 10 * wave(5, t) + wave(10, t) + 0.5 * wave(15, t));
    expect(bent.verdict).toBe('steady');
    expect(bent.harmonics[0]!.value).toBeCloseTo(0.1, 2);
    expect(bent.harmonics[1]!.value).toBeCloseTo(0.05, 2);
    expect(bent.warnings.find(({ code }) => code === 'harmonics')!.sentence).toMatch(/stop.*marker.*shutter/);
  });

  test('a marker lost at the same point of every swing does not bias the amplitude, and is told', () => {
    const judged = judge(frames(600), (t) => (wave(2.71, t) > 0.7 ? Number.NaN : 10 * wave(2.71, t)), {
      driveHz: 2.71,
    });
    expect(judged.verdict).toBe('steady');
    expect(Math.abs(judged.fit!.amplitude / 10 - 1)).toBeLessThan(2e-3);
    expect(codes(judged)).toEqual(expect.arrayContaining(['lost-frames', 'phase-gap']));
  });
});

describe('unsteady dwells', () => {
  test('settling: says how long to wait, and the joint fit has the amplitude', () => {
    const rest = startFromRest({
      naturalHz: 5,
      dampingRatio: 0.005,
      driveHz: 5.01,
      amplitude: 15,
      phaseRad: 1,
    });
    const judged = judge(frames(600), rest.at, { driveHz: 5.01 });
    expect(judged.verdict).toBe('settling');
    const atEnd = (rest.transient / 15) * Math.exp(-rest.decayRate * (599 / 60));
    expect(judged.waitS! / (Math.log(atEnd / 0.01) / rest.decayRate)).toBeCloseTo(1, 1);
    expect(judged.sentence).toMatch(
      /transient is still 2\d %.*wait .* s longer.*joint fit: steady amplitude 1[45]\.\d+ mm/,
    );
    expect(judged.best.source).toBe('joint-fit');
    expect(Math.abs(judged.best.amplitude.value! / 15 - 1)).toBeLessThan(0.005);
  });

  test('the joint fit gives the lag too, against a drive that has no transient', () => {
    const lag = 0.8;
    const rest = startFromRest({
      naturalHz: 5,
      dampingRatio: 0.006,
      driveHz: 5.03,
      amplitude: 15,
      phaseRad: -lag,
    });
    const timesS = frames(600);
    const driveRecord = { timesS, displacementMm: timesS.map((t) => 3 * wave(5.03, t)) };
    const judged = judge(timesS, rest.at, { driveHz: 5.03, driveRecord });
    expect(judged.best.source).toBe('joint-fit');
    expect(Math.abs(judged.best.lagDeg.value! - (lag * 180) / Math.PI)).toBeLessThan(
      4 * judged.best.lagDeg.u!,
    );
    expect(judged.best.lagDeg.u!).toBeLessThan(0.5);
  });

  test('beating: with a transient that swells and dies, and with a second source that does not', () => {
    const dying = judge(frames(600), (t) => 10 * wave(5, t) + 6 * Math.exp(-0.05 * t) * wave(5.4, t));
    expect(dying.verdict).toBe('beating');
    expect(dying.sentence).toMatch(/swell every 2\.5 s: wait/);
    const lasting = judge(frames(600), (t) => 10 * wave(5, t) + 2 * wave(5.3, t));
    expect(lasting.verdict).toBe('beating');
    expect(lasting.sentence).toMatch(/every 3\.3\d* s and does not die away/);
    const modulated = judge(frames(600), (t) => 10 * (1 + 0.1 * wave(0.5, t)) * wave(5, t));
    expect(modulated.verdict).toBe('beating');
  });

  test('drifting: a drive that loses its level; 0.3 % in ten seconds is only remarked on', () => {
    const drifting = judge(frames(600), (t) => 10 * (1 + 0.004 * t) * wave(5, t));
    expect(drifting.verdict).toBe('drifting');
    expect(drifting.sentence).toMatch(/amplitude grew by (3\.\d|4) % in .*level/);
    expect(drifting.drift.value).toBeCloseTo(0.04, 2);
    const slight = judge(frames(600), (t) => 10 * (1 + 0.0003 * t) * wave(5, t));
    expect(slight.verdict).toBe('steady');
  });

  test('a phase slide that a slow transient could feign is not called steady in a short record', () => {
    const judged = judge(frames(180), (t) => 10 * wave(5.005, t));
    expect(judged.verdict).toBe('drifting');
    expect(judged.sentence).toMatch(/phase slid by 5\.\d degrees.*5\.00\d* Hz/);
  });
});

describe('bad input: a sentence each, null values, never NaN', () => {
  const timesS = frames(600);
  const sine = timesS.map((t) => wave(5, t));
  const cases: readonly [string, DwellJudgement['verdict'], RegExp, () => DwellJudgement][] = [
    [
      'negative drive frequency',
      'failed',
      /above 0 Hz, not -5 Hz/,
      () => judge(timesS, () => 0, { driveHz: -5 }),
    ],
    ['drive frequency 0', 'failed', /above 0 Hz/, () => judge(timesS, () => 0, { driveHz: 0 })],
    ['drive frequency NaN', 'failed', /above 0 Hz/, () => judge(timesS, () => 0, { driveHz: Number.NaN })],
    [
      'less than two periods',
      'failed',
      /holds 1\.7 periods.*film at least 0\.4 s/,
      () => judge(frames(20), (t) => wave(5, t)),
    ],
    ['no frames', 'failed', /no frames/, () => judge(frames(0), () => 0)],
    ['three frames', 'failed', /only 3 frames/, () => judge(frames(3), () => 0)],
    ['constant motion', 'failed', /does not move/, () => judge(timesS, () => 3, {}, 0)],
    [
      'noise only',
      'failed',
      /Nothing moves at 5 Hz above the noise: a swing below 0\.00\d+ mm/,
      () => judge(timesS, () => 0),
    ],
    [
      'noise only, no frequency',
      'failed',
      /give the drive frequency/,
      () => judge(timesS, () => 0, { driveHz: null }),
    ],
    [
      'window outside',
      'failed',
      /8 s to 20 s lies outside the clip, which runs from 0 s to 9\.98 s/,
      () => judge(timesS, () => 0, { window: [8, 20] }),
    ],
    ['window reversed', 'failed', /ends before it begins/, () => judge(timesS, () => 0, { window: [5, 4] })],
    ['all frames lost', 'lost', /seen in 0 of 600 frames/, () => judge(timesS, () => Number.NaN)],
    [
      'most frames lost',
      'lost',
      /seen in 200 of 600/,
      () =>
        judgeDwell(
          { timesS, displacementMm: sine.map((x, i) => (i % 3 === 0 ? x : Number.NaN)) },
          { driveHz: 5 },
        ),
    ],
    [
      'frequency at the frame rate',
      'failed',
      /frame rate is a whole multiple/,
      () => judge(timesS, (t) => wave(60, t), { driveHz: 60 }),
    ],
  ];
  test.each(cases)('%s', (_name, verdict, sentence, run) => {
    const judged = run();
    expect(judged.verdict).toBe(verdict);
    expect(judged.sentence).toMatch(sentence);
    expect(judged.best.amplitude.value).toBeNull();
    expect(judged.best.source).toBeNull();
    expect(judged.windowS).toBeNull();
    expect(numbersIn({ ...judged, fit: null }).every(Number.isFinite)).toBe(true);
  });

  test("times that go backwards are the file's fault", () => {
    const backwards = timesS.slice();
    backwards[300] = 1;
    const run = () => judgeDwell({ timesS: backwards, displacementMm: sine }, { driveHz: 5 });
    expect(run).toThrow(InputError);
    expect(run).toThrow(/backwards at frame 301/);
  });

  test('every number of good and bad results is finite', () => {
    const rest = startFromRest({ naturalHz: 5, dampingRatio: 0.02, driveHz: 5.1, amplitude: 9, phaseRad: 0 });
    for (const noise of [0, 0.05]) {
      for (const count of [25, 60, 300]) {
        const judged = judge(frames(count), rest.at, { driveHz: 5.1 }, noise);
        expect(numbersIn(judged).every(Number.isFinite)).toBe(true);
      }
    }
  });

  test('a window given is judged as it is', () => {
    const rest = startFromRest({
      naturalHz: 4.8,
      dampingRatio: 0.03,
      driveHz: 5,
      amplitude: 12,
      phaseRad: 0.3,
    });
    const early = judge(frames(900), rest.at, { window: [0.5, 3] });
    expect(early.windowS![0]).toBeGreaterThanOrEqual(0.5);
    expect(early.windowS![1]).toBeLessThanOrEqual(3);
    expect(early.verdict).not.toBe('steady');
    expect(judge(frames(900), rest.at, { window: [9, 14] }).verdict).toBe('steady');
  });
});
