/**
 * One rectangle of a frame's brightness, row by row without padding: the sample of column x, row y is
 * `data[y * width + x]`, 0 to `maxValue` as the clip stores it (no range is stretched, no sample is rounded).
 * Whoever hands it out may reuse `data` for the next frame: copy what must outlive the call.
 */
export interface LumaImage {
  /** Samples; length = width * height. 8-bit clips give bytes, deeper ones 16-bit words. */
  readonly data: Uint8Array | Uint16Array;
  /** Columns, px. */
  readonly width: number;
  /** Rows, px. */
  readonly height: number;
  /** Largest value a sample can have: 255 for 8 bits, 1023 for 10 bits, 4095 for 12 bits. */
  readonly maxValue: number;
}
