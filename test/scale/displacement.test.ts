import { expect, test } from 'vitest';
import { displacementAlong, trackInMm } from '../../src/scale/displacement.ts';
import { axisFromMotion, axisFromPoints } from '../../src/scale/motion-axis.ts';
import { planeMapping } from '../../src/scale/perspective.ts';
import type { PointTrack } from '../../src/scale/point-track.ts';
import { scaleFromPoints } from '../../src/scale/scale.ts';

const N = 180;
const timesS = Float64Array.from({ length: N }, (_, i) => i / 60);
const truthMm = timesS.map((t) => 12 * Math.cos(2 * Math.PI * 2 * t - 0.7));
const scale = scaleFromPoints({ fromPx: [0, 0], toPx: [800, 600], lengthMm: 400 }); // 0.4 mm per px

function trackPx(angleDeg: number): PointTrack {
  const a = (angleDeg * Math.PI) / 180;
  return {
    timesS,
    x: truthMm.map((s) => 500 + (s / 0.4) * Math.cos(a)),
    y: truthMm.map((s) => 300 + (s / 0.4) * Math.sin(a)),
  };
}

test('an oblique motion of 12 mm comes back along its own axis, in mm, about its rest', () => {
  const mm = trackInMm({ marker: trackPx(30), grounds: [], groundRestPx: null, toMm: scale });
  const axis = axisFromMotion(mm, 2);
  if (axis === null) throw new Error('there is motion');
  const record = displacementAlong(mm, axis);
  truthMm.forEach((s, i) => {
    expect(record.displacementMm[i]).toBeCloseTo(s, 9);
  });
  expect(record.timesS).toBe(timesS);
});

test('measured along a wrong axis the amplitude shrinks by cos(angle)', () => {
  const mm = trackInMm({ marker: trackPx(10), grounds: [], groundRestPx: null, toMm: scale });
  const record = displacementAlong(mm, axisFromPoints([0, 0], [100, 0], 0.5));
  expect(record.displacementMm[17]! / truthMm[17]!).toBeCloseTo(Math.cos((10 * Math.PI) / 180), 9);
});

test('a lost frame is a gap and the others do not move', () => {
  const marker = trackPx(0);
  marker.x[20] = Number.NaN;
  const mm = trackInMm({ marker, grounds: [], groundRestPx: null, toMm: scale });
  const record = displacementAlong(mm, axisFromPoints([0, 0], [100, 0], 0.5));
  expect(record.displacementMm[20]).toBeNaN();
  const difference = record.displacementMm[21]! - record.displacementMm[5]!;
  expect(difference).toBeCloseTo(truthMm[21]! - truthMm[5]!, 9);
});

test('nothing seen gives nothing but gaps', () => {
  const lost = new Float64Array(N).fill(Number.NaN);
  const mm = trackInMm({
    marker: { timesS, x: lost, y: lost },
    grounds: [],
    groundRestPx: null,
    toMm: scale,
  });
  const record = displacementAlong(mm, axisFromPoints([0, 0], [1, 0], 0.01));
  expect(record.displacementMm.every(Number.isNaN)).toBe(true);
});

test('camera shake and an oblique plane together: the true motion comes back', () => {
  // one-point perspective about x: u = 900 X / (1000 + 0.5 X), v = 900 Y / (1000 + 0.5 X)
  const see = (X: number, Y: number): readonly [number, number] => {
    const z = 1000 + 0.5 * X;
    return [640 + (900 * X) / z, 360 + (900 * Y) / z];
  };
  const corners = [
    [-200, -90],
    [210, -100],
    [220, 110],
    [-190, 100],
  ] as const;
  const plane = planeMapping(corners.map((mm) => ({ at: see(mm[0], mm[1]), mm })));
  const shakeX = timesS.map((t) => 3 * Math.sin(2 * Math.PI * 0.9 * t));
  const seen = Array.from(truthMm, (s) => see(60 + s, 20));
  const marker = {
    timesS,
    x: Float64Array.from(seen, (p, i) => p[0] + shakeX[i]!),
    y: Float64Array.from(seen, (p) => p[1]),
  };
  const ground = { timesS, x: shakeX.map((s) => 90 + s), y: new Float64Array(N).fill(70) };
  const mm = trackInMm({ marker, grounds: [ground], groundRestPx: [[90, 70]], toMm: plane });
  const axis = axisFromMotion(mm, 2);
  if (axis === null) throw new Error('there is motion');
  const record = displacementAlong(mm, axis);
  const offset = record.displacementMm[0]! - truthMm[0]!;
  truthMm.forEach((s, i) => {
    expect(record.displacementMm[i]! - offset).toBeCloseTo(s, 7);
  });
});
