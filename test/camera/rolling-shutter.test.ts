import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type DisplayRotationDeg,
  type RowReadout,
  readoutDirection,
  readoutFraction,
  rollingShutterEffect,
  rowPhaseDeg,
  rowTimes,
} from '../../src/camera/rolling-shutter.ts';
import { InputError } from '../../src/errors.ts';
import { fitSine } from './fit-sine.ts';

const ROWS = 1080;
const READOUT_S = 0.9 / 60;
const readout: RowReadout = {
  rowReadoutS: READOUT_S,
  displayedWidthPx: 1920,
  displayedHeightPx: ROWS,
  rotationDeg: 0,
};

/** Rows in which a rolling shutter sees y = rest + A sin(2 pi f t + 0.4): solves row = y(t + readout (row + 0.5) / rows). */
function seenRows(timesS: Float64Array, rest: number, amplitude: number, f: number): Float64Array {
  return timesS.map((t) => {
    let row = rest;
    for (let k = 0; k < 200; k++) {
      row = rest + amplitude * Math.sin(2 * Math.PI * f * (t + (READOUT_S * (row + 0.5)) / ROWS) + 0.4);
    }
    return row;
  });
}

const timesS = Float64Array.from({ length: 600 }, (_, i) => i / 60);

describe("rolling shutter along the motion (Kepler's equation, derived; 200 px, 8 Hz, 0.9/60 s over 1080 rows)", () => {
  const seen = seenRows(timesS, 540, 200, 8);
  const naive = fitSine(timesS, seen, 8);
  const effect = rollingShutterEffect(8, 200, READOUT_S / ROWS);

  test('e 0.139626340, fundamental 0.997565039, second harmonic 0.069360593', () => {
    expect(effect.crossingRad).toBeCloseTo(0.13962634, 8);
    expect(effect.fundamental).toBeCloseTo(0.997565039, 8);
    expect(effect.secondHarmonic).toBeCloseTo(0.069360593, 8);
  });

  test('that is what a fit of the seen rows finds', () => {
    expect(naive.amplitude / 200).toBeCloseTo(effect.fundamental, 6);
    expect(naive.secondHarmonic * naive.amplitude).toBeCloseTo(200 * effect.secondHarmonic, 3);
  });

  test('row times undo it: the fundamental is whole, the second harmonic gone, the phase true', () => {
    const times = rowTimes(timesS, new Float64Array(600).fill(960), seen, readout);
    const undone = fitSine(times, seen, 8);
    expect(undone.amplitude).toBeCloseTo(200, 9);
    expect(undone.secondHarmonic).toBeLessThan(1e-12);
    expect(undone.lagRad).toBeCloseTo(Math.PI / 2 - 0.4, 9);
    expect(undone.residualRms).toBeLessThan(1e-9);
  });

  test('a still camera has no effect, and the small-e series joins on', () => {
    expect(rollingShutterEffect(8, 0, 1e-5)).toEqual({ crossingRad: 0, fundamental: 1, secondHarmonic: 0 });
    const [below, above] = [rollingShutterEffect(1, 1, 1.59e-7), rollingShutterEffect(1, 1, 1.6e-7)];
    expect(below.secondHarmonic / below.crossingRad).toBeCloseTo(above.secondHarmonic / above.crossingRad, 9);
    expect(() => rollingShutterEffect(100, 1000, 1e-5)).toThrow(/crossing/);
  });
});

describe('phase between markers in different rows', () => {
  test('0.04 degrees a row, 16 degrees over 400 rows', () => {
    expect(rowPhaseDeg(8, READOUT_S, 1 / ROWS)).toBeCloseTo(0.04, 12);
    expect(rowPhaseDeg(8, READOUT_S, 400 / ROWS)).toBeCloseTo(16, 12);
  });

  test('measured lag = true lag - that phase, for a response read after the drive', () => {
    const at = (row: number): Float64Array =>
      timesS.map((t) => Math.cos(2 * Math.PI * 8 * (t + (READOUT_S * row) / ROWS)));
    const lag = fitSine(timesS, at(500), 8).lagRad - fitSine(timesS, at(100), 8).lagRad;
    expect((lag * 180) / Math.PI).toBeCloseTo(-rowPhaseDeg(8, READOUT_S, 400 / ROWS), 9);
  });
});

describe('readout in a turned clip', () => {
  /** Where a coded pixel is displayed when the frame is turned clockwise. */
  function displayed(
    rotation: DisplayRotationDeg,
    x: number,
    y: number,
    w: number,
    h: number,
  ): [number, number] {
    if (rotation === 90) return [h - 1 - y, x];
    if (rotation === 180) return [w - 1 - x, h - 1 - y];
    if (rotation === 270) return [y, w - 1 - x];
    return [x, y];
  }

  test('the fraction follows the coded row, whatever way the frame is shown', () => {
    fc.assert(
      fc.property(
        fc.constantFrom<DisplayRotationDeg>(0, 90, 180, 270),
        fc.integer({ min: 0, max: 1279 }),
        fc.integer({ min: 0, max: 719 }),
        (rotationDeg, x, y) => {
          const turned = rotationDeg === 90 || rotationDeg === 270;
          const facts = {
            rowReadoutS: 0.02,
            displayedWidthPx: turned ? 720 : 1280,
            displayedHeightPx: turned ? 1280 : 720,
            rotationDeg,
          };
          const [dx, dy] = displayed(rotationDeg, x, y, 1280, 720);
          expect(readoutFraction(facts, dx, dy)).toBeCloseTo((y + 0.5) / 720, 12);
          const [ux, uy] = readoutDirection(rotationDeg);
          expect(readoutFraction(facts, dx + ux, dy + uy)).toBeCloseTo((y + 1.5) / 720, 12);
        },
      ),
      { seed: 6, numRuns: 100 },
    );
  });
});

describe('row times of a real track', () => {
  test("a lost frame gets a time between its neighbours', not a hole", () => {
    const x = Float64Array.of(10, 10, Number.NaN, 10, 10);
    const y = Float64Array.of(100, 200, Number.NaN, 400, 500);
    const t = Float64Array.of(0, 0.02, 0.03, 0.06, 0.08);
    const times = rowTimes(t, x, y, readout);
    const row = 200.5 + (400 - 200) / 4;
    expect(times[2]).toBeCloseTo(0.03 + (READOUT_S * row) / ROWS, 12);
    expect(times[0]).toBeCloseTo((READOUT_S * 100.5) / ROWS, 12);
  });

  test('lost at the ends the row is held; never seen, the middle of the frame', () => {
    const t = Float64Array.of(0, 0.02, 0.04);
    const lost = Number.NaN;
    const ends = rowTimes(t, Float64Array.of(lost, 5, lost), Float64Array.of(lost, 539.5, lost), readout);
    expect(Array.from(ends, (v, i) => v - t[i]!)).toEqual(
      [0, 1, 2].map(() => expect.closeTo(READOUT_S / 2, 12)),
    );
    const never = rowTimes(
      t,
      t.map(() => lost),
      t.map(() => lost),
      readout,
    );
    expect(never[1]).toBeCloseTo(0.02 + READOUT_S / 2, 12);
  });

  test('a global shutter changes nothing', () => {
    const y = timesS.map((_, i) => i % 700);
    expect(rowTimes(timesS, y, y, { ...readout, rowReadoutS: 0 })).toEqual(timesS);
  });

  test('times stay in order for any motion a camera can see', () => {
    fc.assert(
      fc.property(
        fc.array(fc.option(fc.integer({ min: 0, max: 1079 })), { minLength: 3, maxLength: 40 }),
        (rows) => {
          const t = Float64Array.from(rows, (_, i) => i / 60);
          const y = Float64Array.from(rows, (row) => row ?? Number.NaN);
          const times = rowTimes(t, y, y, readout);
          for (let i = 1; i < times.length; i++) expect(times[i]!).toBeGreaterThan(times[i - 1]!);
        },
      ),
      { seed: 8, numRuns: 100 },
    );
  });

  test.each([-0.01, Number.NaN, Number.POSITIVE_INFINITY])('a readout of %d s is refused', (rowReadoutS) => {
    const y = Float64Array.of(1, 2);
    expect(() => rowTimes(Float64Array.of(0, 1), y, y, { ...readout, rowReadoutS })).toThrow(InputError);
  });

  test("a readout longer than the frames allow is the user's to correct", () => {
    const y = Float64Array.of(1000, 10);
    const t = Float64Array.of(0, 0.01);
    expect(() => rowTimes(t, y, y, readout)).toThrow(/longer than the frames are apart/);
    const still = Float64Array.of(500, 500);
    expect(() => rowTimes(t, still, still, { ...readout, rowReadoutS: 0.02 })).toThrow(InputError);
  });
});
