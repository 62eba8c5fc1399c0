/** A frame as both hosts carry it: its index as u32, little-endian, then the JPEG. */
export function packFrame(frame: number, jpeg: Uint8Array): Uint8Array {
  const bytes = new Uint8Array(4 + jpeg.length);
  new DataView(bytes.buffer).setUint32(0, frame, true);
  bytes.set(jpeg, 4);
  return bytes;
}

/** The index and the JPEG again. */
export function unpackFrame(bytes: Uint8Array): { frame: number; jpeg: Uint8Array } {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  return { frame: view.getUint32(0, true), jpeg: bytes.subarray(4) };
}
