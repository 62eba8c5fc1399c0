import { createRequire } from 'node:module';
import type { FloatImage } from './correlation-map.ts';

/** The little of OpenCV that is used, typed by hand: its own typings describe another build. */
interface OpenCv {
  readonly Mat: new (rows?: number, cols?: number, type?: number) => Mat;
  readonly CV_32FC1: number;
  readonly TM_CCOEFF_NORMED: number;
  matchTemplate(image: Mat, patch: Mat, result: Mat, method: number): void;
  stackSave(): number;
  stackRestore(pointer: number): void;
}

interface Mat {
  readonly data32F: Float32Array;
  delete(): void;
}

// Both abort the process, or hide errors of the host program; the module installs them when it is loaded.
const HIJACKED_EVENTS = ['uncaughtException', 'unhandledRejection'] as const;

let loaded: OpenCv | null = null;

/**
 * Loads OpenCV at first use (about 0.2 s). It must never be awaited or returned from an async function: it is a
 * thenable that resolves to itself, without end.
 */
function openCv(): OpenCv {
  if (loaded) return loaded;
  const before = HIJACKED_EVENTS.map(
    (event) => new Set<unknown>(process.listeners(event as 'uncaughtException')),
  );
  const { cv } = createRequire(import.meta.url)('opencv-wasm') as { cv: OpenCv };
  HIJACKED_EVENTS.forEach((event, k) => {
    for (const listener of process.listeners(event as 'uncaughtException')) {
      if (!before[k]!.has(listener)) process.removeListener(event, listener);
    }
  });
  loaded = cv;
  return cv;
}

/**
 * ZNCC of a patch with an image at every place where it lies inside, by OpenCV's matchTemplate: a `CorrelationMap`
 * for whole frames.
 *
 * @throws Error where the patch is larger than the image, or the wasm heap cannot hold them
 */
export function correlateByOpenCv(image: FloatImage, patch: FloatImage): Float32Array {
  if (patch.width > image.width || patch.height > image.height) {
    throw new Error(
      `a patch of ${patch.width} x ${patch.height} cannot lie in ${image.width} x ${image.height}`,
    );
  }
  const cv = openCv();
  const stack = cv.stackSave();
  const mats: Mat[] = [];
  const matOf = ({ data, width, height }: FloatImage): Mat => {
    const mat = new cv.Mat(height, width, cv.CV_32FC1);
    mats.push(mat);
    mat.data32F.set(data);
    return mat;
  };
  try {
    const imageMat = matOf(image);
    const patchMat = matOf(patch);
    const result = new cv.Mat();
    mats.push(result);
    cv.matchTemplate(imageMat, patchMat, result, cv.TM_CCOEFF_NORMED);
    // A copy, since the heap moves when it grows.
    return withoutFlatPlaces(result.data32F.slice());
  } catch (error) {
    if (typeof error !== 'number') throw error;
    throw new Error(
      `matchTemplate failed with wasm error ${error} on ${image.width} x ${image.height} pixels`,
    );
  } finally {
    for (const mat of mats) mat.delete();
    cv.stackRestore(stack);
  }
}

/** Where the image is flat OpenCV divides by nearly nothing, and anything comes out; that is no match. */
function withoutFlatPlaces(map: Float32Array): Float32Array {
  for (let i = 0; i < map.length; i++) if (!(Math.abs(map[i]!) <= 1.001)) map[i] = 0;
  return map;
}
