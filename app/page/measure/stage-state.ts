import { signal } from '@preact/signals';
import type { PointPx } from '../../../src/testfile/schema.ts';
import type { LoadedFrame } from './frame-loader.ts';
import { fitPicture, type Size, type ViewTransform, zoomedAt } from './view-transform.ts';

/** Frame on the stage; may be an earlier or a smaller one while the right one is on its way. */
export const loaded = signal<LoadedFrame | null>(null);
/** Size of the stage, CSS px. */
export const stageSize = signal<Size>({ width: 640, height: 360 });
/** How the picture lies on it; null shows the whole picture. */
export const ownView = signal<ViewTransform | null>(null);
/** Where the hand is on the picture, px; null where it is not on it. */
export const hand = signal<PointPx | null>(null);

/** How the picture lies on the stage now. */
export function viewOf(picture: Size): ViewTransform {
  return ownView.value ?? fitPicture(picture, stageSize.value);
}

/** Zooms about the middle of the stage. */
export function zoomMiddle(picture: Size, factor: number): void {
  const { width, height } = stageSize.value;
  ownView.value = zoomedAt(viewOf(picture), factor, width / 2, height / 2);
}
