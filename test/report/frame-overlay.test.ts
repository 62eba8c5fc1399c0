import { describe, expect, it } from 'vitest';
import { frameOverlay } from '../../src/report/frame-overlay.ts';
import type { SetupPicture } from '../../src/report/frame-pictures.ts';
import { lengthUnit } from '../../src/report/length-unit.ts';
import { principalDirection } from '../../src/report/seen-direction.ts';
import type { Setup } from '../../src/testfile/schema.ts';

const PICTURE: SetupPicture = {
  setup: 'tripod',
  clip: 'c1',
  frame: 3,
  jpeg: Uint8Array.of(0xff, 0xd8, 0xff),
  displayedWidth: 1000,
  displayedHeight: 600,
};
const SETUP: Setup = {
  id: 'tripod',
  scale: { from: [100, 500], to: [400, 500], length: 254 },
  motionAxis: 'auto',
  markers: [
    { id: '<b>board</b>', role: 'response', at: [500, 200], size: [30, 20] },
    { id: 'table', role: 'drive', at: [200, 220] },
  ],
};

describe('frameOverlay', () => {
  const svg = frameOverlay(PICTURE, SETUP, { x: 1, y: 0 }, lengthUnit(false)).markup;

  it('holds the picture whole, with pixel centres at integers: it begins half a pixel before 0', () => {
    expect(svg).toContain('viewBox="-0.5 -0.5 1000 600"');
    expect(svg).toContain('href="data:image/jpeg;base64,/9j/"');
  });

  it('draws the patch about the marker, the scale between its points, the axis through the response marker', () => {
    expect(svg).toContain('<rect x="485" y="190" width="30" height="20"');
    expect(svg).toContain('x1="100.000" y1="500.000" x2="400.000" y2="500.000"');
    expect(svg).toContain('x1="280.000" y1="200.000" x2="720.000" y2="200.000"');
    expect(svg).toContain('scale 254.00 mm');
    expect(frameOverlay(PICTURE, SETUP, null, lengthUnit(true)).markup).toContain('scale 10.000 in');
  });

  it('draws a marked axis where it was marked', () => {
    const marked = { ...SETUP, motionAxis: { from: [10, 20], to: [30, 40] } } as Setup;
    expect(frameOverlay(PICTURE, marked, null, lengthUnit(false)).markup).toContain(
      'x1="10.0000" y1="20.0000" x2="30.0000" y2="40.0000"',
    );
  });

  it('names markers as text, never as markup', () => {
    expect(svg).toContain('response: &lt;b&gt;board&lt;/b&gt;');
  });
});

describe('principalDirection', () => {
  it('is the direction of motion, gaps left out', () => {
    const t = Float64Array.from({ length: 50 }, (_, i) => Math.sin(i));
    const x = t.map((v) => 100 + 4 * v);
    const y = t.map((v) => 50 + 3 * v);
    x[7] = Number.NaN;
    const found = principalDirection(x, y);
    expect(found?.x).toBeCloseTo(0.8, 12);
    expect(found?.y).toBeCloseTo(0.6, 12);
  });

  it('is nothing where nothing moves', () => {
    expect(principalDirection(new Float64Array(9).fill(3), new Float64Array(9).fill(4))).toBeNull();
    expect(principalDirection(Float64Array.of(1), Float64Array.of(1))).toBeNull();
  });
});
