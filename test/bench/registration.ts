import { BlobTexture } from '../../fixtures/render/blob-texture.ts';
import { seededRandom } from '../../fixtures/render/random.ts';
import { cutTemplate } from '../../src/track/cut-template.ts';
import { TranslationRegistrar } from '../../src/track/icgn-translation.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';

/** How well a patch of known shift is found. */
export interface RegistrationResult {
  readonly noiseDn: number;
  readonly patchPx: number;
  readonly frames: number;
  /** Root mean square of the error along one axis, px; the template's own constant offset is taken out. */
  readonly rmsPx: number;
  /** Cramér-Rao bound along one axis, px, for a template without noise and gain and offset known. */
  readonly boundPx: number;
  /** Frames that were not registered. */
  readonly lost: number;
}

const PATCH_PX = 41;
const IMAGE_PX = 81;
const MEAN_DN = 120;

/**
 * Registers a texture at shifts spread evenly over a pixel, with white noise and 8-bit rounding. The pictures are
 * integrals of a formula over each pixel, so the shifts are exact.
 *
 * Bound: Robinson and Milanfar, "Fundamental performance limits in image registration" (2004): the inverse of
 * the gradients' second-moment matrix times the noise variance.
 */
export function registration(noiseDn: number, frames: number): RegistrationResult {
  const texture = new BlobTexture(IMAGE_PX, IMAGE_PX, {
    seed: 21,
    density: 0.24,
    sigmaPx: [0.9, 2],
    contrastDn: 28,
  });
  const random = seededRandom(22);
  const middle = (IMAGE_PX - 1) / 2;
  const picture = (x: number, y: number): LumaImage => {
    const grey = exactPicture(texture, x, y);
    const data = Uint8ClampedArray.from(grey, (value) => MEAN_DN + value + noiseDn * random.normal());
    return { data: new Uint8Array(data.buffer), width: IMAGE_PX, height: IMAGE_PX, maxValue: 255 };
  };
  const registrar = new TranslationRegistrar(
    cutTemplate(picture(0, 0), middle, middle, { widthPx: PATCH_PX, noiseDn }),
  );
  const errors: number[][] = [[], []];
  let lost = 0;
  for (let frame = 0; frame < frames; frame++) {
    // Golden-ratio steps fill the pixel evenly in both directions.
    const x = 3 * ((((frame + 1) * 0.618033988749895) % 1) - 0.5);
    const y = 3 * ((((frame + 1) * 0.754877666246693) % 1) - 0.5);
    const found = registrar.register(picture(x, y), middle + Math.round(x), middle + Math.round(y));
    if (!found.converged) lost++;
    else {
      errors[0]!.push(found.x - middle - x);
      errors[1]!.push(found.y - middle - y);
    }
  }
  return {
    noiseDn,
    patchPx: PATCH_PX,
    frames,
    rmsPx: rmsAboutMean(errors),
    boundPx: bound(texture, noiseDn),
    lost,
  };
}

function exactPicture(texture: BlobTexture, x: number, y: number): Float32Array {
  const grey = new Float32Array(IMAGE_PX * IMAGE_PX);
  texture.addTo(grey, IMAGE_PX, 1, -x, -y);
  return grey;
}

/** Root mean square over both axes, each about its own mean. */
function rmsAboutMean(axes: readonly (readonly number[])[]): number {
  let [sum, count] = [0, 0];
  for (const errors of axes) {
    const mean = errors.reduce((total, error) => total + error, 0) / errors.length;
    for (const error of errors) sum += (error - mean) ** 2;
    count += errors.length;
  }
  return Math.sqrt(sum / count);
}

/** Root mean square over both axes of the least standard deviation. */
function bound(texture: BlobTexture, noiseDn: number): number {
  const step = 0.01;
  const slope = (dx: number, dy: number): Float64Array => {
    const [ahead, back] = [exactPicture(texture, -dx, -dy), exactPicture(texture, dx, dy)];
    return Float64Array.from(ahead, (value, n) => (value - back[n]!) / (2 * step));
  };
  const [alongX, alongY] = [slope(step, 0), slope(0, step)];
  const first = (IMAGE_PX - PATCH_PX) / 2;
  let [xx, xy, yy] = [0, 0, 0];
  for (let row = first; row < first + PATCH_PX; row++) {
    for (let column = first; column < first + PATCH_PX; column++) {
      const at = row * IMAGE_PX + column;
      xx += alongX[at]! ** 2;
      xy += alongX[at]! * alongY[at]!;
      yy += alongY[at]! ** 2;
    }
  }
  // Rounding to whole steps adds the variance of a uniform distribution one step wide.
  const variance = noiseDn ** 2 + 1 / 12;
  return Math.sqrt((variance * (xx + yy)) / (2 * (xx * yy - xy * xy)));
}
