/**
 * Cubic B-spline interpolation of images: the direct filter that turns pixels into spline coefficients, the
 * four weights of a sample between pixels, and their derivatives.
 * Source: M. Unser, "Splines: a perfect fit for signal and image processing", IEEE Signal Processing Magazine 16,
 * 1999 (recursive direct filter with pole sqrt(3) - 2 and gain 6).
 */

/** The pole of the direct cubic B-spline filter. */
export const POLE = Math.sqrt(3) - 2;

/** The gain of the direct filter along one axis. */
export const DIRECT_FILTER_GAIN = 6;

// The recursion from the end backwards starts as if the signal were mirrored there.
const MIRROR_START = POLE / (POLE * POLE - 1);

/**
 * Filters every column of `image` (row by row, `width` * `height`, height >= 2) in place. Values beyond the upper
 * border count as equal to the border; what that gets wrong fades by |POLE| per row. The gain is left to the caller.
 */
export function filterColumns(image: Float64Array, width: number, height: number): void {
  const atStart = 1 / (1 - POLE);
  for (let i = 0; i < width; i++) image[i]! *= atStart;
  for (let i = width; i < width * height; i++) image[i]! += POLE * image[i - width]!;
  filterColumnsBackwards(image, width, height);
}

/** The second half of `filterColumns`, for callers that did the first, forward recursion themselves. */
export function filterColumnsBackwards(image: Float64Array, width: number, height: number): void {
  const last = (height - 1) * width;
  for (let i = last; i < last + width; i++) {
    image[i] = MIRROR_START * (image[i]! + POLE * image[i - width]!);
  }
  for (let i = last - 1; i >= 0; i--) image[i] = POLE * (image[i + width]! - image[i]!);
}

/** Filters every row of `image` (width >= 2) in place, borders as in `filterColumns`, gain left to the caller. */
export function filterRows(image: Float64Array, width: number, height: number): void {
  const atStart = 1 / (1 - POLE);
  let row = 0;
  // Each step of the recursion waits for the one before; four rows at a time fill the wait.
  for (; row + 4 <= height; row += 4) {
    const a = row * width;
    const b = a + width;
    const c = b + width;
    const d = c + width;
    let pa = image[a]! * atStart;
    let pb = image[b]! * atStart;
    let pc = image[c]! * atStart;
    let pd = image[d]! * atStart;
    image[a] = pa;
    image[b] = pb;
    image[c] = pc;
    image[d] = pd;
    for (let x = 1; x < width; x++) {
      pa = image[a + x]! + POLE * pa;
      pb = image[b + x]! + POLE * pb;
      pc = image[c + x]! + POLE * pc;
      pd = image[d + x]! + POLE * pd;
      image[a + x] = pa;
      image[b + x] = pb;
      image[c + x] = pc;
      image[d + x] = pd;
    }
    const last = width - 1;
    pa = MIRROR_START * (pa + POLE * image[a + last - 1]!);
    pb = MIRROR_START * (pb + POLE * image[b + last - 1]!);
    pc = MIRROR_START * (pc + POLE * image[c + last - 1]!);
    pd = MIRROR_START * (pd + POLE * image[d + last - 1]!);
    image[a + last] = pa;
    image[b + last] = pb;
    image[c + last] = pc;
    image[d + last] = pd;
    for (let x = last - 1; x >= 0; x--) {
      pa = POLE * (pa - image[a + x]!);
      pb = POLE * (pb - image[b + x]!);
      pc = POLE * (pc - image[c + x]!);
      pd = POLE * (pd - image[d + x]!);
      image[a + x] = pa;
      image[b + x] = pb;
      image[c + x] = pc;
      image[d + x] = pd;
    }
  }
  for (; row < height; row++) filterRow(image, row * width, width, atStart);
}

function filterRow(image: Float64Array, start: number, width: number, atStart: number): void {
  const end = start + width - 1;
  image[start]! *= atStart;
  for (let i = start + 1; i <= end; i++) image[i]! += POLE * image[i - 1]!;
  image[end] = MIRROR_START * (image[end]! + POLE * image[end - 1]!);
  for (let i = end - 1; i >= start; i--) image[i] = POLE * (image[i + 1]! - image[i]!);
}

/**
 * Writes the four weights of a sample at `fraction` (0 to 1) past a pixel; they belong to the coefficients of the
 * pixel before, this one, and the next two. They sum to 1.
 */
export function cubicWeights(fraction: number, weights: Float64Array): void {
  const rest = 1 - fraction;
  const square = fraction * fraction;
  weights[0] = (rest * rest * rest) / 6;
  weights[1] = 2 / 3 - square + 0.5 * square * fraction;
  weights[2] = 2 / 3 - rest * rest + 0.5 * rest * rest * rest;
  weights[3] = (square * fraction) / 6;
}

/** Writes the derivatives of the four weights of `cubicWeights` by position, per pixel. They sum to 0. */
export function cubicDerivativeWeights(fraction: number, weights: Float64Array): void {
  const rest = 1 - fraction;
  weights[0] = -0.5 * rest * rest;
  weights[1] = fraction * (1.5 * fraction - 2);
  weights[2] = rest * (2 - 1.5 * rest);
  weights[3] = 0.5 * fraction * fraction;
}
