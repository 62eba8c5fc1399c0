import { cutTemplate } from '../../src/track/cut-template.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';
import type { Registration } from '../../src/track/registration.ts';
import { shiftBoundPx } from '../../src/track/registration-uncertainty.ts';
import type { Template } from '../../src/track/template.ts';
import { drawField, type Pose, type Texture, toImage } from './draw-texture.ts';
import { seededRandom } from './seeded-random.ts';

const ROOM_PX = 10;

/** A textured part seen in many places between pixels, of which noisy pictures are made. */
export interface Scene {
  readonly size: number;
  readonly centre: number;
  readonly patchPx: number;
  readonly texture: Texture;
  readonly poses: readonly Required<Pick<Pose, 'x' | 'y' | 'angleRad' | 'gain'>>[];
  readonly fields: readonly Float64Array[];
}

/** How the poses of a scene are spread. */
export interface PoseSpread {
  readonly count: number;
  readonly angleRad?: number;
  /** Contrast from 1 - spread to 1 + spread. */
  readonly gain?: number;
}

/** Draws a texture at `count` places within +-2 px of the middle, whose sub-pixel phases fill the pixel evenly. */
export function makeScene(texture: Texture, patchPx: number, spread: PoseSpread): Scene {
  const size = patchPx + 2 * ROOM_PX;
  const centre = (size - 1) / 2;
  const poses = Array.from({ length: spread.count }, (_, k) => {
    // Additive recurrence with the plastic number (R2 sequence): even in two dimensions without a grid.
    const [a, b] = [(0.5 + 0.7548776662 * (k + 1)) % 1, (0.5 + 0.5698402909 * (k + 1)) % 1];
    const turn = spread.count > 1 ? (2 * ((k * 7) % spread.count)) / (spread.count - 1) - 1 : 0;
    return {
      x: centre + 4 * a - 2,
      y: centre + 4 * b - 2,
      angleRad: turn * (spread.angleRad ?? 0),
      gain: 1 + turn * (spread.gain ?? 0),
    };
  });
  // Light changes the whole picture, its mean too.
  const fields = poses.map((pose) => drawField(texture, size, size, { ...pose, mean: 120 * pose.gain }));
  return { size, centre, patchPx, texture, poses, fields };
}

/** The part where the template is cut: in the middle, straight, with light 1. */
export function referenceImage(scene: Scene, noiseDn: number, seed: number): LumaImage {
  const { size, centre, texture } = scene;
  return toImage(drawField(texture, size, size, { x: centre, y: centre }), size, noiseDn, seed);
}

/** A template of the scene's part. */
export function referenceTemplate(scene: Scene, noiseDn: number, seed: number): Template {
  return cutTemplate(referenceImage(scene, noiseDn, seed), scene.centre, scene.centre, {
    widthPx: scene.patchPx,
  });
}

/** The noisy picture of a pose. */
export function trialImage(scene: Scene, pose: number, noiseDn: number, trial: number): LumaImage {
  const seed = 1 + pose + 1009 * trial + Math.round(7_919_000 * noiseDn);
  return toImage(scene.fields[pose]!, scene.size, noiseDn, seed);
}

/** What many registrations came out with. */
export interface Trials {
  /** Errors about their mean (the template's own offset), both axes, px. */
  readonly rmsPx: number;
  /** That over the bound for noise and rounding, both axes. */
  readonly rmsToBound: number;
  readonly meanX: number;
  readonly meanY: number;
  readonly errorsX: Float64Array;
  readonly errorsY: Float64Array;
  readonly lowestScore: number;
  /** Root mean square of what `uncertainty` said, over the errors'. */
  readonly uncertaintyToRms: number;
}

/** Registers every pose `trialsPerPose` times from near the truth and compares with it. */
export function runTrials(
  scene: Scene,
  noiseDn: number,
  trialsPerPose: number,
  register: (image: LumaImage, x: number, y: number) => Registration,
  uncertainty?: (registration: Registration) => { readonly xx: number; readonly yy: number } | null,
): Trials {
  const random = seededRandom(2024);
  const count = scene.poses.length * trialsPerPose;
  const errorsX = new Float64Array(count);
  const errorsY = new Float64Array(count);
  let lowestScore = 1;
  let said = 0;
  for (let pose = 0, i = 0; pose < scene.poses.length; pose++) {
    for (let trial = 0; trial < trialsPerPose; trial++, i++) {
      const { x, y } = scene.poses[pose]!;
      const image = trialImage(scene, pose, noiseDn, trial);
      const found = register(image, x + 0.3 * random.normal(), y + 0.3 * random.normal());
      if (!found.converged) throw new Error(`pose ${pose} was not registered`);
      errorsX[i] = found.x - x;
      errorsY[i] = found.y - y;
      lowestScore = Math.min(lowestScore, found.score);
      const covariance = uncertainty?.(found);
      if (covariance) said += covariance.xx + covariance.yy;
    }
  }
  const [meanX, meanY] = [mean(errorsX), mean(errorsY)];
  const square = spread(errorsX, meanX) + spread(errorsY, meanY);
  const bound = sceneBoundPx(scene, Math.hypot(noiseDn, Math.sqrt(1 / 12)));
  const rmsPx = Math.sqrt(square / 2);
  return {
    rmsPx,
    rmsToBound: Math.sqrt(square / (bound.x ** 2 + bound.y ** 2)),
    meanX,
    meanY,
    errorsX,
    errorsY,
    lowestScore,
    uncertaintyToRms: Math.sqrt(said / count / square),
  };
}

/** Least possible standard deviations for a scene's part in noise, from exact gradients. */
export function sceneBoundPx(scene: Scene, noiseDn: number): { readonly x: number; readonly y: number } {
  const { size, centre, texture, patchPx } = scene;
  const step = 0.01;
  const gradient = (dx: number, dy: number): Float64Array => {
    const ahead = drawField(texture, size, size, { x: centre + dx, y: centre + dy });
    const behind = drawField(texture, size, size, { x: centre - dx, y: centre - dy });
    const patch = new Float64Array(patchPx * patchPx);
    for (let i = 0; i < patch.length; i++) {
      const at = (ROOM_PX + Math.floor(i / patchPx)) * size + ROOM_PX + (i % patchPx);
      patch[i] = (ahead[at]! - behind[at]!) / (2 * step);
    }
    return patch;
  };
  return { x: shiftBoundPx(noiseDn, gradient(step, 0))!, y: shiftBoundPx(noiseDn, gradient(0, step))! };
}

function mean(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function spread(values: Float64Array, about: number): number {
  return values.reduce((sum, value) => sum + (value - about) ** 2, 0) / values.length;
}
