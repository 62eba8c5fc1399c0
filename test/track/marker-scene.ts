import { chooseTemplate } from '../../src/track/judge-spot.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';
import { MarkerTracker, type MarkerTrackerOptions } from '../../src/track/marker-tracker.ts';
import type { Template } from '../../src/track/template.ts';
import type { TrackStep } from '../../src/track/track-step.ts';
import { drawField, FINE, makeTexture, type Pose, type Texture, toImage } from './draw-texture.ts';

const PART_HALF_PX = 28;

/** A filmed part on a background. Times in s, places in px. */
export interface MarkerScene {
  readonly width: number;
  readonly height: number;
  /** Where the part is, and how it is turned and lit. */
  readonly pose: (timeS: number) => Pose;
  readonly texture?: Texture;
  readonly noiseDn?: number;
  /** A part that looks the same, at rest. */
  readonly twin?: { readonly x: number; readonly y: number };
  /** Left and right edge of a textured bar from top to bottom, at most 160 px wide; null when it is away. */
  readonly cover?: (timeS: number) => readonly [number, number] | null;
  /** Exposure, s: the picture is the mean over it. */
  readonly exposureS?: number;
}

const PART = makeTexture(FINE, 3, 32);
const BACKGROUND = makeTexture({ sigma: [3, 8], contrastDn: 15 }, 55, 140);
const BAR_WIDTH = 160;
const BAR = drawField(makeTexture({ sigma: [2, 5], contrastDn: 25 }, 77, 120), BAR_WIDTH, 160, {
  x: 80,
  y: 80,
  mean: 90,
});

/** Films a scene at a time; every frame has its own noise. */
export function film(scene: MarkerScene, timeS: number, seed: number): LumaImage {
  const { width, height, exposureS = 0, noiseDn = 2 } = scene;
  const moments = exposureS > 0 ? 8 : 1;
  const mean = new Float64Array(width * height);
  for (let k = 0; k < moments; k++) {
    const field = drawMoment(scene, timeS + exposureS * ((k + 0.5) / moments - 0.5));
    for (let i = 0; i < mean.length; i++) mean[i]! += field[i]! / moments;
  }
  return toImage(mean, width, noiseDn, seed);
}

function drawMoment(scene: MarkerScene, timeS: number): Float64Array {
  const { width, height, texture = PART } = scene;
  const field = Float64Array.from(backgroundOf(width, height));
  for (const pose of [scene.pose(timeS), scene.twin]) if (pose) paste(field, width, texture, pose);
  const edges = scene.cover?.(timeS);
  if (edges) {
    const [left, right] = edges.map(Math.round) as [number, number];
    // The bar's texture moves with it, by whole pixels.
    for (let y = 0; y < height; y++) {
      for (let x = Math.max(0, left); x <= Math.min(width - 1, right); x++) {
        field[y * width + x] = BAR[y * BAR_WIDTH + (x - left)]!;
      }
    }
  }
  return field;
}

const backgrounds = new Map<string, Float64Array>();

function backgroundOf(width: number, height: number): Float64Array {
  const key = `${width} x ${height}`;
  let field = backgrounds.get(key);
  if (!field) {
    field = drawField(BACKGROUND, width, height, { x: width / 2, y: height / 2 });
    backgrounds.set(key, field);
  }
  return field;
}

/** Puts a square part into a picture. */
function paste(field: Float64Array, width: number, texture: Texture, pose: Pose): void {
  const side = 2 * PART_HALF_PX + 1;
  const left = Math.round(pose.x) - PART_HALF_PX;
  const top = Math.round(pose.y) - PART_HALF_PX;
  const part = drawField(texture, side, side, { mean: 120, ...pose, x: pose.x - left, y: pose.y - top });
  const height = field.length / width;
  for (let i = 0; i < part.length; i++) {
    const [x, y] = [left + (i % side), top + Math.floor(i / side)];
    if (x >= 0 && x < width && y >= 0 && y < height) field[y * width + x] = part[i]!;
  }
}

/** A track with the truth beside it. */
export interface FollowedMarker {
  readonly steps: readonly TrackStep[];
  /** Distance from the truth, px; null in gaps. */
  readonly errors: readonly (number | null)[];
  readonly tracker: MarkerTracker;
  /** Frames with this state (and reason). */
  count(state: TrackStep['state'], reason?: TrackStep['reason']): number;
  /** The largest error among frames of a state, px; 0 where there is none. */
  worst(state: 'ok' | 'doubtful'): number;
}

/** How a scene is followed. */
export interface FollowOptions extends MarkerTrackerOptions {
  readonly times: readonly number[];
  /** A template; one of 41 px cut at the part's middle at `templateTimeS` (0) where not given. */
  readonly template?: Template;
  readonly templateTimeS?: number;
  /** Starts without a known place. */
  readonly unknownStart?: boolean;
  /** What the tracker is given of each frame: left, top, width and height; all of it where not given. */
  readonly region?: (k: number) => readonly [number, number, number, number];
}

/** Follows the part of a scene through frames at the given times. */
export function follow(scene: MarkerScene, options: FollowOptions): FollowedMarker {
  const { times, templateTimeS = 0 } = options;
  const marked = scene.pose(templateTimeS);
  const template =
    options.template ??
    chooseTemplate(film(scene, templateTimeS, 1), marked.x, marked.y, { sizePx: 41 }).template!;
  const first = scene.pose(times[0]!);
  const start = options.unknownStart ? {} : { start: options.start ?? { x: first.x, y: first.y } };
  const tracker = new MarkerTracker(template, { ...options, ...start });
  const errors: (number | null)[] = [];
  const steps = times.map((timeS, k) => {
    const [left, top, width, height] = options.region?.(k) ?? [0, 0, scene.width, scene.height];
    const step = tracker.step(
      cutOut(film(scene, timeS, 100 + k), left, top, width, height),
      left,
      top,
      timeS,
    );
    const truth = scene.pose(timeS);
    errors.push(step.state === 'lost' ? null : Math.hypot(step.x - truth.x, step.y - truth.y));
    return step;
  });
  return {
    steps,
    errors,
    tracker,
    count: (state, reason) =>
      steps.filter((step) => step.state === state && (reason === undefined || step.reason === reason)).length,
    worst: (state) =>
      Math.max(0, ...errors.filter((_, k) => steps[k]!.state === state).map((error) => error ?? 0)),
  };
}

function cutOut(image: LumaImage, left: number, top: number, width: number, height: number): LumaImage {
  if (width === image.width && height === image.height) return image;
  const data = new Uint8Array(width * height);
  for (let y = 0; y < height; y++) {
    const from = (top + y) * image.width + left;
    data.set(image.data.subarray(from, from + width), y * width);
  }
  return { data, width, height, maxValue: image.maxValue };
}

/** Frame times at 60 per second. */
export function framesAt60(count: number, startS = 0): number[] {
  return Array.from({ length: count }, (_, k) => startS + k / 60);
}

/** A pose swinging along x. */
export function swinging(
  amplitudePx: number,
  frequencyHz: number,
  x = 90,
  y = 52.3,
): (timeS: number) => Pose {
  return (timeS) => ({ x: x + amplitudePx * Math.sin(2 * Math.PI * frequencyHz * timeS), y });
}
