import type { ClipInfo } from './clip-info.ts';

/** What of a clip tells which frames may be built on which. */
export type FrameDependence = Pick<ClipInfo, 'keyFrames' | 'frameCount' | 'reorderDepth'>;

/**
 * Indices of frames that decoded but may be built on damaged ones, ascending, the lost ones left out. `lost`
 * ascending.
 *
 * A frame is built on others of its group only, so doubt ends at a key frame. But a decoder that meets an error
 * drops the picture it was about to hand out, which is up to `reorderDepth` frames earlier than the damaged one: a
 * key frame so close behind a loss may be the damaged one itself. And as many frames before the loss may be decoded
 * later than it.
 */
export function doubtfulFrames(clip: FrameDependence, lost: readonly number[]): number[] {
  const isLost = new Set(lost);
  const doubtful = new Set<number>();
  for (const index of lost) {
    for (let i = doubtBegins(clip, index); i < clip.frameCount && !endsDoubt(clip, i, index); i++) {
      if (!isLost.has(i)) doubtful.add(i);
    }
  }
  return [...doubtful].sort((a, b) => a - b);
}

/** True for a key frame far enough behind a lost frame to be sound. */
export function endsDoubt(clip: FrameDependence, index: number, lostIndex: number): boolean {
  return clip.keyFrames[index] === 1 && index > lostIndex + clip.reorderDepth;
}

function doubtBegins(clip: FrameDependence, lostIndex: number): number {
  let first = lostIndex;
  while (first > 0 && clip.keyFrames[first] !== 1 && lostIndex - first < clip.reorderDepth) first--;
  return first;
}
