import { invertSymmetric } from '../numeric/linear-algebra.ts';
import type { Template } from './template.ts';

/** What a registrar needs of a template, computed once. */
export interface SteepestDescent {
  /** Template values less their mean, row by row. */
  readonly centred: Float64Array;
  /** Sum of their squares. */
  readonly energy: number;
  /** One image per parameter, one after the other, orthogonal to a constant and to the template. */
  readonly images: Float64Array;
  /** Their Gauss-Newton matrix, `parameters` * `parameters`. */
  readonly hessian: Float64Array;
  /** Null where the template has no texture, or none along one direction. */
  readonly inverseHessian: Float64Array | null;
  readonly parameters: 2 | 6;
}

/**
 * The steepest-descent images of inverse-compositional Gauss-Newton registration (S. Baker and I. Matthews, "Lucas-Kanade
 * 20 years on", IJCV 56, 2004) for a translation (x, y) or an affine warp (x, y, xx, xy, yx, yy about the
 * patch's centre). Gain and offset of the frame are nuisance parameters: each image is made orthogonal to the
 * constant and to the template, so that neither moves the answer.
 */
export function steepestDescent(template: Template, parameters: 2 | 6): SteepestDescent {
  const { widthPx, heightPx, values, gradientX, gradientY } = template;
  const count = widthPx * heightPx;
  const centred = lessMean(values);
  const energy = dot(centred, 0, centred, 0, count);

  const images = new Float64Array(count * parameters);
  images.set(gradientX, 0);
  images.set(gradientY, count);
  if (parameters === 6) {
    const halfX = (widthPx - 1) / 2;
    const halfY = (heightPx - 1) / 2;
    for (let row = -halfY, i = 0; row <= halfY; row++) {
      for (let column = -halfX; column <= halfX; column++, i++) {
        images[2 * count + i] = gradientX[i]! * column;
        images[3 * count + i] = gradientX[i]! * row;
        images[4 * count + i] = gradientY[i]! * column;
        images[5 * count + i] = gradientY[i]! * row;
      }
    }
  }
  for (let k = 0; k < parameters; k++) project(images, k * count, centred, energy);

  const hessian = new Float64Array(parameters * parameters);
  for (let a = 0; a < parameters; a++) {
    for (let b = a; b < parameters; b++) {
      const sum = dot(images, a * count, images, b * count, count);
      hessian[a * parameters + b] = sum;
      hessian[b * parameters + a] = sum;
    }
  }
  return {
    centred,
    energy,
    images,
    hessian,
    inverseHessian: invertSymmetric(hessian, parameters),
    parameters,
  };
}

/**
 * The inverse Gauss-Newton matrix of a template that is to be registered.
 *
 * @throws Error where there is none: `judgeSpot` tells so beforehand
 */
export function requireInverse(descent: SteepestDescent): Float64Array {
  if (descent.inverseHessian) return descent.inverseHessian;
  throw new Error('a template without texture in two directions cannot be registered');
}

function lessMean(values: Float64Array): Float64Array {
  let sum = 0;
  for (const value of values) sum += value;
  const mean = sum / values.length;
  return values.map((value) => value - mean);
}

/** Makes one image orthogonal to the constant and to the template. */
function project(images: Float64Array, start: number, centred: Float64Array, energy: number): void {
  const count = centred.length;
  let sum = 0;
  for (let i = 0; i < count; i++) sum += images[start + i]!;
  const along = energy > 0 ? dot(images, start, centred, 0, count) / energy : 0;
  for (let i = 0; i < count; i++) images[start + i]! -= sum / count + along * centred[i]!;
}

function dot(a: Float64Array, startA: number, b: Float64Array, startB: number, count: number): number {
  let sum = 0;
  for (let i = 0; i < count; i++) sum += a[startA + i]! * b[startB + i]!;
  return sum;
}
