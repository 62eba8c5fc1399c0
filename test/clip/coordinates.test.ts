import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { RotationDeg } from '../../src/clip/clip-info.ts';
import { displayedSize, type PictureGeometry, toCoded, toDisplayed } from '../../src/clip/coordinates.ts';

const geometry: fc.Arbitrary<PictureGeometry> = fc.record({
  codedWidth: fc.integer({ min: 1, max: 16_384 }),
  codedHeight: fc.integer({ min: 1, max: 16_384 }),
  pixelAspect: fc.constantFrom(1, 4 / 3, 16 / 15, 64 / 45, 8 / 9, 0.5),
  rotationDeg: fc.constantFrom<RotationDeg>(0, 90, 180, 270),
  mirrored: fc.boolean(),
});
const point = fc.record({
  x: fc.double({ min: -100, max: 17_000, noNaN: true }),
  y: fc.double({ min: -100, max: 17_000, noNaN: true }),
});

test('there and back is where it was (round trip)', () => {
  fc.assert(
    fc.property(geometry, point, (picture, p) => {
      const shown = toCoded(toDisplayed(p, picture), picture);
      const stored = toDisplayed(toCoded(p, picture), picture);
      for (const back of [shown, stored]) {
        expect(Math.abs(back.x - p.x)).toBeLessThan(1e-9);
        expect(Math.abs(back.y - p.y)).toBeLessThan(1e-9);
      }
    }),
    { seed: 3, numRuns: 1000 },
  );
});

test('corners of the stored picture are corners of the displayed one', () => {
  fc.assert(
    fc.property(geometry, (picture) => {
      const far = { x: picture.codedWidth - 0.5, y: picture.codedHeight - 0.5 };
      const corners = [-0.5, far.x].flatMap((x) => [-0.5, far.y].map((y) => toDisplayed({ x, y }, picture)));
      const { displayedWidth, displayedHeight } = displayedSize(picture);
      for (const corner of corners) {
        expect(
          Math.min(Math.abs(corner.x + 0.5), Math.abs(corner.x + 0.5 - displayedWidth)),
        ).toBeLessThanOrEqual(0.5);
        expect(
          Math.min(Math.abs(corner.y + 0.5), Math.abs(corner.y + 0.5 - displayedHeight)),
        ).toBeLessThanOrEqual(0.5);
      }
    }),
    { seed: 4, numRuns: 500 },
  );
});

test('a distance along a diagonal keeps its length when turned or mirrored, with square pixels (identity)', () => {
  fc.assert(
    fc.property(geometry, point, point, (picture, p, q) => {
      const square = { ...picture, pixelAspect: 1 };
      const a = toDisplayed(p, square);
      const b = toDisplayed(q, square);
      expect(Math.hypot(a.x - b.x, a.y - b.y)).toBeCloseTo(Math.hypot(p.x - q.x, p.y - q.y), 8);
    }),
    { seed: 5, numRuns: 500 },
  );
});

describe('by hand: the top left pixel of a 4 x 3 picture', () => {
  const picture = { codedWidth: 4, codedHeight: 3, pixelAspect: 1, mirrored: false };
  test.each<[RotationDeg, boolean, number, number]>([
    [0, false, 0, 0],
    [90, false, 2, 0],
    [180, false, 3, 2],
    [270, false, 0, 3],
    [0, true, 3, 0],
    [90, true, 0, 0],
  ])('turned %i degrees clockwise, mirrored %s: (%i, %i)', (rotationDeg, mirrored, x, y) => {
    expect(toDisplayed({ x: 0, y: 0 }, { ...picture, rotationDeg, mirrored })).toEqual({ x, y });
  });
});

describe('pixels that are not square', () => {
  const anamorphic = {
    codedWidth: 1440,
    codedHeight: 1080,
    pixelAspect: 4 / 3,
    rotationDeg: 0 as const,
    mirrored: false,
  };
  test('1440 x 1080 with 4:3 pixels is 1920 x 1080 (HDV)', () => {
    expect(displayedSize(anamorphic)).toEqual({ displayedWidth: 1920, displayedHeight: 1080 });
  });

  test('no detail is lost: tall pixels stretch the height', () => {
    const tall = { ...anamorphic, codedWidth: 720, codedHeight: 480, pixelAspect: 8 / 9 };
    expect(displayedSize(tall)).toEqual({ displayedWidth: 720, displayedHeight: 540 });
  });

  test('the centre of the first pixel is a third of a pixel off its old place: (0 + 1/2) 4/3 - 1/2', () => {
    expect(toDisplayed({ x: 0, y: 0 }, anamorphic).x).toBeCloseTo(1 / 6, 12);
  });
});
