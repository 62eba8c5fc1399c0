import type { ClipInfo } from './clip-info.ts';

/** A point of a picture, px: pixel centres at whole numbers, x to the right, y down, (0, 0) the top left pixel. */
export interface PicturePoint {
  readonly x: number;
  readonly y: number;
}

/** How a stored picture is shown. */
export type PictureGeometry = Pick<
  ClipInfo,
  'codedWidth' | 'codedHeight' | 'pixelAspect' | 'rotationDeg' | 'mirrored'
>;

/** Stored pixels are stretched along the longer side of a pixel only, so that no detail is lost. */
function stretchOf(pixelAspect: number): { x: number; y: number } {
  return pixelAspect >= 1 ? { x: pixelAspect, y: 1 } : { x: 1, y: 1 / pixelAspect };
}

/** Exact size as displayed before rounding, px. */
function exactSize(picture: PictureGeometry): { width: number; height: number } {
  const stretch = stretchOf(picture.pixelAspect);
  const width = picture.codedWidth * stretch.x;
  const height = picture.codedHeight * stretch.y;
  return picture.rotationDeg % 180 === 0 ? { width, height } : { width: height, height: width };
}

/** Size of the picture as displayed, in whole square pixels. */
export function displayedSize(picture: PictureGeometry): { displayedWidth: number; displayedHeight: number } {
  const { width, height } = exactSize(picture);
  return { displayedWidth: Math.round(width), displayedHeight: Math.round(height) };
}

/** Where a point of the stored picture appears in the displayed one; exact inverse of `toCoded`. */
export function toDisplayed(point: PicturePoint, picture: PictureGeometry): PicturePoint {
  const stretch = stretchOf(picture.pixelAspect);
  // Edge coordinates: the picture's own edge is 0, so that turning and scaling need no half pixels.
  const x = (point.x + 0.5) * stretch.x;
  const y = (point.y + 0.5) * stretch.y;
  const { width, height } = exactSize(picture);
  const turned = turnClockwise(x, y, width, height, picture.rotationDeg);
  return { x: (picture.mirrored ? width - turned.x : turned.x) - 0.5, y: turned.y - 0.5 };
}

/** Where a point of the displayed picture lies in the stored one; exact inverse of `toDisplayed`. */
export function toCoded(point: PicturePoint, picture: PictureGeometry): PicturePoint {
  const stretch = stretchOf(picture.pixelAspect);
  const { width, height } = exactSize(picture);
  const shownX = point.x + 0.5;
  const x = picture.mirrored ? width - shownX : shownX;
  const unturned = turnBack(x, point.y + 0.5, width, height, picture.rotationDeg);
  return { x: unturned.x / stretch.x - 0.5, y: unturned.y / stretch.y - 0.5 };
}

/** Turns edge coordinates clockwise; width and height are those after the turn. */
function turnClockwise(x: number, y: number, width: number, height: number, deg: number): PicturePoint {
  if (deg === 90) return { x: width - y, y: x };
  if (deg === 180) return { x: width - x, y: height - y };
  if (deg === 270) return { x: y, y: height - x };
  return { x, y };
}

function turnBack(x: number, y: number, width: number, height: number, deg: number): PicturePoint {
  if (deg === 90) return { x: y, y: width - x };
  if (deg === 180) return { x: width - x, y: height - y };
  if (deg === 270) return { x: height - y, y: x };
  return { x, y };
}
