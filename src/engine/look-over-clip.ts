import type { ClipInfo } from '../clip/clip-info.ts';
import { decodeRegions } from '../clip/decode-regions.ts';
import { findTemplate } from '../track/find-template.ts';
import type { LumaImage } from '../track/luma-image.ts';
import { searchCoarsely } from '../track/search-image.ts';
import type { DecodeContext } from './frame-luma.ts';
import type { PreparedMarker } from './prepare-markers.ts';

/** Where a marker was found in a look over the clip, coded pixels. */
export interface Sighting {
  readonly frame: number;
  readonly x: number;
  readonly y: number;
  readonly score: number;
}

const LOOKS = 6; // key frames to look at: enough to see most of a swing, few enough to cost nothing
const FOUND_SCORE = 0.6;
const CLOSE_PX = 200; // within this a light search is quicker than the thorough one
const REACH = 0.16; // of the picture's diagonal: further away than this a look-alike is more likely than the marker

function find(image: LumaImage, marker: PreparedMarker, from: { x: number; y: number }): Sighting | null {
  const reachPx = REACH * Math.hypot(image.width, image.height);
  const search = { minScore: FOUND_SCORE };
  const close = searchCoarsely(image, marker.template, {
    near: { ...from, radiusPx: Math.min(reachPx, CLOSE_PX) },
    ...search,
  });
  const near =
    close ?? findTemplate(image, marker.template, { near: { ...from, radiusPx: reachPx }, ...search });
  // A marker that stands elsewhere at the start of this clip is sought in the whole picture.
  const found = near ?? findTemplate(image, marker.template, search);
  if (!found || (near === null && found.ambiguous)) return null;
  return { frame: 0, x: found.x, y: found.y, score: found.score };
}

/**
 * Looks for every marker in the first key frames of a clip, to know where each starts and how far it may swing.
 * @returns the sightings of each marker in the order given; an empty list where one was not found at all
 */
export async function lookOverClip(
  info: ClipInfo,
  markers: readonly PreparedMarker[],
  context: DecodeContext,
): Promise<Sighting[][]> {
  const sightings: Sighting[][] = markers.map(() => []);
  const whole = { x: 0, y: 0, width: info.codedWidth, height: info.codedHeight };
  await decodeRegions(
    info,
    [whole],
    (frame) => {
      const image = frame.regions[0];
      if (!image) return true;
      for (const [k, marker] of markers.entries()) {
        const list = sightings[k];
        const seen = find(image, marker, list?.at(-1) ?? marker.at);
        if (seen) list?.push({ ...seen, frame: frame.index });
      }
      return true;
    },
    {
      ffmpeg: context.ffmpeg,
      onlyKeyFrames: true,
      maxFrames: LOOKS,
      ...(context.signal ? { signal: context.signal } : {}),
    },
  );
  return sightings;
}
