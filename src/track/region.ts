import type { LumaImage } from './luma-image.ts';
import type { Template } from './template.ts';

/** A picture and where its upper left pixel stands in the coded frame. */
export interface Region {
  readonly image: LumaImage;
  readonly offsetX: number;
  readonly offsetY: number;
}

/** Pixels between the patch round a marked point (coded frame) and the nearest border; below 0 it is cut off. */
export function roomPx(region: Region, template: Template, x: number, y: number): number {
  const centreX = x - template.pointXPx - region.offsetX;
  const centreY = y - template.pointYPx - region.offsetY;
  const halfX = (template.widthPx - 1) / 2;
  const halfY = (template.heightPx - 1) / 2;
  return Math.min(
    centreX - halfX,
    centreY - halfY,
    region.image.width - 1 - centreX - halfX,
    region.image.height - 1 - centreY - halfY,
  );
}
