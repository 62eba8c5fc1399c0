import { expect, test } from 'vitest';
import { geometryLines } from '../../src/camera/geometry-lines.ts';
import { axisFromPoints } from '../../src/scale/motion-axis.ts';
import { parallaxFromDistances } from '../../src/scale/parallax.ts';
import { localScaleRelU, planeMapping } from '../../src/scale/perspective.ts';
import { scaleFromPoints } from '../../src/scale/scale.ts';

const axis = axisFromPoints([0, 0], [500, 0], 0.5);
const scale = scaleFromPoints({
  fromPx: [0, 0],
  toPx: [1000, 0],
  lengthMm: 300,
  lengthUMm: 0.3,
  clickUPx: 0.5,
});

function asRecord(lines: ReturnType<typeof geometryLines>): Record<string, number> {
  return Object.fromEntries(lines.map((line) => [line.source, line.relU]));
}

test('a rule: length, clicks, axis, tilt and, where distances are given, parallax, all common', () => {
  const parallax = parallaxFromDistances({ cameraToScaleMm: 1560, cameraToMotionMm: 1500 });
  const lines = geometryLines({ toMm: scale, axis, parallax, restPx: [500, 300] });
  expect(lines.every((line) => line.common && line.dof === null)).toBe(true);
  const found = asRecord(lines);
  expect(found['scale length']).toBeCloseTo(0.001, 12);
  expect(found['scale clicks']).toBeCloseTo(Math.SQRT1_2 / 1000, 12);
  expect(found['parallax']).toBeCloseTo(parallax.u / parallax.factor, 12);
  expect(found['tilt']).toBeCloseTo((Math.sqrt(3) / 2) * (Math.PI / 180) ** 2, 12);
  expect(found['axis']).toBeCloseTo((Math.sqrt(3) / 2) * Math.atan(Math.SQRT1_2 / 500) ** 2, 12);
  const plain = geometryLines({ toMm: scale, axis, parallax: null, restPx: [500, 300], tiltUDeg: 0 });
  expect(plain.map((line) => line.source)).toEqual(['axis', 'scale length', 'scale clicks']);
});

test('a marked plane: its local scale stands for rule, tilt and parallax', () => {
  const corners = [
    [0, 0],
    [400, 0],
    [400, 300],
    [0, 300],
  ] as const;
  const toMm = planeMapping(corners.map((at) => ({ at, mm: [at[0] / 2, at[1] / 2] as const })));
  const found = asRecord(geometryLines({ toMm, axis, parallax: null, restPx: [200, 150] }));
  expect(Object.keys(found)).toEqual(['axis', 'perspective']);
  expect(found['perspective']).toBe(localScaleRelU(toMm, [200, 150], [1, 0]));
  expect(found['perspective']).toBeGreaterThan(0.5 / 400);
});
