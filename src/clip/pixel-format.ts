/** How to get at the brightness of a picture in a given pixel format. */
export interface LumaAccess {
  /** Bits of one brightness sample as stored. */
  readonly bitDepth: number;
  /** Filters that turn the picture into one plane of brightness. */
  readonly filters: readonly string[];
  /** True where the filters must come before a crop, because chroma is too coarse for even corners. */
  readonly beforeCrop: boolean;
  /** False where the format has no brightness plane and one is computed from red, green and blue. */
  readonly exact: boolean;
}

/** Formats whose samples are interleaved, and the planar one that holds the same samples untouched. */
const PLANAR_TWIN: Readonly<Record<string, string>> = {
  nv12: 'yuv420p',
  nv21: 'yuv420p',
  nv16: 'yuv422p',
  nv24: 'yuv444p',
  nv42: 'yuv444p',
  nv20le: 'yuv422p10le',
  p010le: 'yuv420p10le',
  p210le: 'yuv422p10le',
  uyvy422: 'yuv422p',
  yuyv422: 'yuv422p',
  yvyu422: 'yuv422p',
};

/** Chroma a quarter as wide as brightness: an even corner may still fall between its samples. */
const COARSE_CHROMA = /^yuv(j?411p|410p)$/;

/**
 * The way to the brightness of a pixel format named as ffmpeg names it. Where there is a brightness plane it is
 * taken as it is, with neither range nor depth changed; RGB is weighed to grey.
 */
export function lumaAccess(pixelFormat: string): LumaAccess {
  const planar = PLANAR_TWIN[pixelFormat];
  if (planar !== undefined) {
    const access = lumaAccess(planar);
    return { ...access, filters: [`format=${planar}`, ...access.filters] };
  }
  const bitDepth = bitDepthOf(pixelFormat);
  if (/^gray(\d+le)?$/.test(pixelFormat)) return { bitDepth, filters: [], beforeCrop: false, exact: true };
  const planarYuv = /^yuv(a?)j?4\d\dp(\d*)(le)?$/.exec(pixelFormat);
  if (planarYuv !== null) {
    // Old builds cannot take the plane from 12 bits with transparency: drop the transparency first.
    const opaque =
      planarYuv[1] === 'a' && bitDepth > 10 ? [`format=${pixelFormat.replace('yuva', 'yuv')}`] : [];
    const beforeCrop = COARSE_CHROMA.test(pixelFormat);
    return { bitDepth, filters: [...opaque, 'extractplanes=y'], beforeCrop, exact: true };
  }
  if (/^ya(8|16le)$/.test(pixelFormat)) {
    return { bitDepth, filters: ['extractplanes=y'], beforeCrop: false, exact: true };
  }
  const weighed = bitDepth > 8 ? 'gray16le' : 'gray';
  return { bitDepth: bitDepth > 8 ? 16 : 8, filters: [`format=${weighed}`], beforeCrop: false, exact: false };
}

function bitDepthOf(pixelFormat: string): number {
  const planar = /(?:p|gray|ya|x2rgb|x2bgr)(9|10|12|14|16)(?:le|be)?$/.exec(pixelFormat);
  if (planar?.[1] !== undefined) return Number(planar[1]);
  const packed = /^(?:rgb|bgr)(48|64)|^(?:rgba|bgra)(64)/.exec(pixelFormat);
  return packed === null ? 8 : 16;
}
