import type { CodedSize, Region } from '../clip/region.ts';

/** What is known of a marker before a clip is decoded: its patch, and where it was seen in a look over the clip. */
export interface RegionWish {
  readonly patchWidthPx: number;
  readonly patchHeightPx: number;
  /** Positions in pixels of the coded frame; at least one. */
  readonly seen: readonly { readonly x: number; readonly y: number }[];
}

const LEAST_MARGIN_PX = 64; // room for prediction errors and for a swing that the look has missed
const MARGIN_PER_SPREAD = 0.75; // a look at a few instants sees a part of the swing only
const WHOLE_FRAME_PX = 640 * 480; // below this the whole frame costs less than looking for a smaller rectangle
const WORTHWHILE = 0.6; // fraction of the frame that the rectangles may fill before the whole frame is cheaper

function span(
  positions: readonly number[],
  patchPx: number,
  growth: number,
): { centre: number; size: number } {
  const low = Math.min(...positions);
  const high = Math.max(...positions);
  const margin = growth * Math.max(LEAST_MARGIN_PX, MARGIN_PER_SPREAD * (high - low));
  return { centre: (low + high) / 2, size: high - low + patchPx + 2 * margin };
}

/**
 * The rectangles of the coded frame to decode, one a marker in the order given, all of one size (so that one stream
 * holds them stacked), or the whole frame once where rectangles would not pay.
 * @param growth 1 at first; larger when a marker ran into the border of its rectangle
 */
export function planRegions(picture: CodedSize, wishes: readonly RegionWish[], growth: number): Region[] {
  const whole: Region = { x: 0, y: 0, width: picture.codedWidth, height: picture.codedHeight };
  const framePx = picture.codedWidth * picture.codedHeight;
  if (framePx <= WHOLE_FRAME_PX) return [whole];
  const spans = wishes.map((wish) => ({
    x: span(
      wish.seen.map((point) => point.x),
      wish.patchWidthPx,
      growth,
    ),
    y: span(
      wish.seen.map((point) => point.y),
      wish.patchHeightPx,
      growth,
    ),
  }));
  const width = Math.min(picture.codedWidth, Math.ceil(Math.max(...spans.map((each) => each.x.size))));
  const height = Math.min(picture.codedHeight, Math.ceil(Math.max(...spans.map((each) => each.y.size))));
  if (width * height * wishes.length > WORTHWHILE * framePx) return [whole];
  const within = (start: number, size: number, limit: number): number =>
    Math.max(0, Math.min(Math.round(start), limit - size));
  return spans.map((each) => ({
    x: within(each.x.centre - width / 2, width, picture.codedWidth),
    y: within(each.y.centre - height / 2, height, picture.codedHeight),
    width,
    height,
  }));
}
