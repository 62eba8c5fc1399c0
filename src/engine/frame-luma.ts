import type { ClipInfo } from '../clip/clip-info.ts';
import { decodeRegions } from '../clip/decode-regions.ts';
import type { Ffmpeg } from '../clip/find-ffmpeg.ts';
import { InputError } from '../errors.ts';
import type { LumaImage } from '../track/luma-image.ts';

/** What every decoding of an engine run shares. */
export interface DecodeContext {
  readonly ffmpeg: Ffmpeg;
  readonly signal?: AbortSignal | undefined;
}

/** A copy of an image whose buffer will be reused. */
export function copyOf(image: LumaImage): LumaImage {
  return { ...image, data: image.data.slice() };
}

/**
 * The brightness of one whole frame as stored (before rotation).
 * @param index frame, from 0 in order of presentation
 * @throws InputError where the clip has no such frame or it does not decode
 */
export async function frameLuma(info: ClipInfo, index: number, context: DecodeContext): Promise<LumaImage> {
  const name = info.path.split(/[\\/]/).at(-1) ?? info.path;
  const timeS = info.timesS[index];
  if (timeS === undefined) {
    throw new InputError(
      `${name} has ${info.frameCount} frames, so there is no frame ${index} in it; mark the marker in a frame that exists.`,
    );
  }
  const whole = { x: 0, y: 0, width: info.codedWidth, height: info.codedHeight };
  let found: LumaImage | null = null;
  await decodeRegions(
    info,
    [whole],
    (frame) => {
      if (frame.index < index) return true;
      const image = frame.regions[0];
      if (frame.index === index && image) found = copyOf(image);
      return false;
    },
    { ffmpeg: context.ffmpeg, fromS: timeS, ...(context.signal ? { signal: context.signal } : {}) },
  );
  if (!found)
    throw new InputError(`Frame ${index} of ${name} does not decode; mark the marker in another frame.`);
  return found;
}
