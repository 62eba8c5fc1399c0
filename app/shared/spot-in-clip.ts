import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { toCoded } from '../../src/clip/coordinates.ts';
import { decodeWholeFrames } from '../../src/clip/decode-regions.ts';
import type { Ffmpeg } from '../../src/clip/find-ffmpeg.ts';
import { InputError } from '../../src/errors.ts';
import type { PointPx } from '../../src/testfile/schema.ts';
import { judgeSpot } from '../../src/track/judge-spot.ts';
import type { LumaImage } from '../../src/track/luma-image.ts';
import type { SpotJudgement } from '../../src/track/template.ts';

/** Judges spots of clips; the frame looked at last is kept, so that the next nudge is answered at once. */
export class SpotJudge {
  #key = '';
  #image: LumaImage | null = null;

  /**
   * How well the spot at a displayed point of a frame will track.
   * @param sizePx side of the patch; chosen from the texture where absent
   * @throws InputError where the frame does not decode, CancelledError when stopped
   */
  async judge(
    clip: ClipInfo,
    ffmpeg: Ffmpeg,
    spot: { frame: number; at: PointPx; sizePx?: number | undefined },
    signal: AbortSignal,
  ): Promise<SpotJudgement> {
    const key = `${spot.frame} ${clip.path} ${clip.fileBytes}`;
    if (this.#key !== key || !this.#image) {
      this.#image = await wholeFrame(clip, ffmpeg, spot.frame, signal);
      this.#key = key;
    }
    const { x, y } = toCoded({ x: spot.at[0], y: spot.at[1] }, clip);
    return judgeSpot(this.#image, x, y, spot.sizePx === undefined ? {} : { sizePx: oddSize(spot.sizePx) });
  }
}

function oddSize(sizePx: number): number {
  const whole = Math.min(121, Math.max(15, Math.round(sizePx)));
  return whole % 2 === 1 ? whole : whole - 1;
}

async function wholeFrame(
  clip: ClipInfo,
  ffmpeg: Ffmpeg,
  frame: number,
  signal: AbortSignal,
): Promise<LumaImage> {
  let image: LumaImage | null = null;
  await decodeWholeFrames(
    clip,
    ({ regions }) => {
      const [only] = regions;
      if (only) image = { ...only, data: only.data.slice() };
      return false;
    },
    { signal, ffmpeg, fromS: clip.timesS[frame] ?? 0, maxFrames: 1 },
  );
  if (!image) throw new InputError(`Frame ${frame} of the clip could not be decoded; choose another one.`);
  return image;
}
