import type { RotationDeg } from './clip-info.ts';

/** How the stored picture is to be turned, then mirrored, for display. */
export interface Orientation {
  /** Clockwise turn, degrees. */
  readonly rotationDeg: RotationDeg;
  /** Mirrored left to right after the turn. */
  readonly mirrored: boolean;
}

/**
 * Reads the orientation from the container itself; null where it cannot be read. ffmpeg's listing states one angle,
 * which cannot tell half a turn from a mirror image. The one file that touches mediabunny, loaded only when a clip
 * has a display matrix at all.
 */
export async function readOrientation(path: string): Promise<Orientation | null> {
  const { FilePathSource, Input, MATROSKA, MP4, QTFF, WEBM } = await import('mediabunny');
  const source = new FilePathSource(path, { handleUnhandledError: () => {} });
  const input = new Input({ source, formats: [MP4, QTFF, MATROSKA, WEBM] });
  try {
    const track = await input.getPrimaryVideoTrack();
    if (track === null) return null;
    return { rotationDeg: await track.getRotation(), mirrored: await track.getFlip() };
  } catch {
    return null; // a damaged or unusual header that ffmpeg still reads
  } finally {
    input.dispose();
  }
}

/** The orientation an angle of ffmpeg's listing stands for: it counts counter-clockwise; null between right angles. */
export function orientationOfAngle(counterClockwiseDeg: number): Orientation | null {
  const clockwise = (((-counterClockwiseDeg % 360) + 360) % 360) as number;
  const nearest = Math.round(clockwise / 90) * 90;
  if (Math.abs(clockwise - nearest) > 1) return null;
  return { rotationDeg: (nearest % 360) as RotationDeg, mirrored: false };
}
