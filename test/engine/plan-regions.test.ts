import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { planRegions } from '../../src/engine/plan-regions.ts';

const picture = { codedWidth: 1920, codedHeight: 1080 };
const point = fc.record({
  x: fc.double({ min: 0, max: 1919, noNaN: true }),
  y: fc.double({ min: 0, max: 1079, noNaN: true }),
});
const wish = fc.record({
  patchWidthPx: fc.integer({ min: 15, max: 121 }),
  patchHeightPx: fc.integer({ min: 15, max: 121 }),
  seen: fc.array(point, { minLength: 1, maxLength: 6 }),
});

describe('rectangles to decode', () => {
  it('hold every place where a marker was seen, lie in the frame and are all of one size', () => {
    fc.assert(
      fc.property(
        fc.array(wish, { minLength: 1, maxLength: 4 }),
        fc.double({ min: 1, max: 8, noNaN: true }),
        (wishes, growth) => {
          const regions = planRegions(picture, wishes, growth);
          expect([1, wishes.length]).toContain(regions.length);
          for (const [k, each] of wishes.entries()) {
            const region = regions.length === 1 ? regions[0]! : regions[k]!;
            expect(region.x).toBeGreaterThanOrEqual(0);
            expect(region.y).toBeGreaterThanOrEqual(0);
            expect(region.x + region.width).toBeLessThanOrEqual(1920);
            expect(region.y + region.height).toBeLessThanOrEqual(1080);
            expect([region.width, region.height]).toEqual([regions[0]!.width, regions[0]!.height]);
            for (const seen of each.seen) {
              expect(seen.x).toBeGreaterThanOrEqual(region.x - 1);
              expect(seen.x).toBeLessThanOrEqual(region.x + region.width + 1);
              expect(seen.y).toBeGreaterThanOrEqual(region.y - 1);
              expect(seen.y).toBeLessThanOrEqual(region.y + region.height + 1);
            }
          }
        },
      ),
    );
  });

  it('a small picture is decoded whole, a growing wish ends in the whole picture', () => {
    const one = { patchWidthPx: 41, patchHeightPx: 41, seen: [{ x: 300, y: 200 }] };
    expect(planRegions({ codedWidth: 640, codedHeight: 360 }, [one], 1)).toEqual([
      { x: 0, y: 0, width: 640, height: 360 },
    ]);
    expect(planRegions(picture, [one], 1)[0]!.width).toBeLessThan(200);
    expect(planRegions(picture, [one], 100)).toEqual([{ x: 0, y: 0, width: 1920, height: 1080 }]);
  });
});
