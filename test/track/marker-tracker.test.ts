import { describe, expect, test } from 'vitest';
import { chooseTemplate } from '../../src/track/judge-spot.ts';
import { MarkerTracker } from '../../src/track/marker-tracker.ts';
import { drawImage, makeTexture, SOFT } from './draw-texture.ts';
import { film, follow, framesAt60, type MarkerScene, swinging } from './marker-scene.ts';

const FRAME = { width: 180, height: 110 };
// 41 px of this texture at 2 DN of noise: 0.004 px per axis; five times that never happens by chance.
const WORST_PX = 0.03;

describe('a marker in full view', () => {
  test.each([
    ['swings by 20 px at 5 Hz', swinging(20, 5)],
    ['swings by 30 px at 12 Hz, 37 px a frame', swinging(30, 12)],
    ['rests', swinging(0, 1)],
    ['creeps', (t: number) => ({ x: 80 + 8 * t, y: 52.3 })],
  ])('%s: every frame is ok and true', (_name, pose) => {
    const track = follow({ ...FRAME, pose }, { times: framesAt60(90) });
    expect(track.count('ok')).toBe(90);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('uncertainties are what the errors are: 68 of 100 within one, none beyond five', () => {
    const track = follow({ ...FRAME, pose: swinging(15, 5), noiseDn: 4 }, { times: framesAt60(150) });
    const scene = swinging(15, 5);
    const errors = track.steps.map((step, k) => (step.x! - scene(k / 60).x) / step.uXPx!);
    const mean = errors.reduce((sum, error) => sum + error, 0) / errors.length;
    // The template's own noise moves all frames alike and is not part of the uncertainty.
    const within = errors.filter((error) => Math.abs(error - mean) < 1).length / errors.length;
    expect(within).toBeGreaterThan(0.58);
    expect(within).toBeLessThan(0.78);
    expect(errors.every((error) => Math.abs(error - mean) < 5)).toBe(true);
  });

  test('no drift: after 300 frames the error is still that of one frame', () => {
    const track = follow({ ...FRAME, pose: swinging(3, 2), noiseDn: 4 }, { times: framesAt60(300) });
    const late = track.errors.slice(280).reduce<number>((sum, error) => sum + error! / 20, 0);
    const early = track.errors.slice(0, 20).reduce<number>((sum, error) => sum + error! / 20, 0);
    expect(Math.abs(late - early)).toBeLessThan(0.01);
  });

  test('frames may be dropped, unevenly timed, or run backwards from the start frame', () => {
    const pose = swinging(25, 6);
    const dropped = framesAt60(140).filter((_, k) => k % 9 !== 7);
    const backwards = framesAt60(120).map((t) => 2 - t);
    for (const times of [dropped, backwards]) {
      const track = follow({ ...FRAME, pose }, { times, templateTimeS: times[0]! });
      expect(track.count('ok')).toBe(times.length);
      expect(track.worst('ok')).toBeLessThan(WORST_PX);
    }
  });

  test('light swinging by 20 % is held', () => {
    const pose = (t: number) => {
      const gain = 1 + 0.2 * Math.sin(9 * t);
      return { ...swinging(15, 5)(t), gain, mean: 120 * gain };
    };
    const track = follow({ ...FRAME, pose }, { times: framesAt60(90) });
    expect(track.count('ok')).toBe(90);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('motion blur of 4 px in mid-stroke is followed, with exposure attenuating by sinc(f Te) only', () => {
    const scene: MarkerScene = { ...FRAME, pose: swinging(15, 5), exposureS: 1 / 120 };
    // Mark at a turning point, where the picture is sharp.
    const track = follow(scene, { times: framesAt60(60, 0.05), templateTimeS: 0.05 });
    expect(track.count('lost')).toBe(0);
    const attenuation = Math.sin((5 * Math.PI) / 120) / ((5 * Math.PI) / 120);
    const seen = track.steps.map(
      (step, k) => step.x! - 90 - 15 * attenuation * Math.sin(2 * Math.PI * 5 * (0.05 + k / 60)),
    );
    const mean = seen.reduce((sum, error) => sum + error, 0) / seen.length;
    expect(Math.max(...seen.map((error) => Math.abs(error - mean)))).toBeLessThan(0.06);
  });
});

test('growing motion blur, up to 10 px: the template is smeared alike, so that no frame is in doubt', () => {
  const pose = (t: number) => ({ x: 90 + 13 * t * Math.sin(2 * Math.PI * 5 * t), y: 52.3 });
  const track = follow({ ...FRAME, pose, exposureS: 1 / 60 }, { times: framesAt60(90) });
  expect(track.count('ok')).toBe(90);
  const smears = track.steps.map((step) => (step.state === 'lost' ? 0 : step.blurPx));
  expect(smears.slice(0, 20).every((smear) => smear === 0)).toBe(true);
  expect(Math.max(...smears)).toBeGreaterThan(6);
});

describe('a part that turns', () => {
  test.each([
    [4, undefined],
    [1.5, makeTexture(SOFT, 3, 36)],
  ])('by %d degrees: the affine warp is chosen without being asked', (degrees, texture) => {
    const pose = (t: number) => ({
      ...swinging(15, 5)(t),
      angleRad: ((degrees * Math.PI) / 180) * Math.sin(2 * Math.PI * 5 * t),
    });
    const scene = { ...FRAME, pose, ...(texture && { texture }) };
    const track = follow(scene, { times: framesAt60(120) });
    expect(track.tracker.model).toBe('affine');
    expect(track.count('ok')).toBe(120);
    // Soft texture: 0.01 px a frame, and 0.02 px of template noise.
    expect(track.worst('ok')).toBeLessThan(texture ? 0.06 : WORST_PX);
    const asked = follow(scene, { times: framesAt60(20), model: 'translation' });
    expect(asked.tracker.model).toBe('translation');
    expect(Math.max(asked.worst('ok'), asked.worst('doubtful'))).toBeGreaterThan(0.06);
  });

  test('one that does not turn keeps to the translation, covered or not', () => {
    const scene: MarkerScene = {
      ...FRAME,
      pose: swinging(10, 5),
      cover: (t) => [120 * t - 60, 120 * t - 10],
    };
    expect(follow(scene, { times: framesAt60(150) }).tracker.model).toBe('translation');
  });
});

describe('a marker that is covered', () => {
  // A bar of 50 px crosses at 180 px/s, or at 90 px/s.
  test.each([180, 90])(
    'by a textured bar at %d px/s: gaps, not points; no jump to the bar; ok again after',
    (speed) => {
      const scene: MarkerScene = {
        ...FRAME,
        pose: swinging(8, 5),
        cover: (t) => [speed * t - 60, speed * t - 10],
      };
      const frames = Math.ceil((60 * 230) / speed);
      const track = follow(scene, { times: framesAt60(frames) });
      const covered = (k: number): number => {
        const [left, right] = scene.cover!(k / 60)!;
        const x = scene.pose(k / 60).x;
        return Math.max(0, Math.min(right, x + 20) - Math.max(left, x - 20)) / 41;
      };
      expect(track.count('lost')).toBeGreaterThan(0.5 * ((60 * 50) / speed));
      // Little covered: a small error at most. Much covered: not ok. Wholly covered: a gap.
      expect(track.worst('ok')).toBeLessThan(0.06);
      expect(track.worst('doubtful')).toBeLessThan(0.6);
      track.steps.forEach((step, k) => {
        if (covered(k) > 0.95)
          expect(step).toMatchObject({ state: 'lost', x: null, y: null, uPx: null, reason: 'covered' });
        if (covered(k) > 0.3) expect(step.state).not.toBe('ok');
      });
      expect(track.steps.slice(-10).every(({ state }) => state === 'ok')).toBe(true);
    },
  );

  test('while it stands still: found again where it was, not a pixel elsewhere', () => {
    const scene: MarkerScene = {
      ...FRAME,
      pose: swinging(0, 1),
      cover: (t) => (t > 0.5 && t < 1 ? [40, 160] : null),
    };
    const track = follow(scene, { times: framesAt60(90) });
    expect(track.count('lost')).toBe(29);
    expect(track.count('ok')).toBe(61);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('from the first frame on: no point until it is seen', () => {
    const scene: MarkerScene = { ...FRAME, pose: swinging(8, 5), cover: (t) => (t < 0.2 ? [40, 160] : null) };
    for (const unknownStart of [false, true]) {
      const track = follow(scene, { times: framesAt60(60), unknownStart, templateTimeS: 0.5 });
      expect(track.steps.slice(0, 12).every(({ state }) => state === 'lost')).toBe(true);
      expect(track.steps.slice(14).every(({ state }) => state === 'ok')).toBe(true);
      expect(track.worst('ok')).toBeLessThan(WORST_PX);
    }
  });
});

describe('look-alikes', () => {
  const wide = { width: 250, height: 110 };

  test('a twin is taken at most in doubt while the marker is covered, and left when it is back', () => {
    const scene: MarkerScene = {
      ...wide,
      pose: swinging(5, 5, 60),
      twin: { x: 200, y: 52 },
      cover: (t) => (t > 0.5 && t < 1.2 ? [10, 110] : null),
    };
    const track = follow(scene, { times: framesAt60(120) });
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
    expect(track.count('doubtful', 'found-elsewhere')).toBeGreaterThan(0);
    expect(track.steps.slice(-30).every(({ state }) => state === 'ok')).toBe(true);
  });

  test('a twin in view does no harm while the marker is in view', () => {
    const scene: MarkerScene = {
      ...wide,
      pose: swinging(5, 5, 60),
      twin: { x: 200, y: 52 },
      cover: (t) => (t > 0.5 && t < 0.6 ? [10, 110] : null),
    };
    const track = follow(scene, { times: framesAt60(70) });
    expect(track.count('doubtful')).toBe(0);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('two alike and no place known: measured, but in doubt throughout', () => {
    const scene: MarkerScene = { ...wide, pose: swinging(5, 5, 60), twin: { x: 200, y: 52 } };
    const track = follow(scene, { times: framesAt60(20), unknownStart: true });
    expect(track.count('doubtful', 'ambiguous')).toBe(20);
    expect(track.tracker.lastSearch).toMatchObject({ ambiguous: true });
  });

  test('a repeating texture that leaps by more than a third of its repeat is in doubt, or lost, from then on', () => {
    const size = 160;
    const image = (x: number) => {
      const at = (k: number): number => Math.sin((2 * Math.PI * k) / 18);
      const data = Uint8Array.from(
        { length: size * size },
        (_, i) => 120 + 60 * at((i % size) - x) * at(Math.floor(i / size)),
      );
      return { data, width: size, height: size, maxValue: 255 };
    };
    // The pattern repeats after 9 px along both axes, which is 12.7 px; the prediction for the third frame is 2 px.
    for (const [leap, reason] of [
      [6.35, 'alias-jump'],
      [7, 'ambiguous'],
    ] as const) {
      const template = chooseTemplate(image(0), 80, 80, { sizePx: 41 }).template!;
      const tracker = new MarkerTracker(template, { start: { x: 80, y: 80 } });
      expect(tracker.step(image(0), 0, 0, 0).state).toBe('ok');
      expect(tracker.step(image(1), 0, 0, 1 / 60).state).toBe('ok');
      expect(tracker.step(image(leap), 0, 0, 2 / 60)).toMatchObject({ reason });
      for (let k = 3; k < 8; k++) expect(tracker.step(image(leap), 0, 0, k / 60).state).not.toBe('ok');
    }
  });
});

describe("a setup's template in another clip", () => {
  const elsewhere: MarkerScene = {
    ...FRAME,
    pose: (t) => ({ ...swinging(10, 5, 120, 50.6)(t), gain: 0.8, mean: 100 }),
  };
  const template = chooseTemplate(film({ ...FRAME, pose: swinging(0, 1, 60) }, 0, 5), 60, 52.3, {
    sizePx: 41,
  }).template!;

  test('is found without a click where the part stands elsewhere in other light', () => {
    const track = follow(elsewhere, { times: framesAt60(60), template, unknownStart: true });
    expect(track.count('ok')).toBe(60);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('also from a start that is wrong by 60 px', () => {
    const track = follow(elsewhere, { times: framesAt60(60), template, start: { x: 60, y: 52 } });
    expect(track.count('ok')).toBe(60);
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });

  test('is not found where it is not', () => {
    const image = drawImage(makeTexture(SOFT, 44, 80), 140, { x: 70, y: 70, noiseDn: 2 });
    const tracker = new MarkerTracker(template);
    const step = tracker.step(image, 0, 0, 0);
    expect(step).toMatchObject({ state: 'lost', reason: 'covered', roomPx: null, nearBorder: false });
    expect(tracker.lastKnown).toBeNull();
    expect(tracker.travel).toBeNull();
  });
});

describe('regions', () => {
  test('a region gives the positions that the whole frame gives, in coordinates of the frame', () => {
    const scene: MarkerScene = { ...FRAME, pose: swinging(10, 5) };
    const whole = follow(scene, { times: framesAt60(40) });
    const part = follow(scene, { times: framesAt60(40), region: () => [46, 12, 92, 80] });
    part.steps.forEach((step, k) => {
      expect(step.x).toBeCloseTo(whole.steps[k]!.x!, 6);
      expect(step.y).toBeCloseTo(whole.steps[k]!.y!, 6);
    });
    expect(part.tracker.travel!.maxX - part.tracker.travel!.minX).toBeCloseTo(20, 0);
  });

  test('nearing the border is told before the marker is lost there, and it is found in a wider region', () => {
    const scene: MarkerScene = { width: 250, height: 110, pose: (t) => ({ x: 80 + 60 * t, y: 52.3 }) };
    let asked = -1;
    const track = follow(scene, {
      times: framesAt60(120),
      region: (k) => (k < 80 ? [30, 4, 110, 100] : [30, 4, 220, 100]),
    });
    track.steps.forEach((step, k) => {
      if (step.nearBorder && asked < 0) asked = k;
    });
    const lost = track.steps.findIndex(({ state }) => state === 'lost');
    // At 1 px a frame the patch touches the border at frame 39.
    expect(lost).toBeGreaterThanOrEqual(39);
    expect(asked).toBeGreaterThan(25);
    expect(asked).toBeLessThan(lost - 5);
    expect(track.steps[lost]).toMatchObject({ reason: 'at-border', nearBorder: true });
    expect(track.steps[80]!.state).not.toBe('lost');
    expect(track.worst('ok')).toBeLessThan(WORST_PX);
  });
});
