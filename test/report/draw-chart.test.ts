import { createCanvas } from '@napi-rs/canvas';
import { Chart } from 'chart.js';
import { beforeAll, describe, expect, it } from 'vitest';
import { amplitudeChart } from '../../src/report/charts/amplitude-chart.ts';
import { CIRCLE_SIZE, circleChart } from '../../src/report/charts/circle-chart.ts';
import { type ChartPainter, chartPainter } from '../../src/report/draw-chart.ts';

const chart = () =>
  amplitudeChart({
    amplitudeTitle: 'amplitude, mm',
    dwells: [
      {
        name: 'a',
        driveHz: 2,
        amplitude: 4,
        amplitudeBar: 1,
        lagDeg: null,
        lagBarDeg: null,
        excluded: false,
      },
      {
        name: 'b',
        driveHz: 3,
        amplitude: 9,
        amplitudeBar: null,
        lagDeg: null,
        lagBarDeg: null,
        excluded: false,
      },
    ],
    curve: null,
    naturalHz: null,
    halfPower: null,
  });
const SIZE = { widthPx: 300, heightPx: 160 };

let painter: ChartPainter;
beforeAll(async () => {
  painter = await chartPainter();
});

describe('chartPainter', () => {
  it('the same chart gives the same vector picture, byte for byte, whatever was drawn between', () => {
    const first = painter.svg(chart(), SIZE);
    painter.svg(chart(), { widthPx: 100, heightPx: 100 });
    expect(painter.svg(chart(), SIZE)).toBe(first);
  });

  it('vector pictures hold no text, no script and no undefined number: letters are outlines', () => {
    const svg = painter.svg(chart(), SIZE);
    expect(svg).toMatch(/^<svg [^>]*viewBox="0 0 300 160"/);
    expect(svg).not.toMatch(/<text|<script|NaN|undefined|http(?!:\/\/www\.w3\.org)/);
    expect(svg.match(/<path/g)?.length).toBeGreaterThan(10);
  });

  it('PNG (ISO/IEC 15948, 11.2.2): two device pixels to the CSS pixel stand in the header', () => {
    const png = Buffer.from(painter.png(chart(), SIZE));
    expect(png.subarray(1, 4).toString()).toBe('PNG');
    expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual([600, 320]);
    expect(Buffer.from(painter.png(chart(), SIZE)).equals(png)).toBe(true);
  });

  it('says where its letters come from', () => {
    expect(['packaged', 'system', 'none']).toContain(painter.font);
  });
});

it.each([
  ['wide', 40, 2],
  ['high', 1, 30],
])('a circle is round on paper: one unit of x is as long as one of y (%s points)', (_, reachX, reachY) => {
  const made = circleChart({
    quantity: 'i f X, Hz mm',
    dwells: [
      { x: 0, y: reachY },
      { x: reachX, y: -3.0864 },
    ],
    curve: [],
    circle: null,
  });
  const drawn = new Chart(createCanvas(CIRCLE_SIZE.widthPx, CIRCLE_SIZE.heightPx), {
    ...made,
    options: { ...made.options, responsive: false, devicePixelRatio: 1 },
  });
  const { x, y } = drawn.scales;
  const perUnit = (axis: typeof x) =>
    Math.abs((axis?.getPixelForValue(1) ?? 0) - (axis?.getPixelForValue(0) ?? 0));
  expect(perUnit(x) / perUnit(y)).toBeCloseTo(1, 9);
  drawn.destroy();
});
