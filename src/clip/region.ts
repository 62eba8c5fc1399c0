/**
 * A rectangle of the stored picture (before rotation and pixel aspect): top left corner and size in whole
 * pixels, covering the pixel centres x to x + width - 1 and y to y + height - 1.
 */
export interface Region {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** Size of a stored picture, px. */
export interface CodedSize {
  readonly codedWidth: number;
  readonly codedHeight: number;
}

/**
 * The rectangle that is really decoded for a wished one: all numbers even (chroma samples come in pairs, and an
 * odd corner would silently be moved by the decoder), at least 2 x 2, shifted inside the picture rather than cut,
 * cut only where it is larger than the picture. The whole picture stays whole even when its size is odd.
 *
 * The size depends on the wished size alone, so that equal wishes stay equal: an odd corner moves up and left by
 * one, and with it the far edge. Applying it twice changes nothing.
 */
export function fitRegion(wished: Region, picture: CodedSize): Region {
  const { codedWidth, codedHeight } = picture;
  if (wished.x <= 0 && wished.y <= 0 && right(wished) >= codedWidth && bottom(wished) >= codedHeight) {
    return { x: 0, y: 0, width: codedWidth, height: codedHeight };
  }
  const [x, width] = fitSpan(wished.x, wished.width, codedWidth);
  const [y, height] = fitSpan(wished.y, wished.height, codedHeight);
  return { x, y, width, height };
}

function fitSpan(start: number, length: number, limit: number): [start: number, length: number] {
  const room = floorEven(limit);
  const fitted = Math.min(Math.max(2, floorEven(Math.ceil(length) + 1)), room);
  return [Math.min(Math.max(0, floorEven(Math.floor(start))), room - fitted), fitted];
}

const right = (r: Region): number => r.x + r.width;
const bottom = (r: Region): number => r.y + r.height;
const floorEven = (v: number): number => v - (v % 2);
