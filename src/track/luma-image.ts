/**
 * The luma plane of a frame, or of a region of it: row by row without padding, `data[y * width + x]`,
 * pixel centres at integer coordinates. 8-bit frames have `maxValue` 255, 10-bit frames 1023.
 */
export interface LumaImage {
  data: Uint8Array | Uint16Array;
  width: number;
  height: number;
  maxValue: number;
}
