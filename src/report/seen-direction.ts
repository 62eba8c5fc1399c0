import { markerOf } from '../engine/clip-motion.ts';
import type { EvaluatedClip } from '../engine/evaluate-clips.ts';
import type { AxisDirection } from './frame-overlay.ts';

/**
 * Direction of the motion axis as seen in the picture: the axis itself where one scale holds for the whole picture,
 * else (an oblique plane) the line along which the response marker was seen to run. null where it cannot be told.
 */
export function seenDirection(clip: EvaluatedClip): AxisDirection | null {
  if (clip.geometry.toMm.kind !== 'plane') return { x: clip.axis.directionX, y: clip.axis.directionY };
  const marker = markerOf(clip.tracks, 'response');
  return marker ? principalDirection(marker.xPx, marker.yPx) : null;
}

/** Direction of the largest scatter of points, gaps (NaN) left out; null where nothing scatters. */
export function principalDirection(x: Float64Array, y: Float64Array): AxisDirection | null {
  let [n, sumX, sumY, xx, xy, yy] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < x.length; i++) {
    const [a, b] = [x[i] ?? Number.NaN, y[i] ?? Number.NaN];
    if (!Number.isFinite(a) || !Number.isFinite(b)) continue;
    n += 1;
    sumX += a;
    sumY += b;
    xx += a * a;
    xy += a * b;
    yy += b * b;
  }
  if (n < 2) return null;
  const [sxx, sxy, syy] = [xx - (sumX * sumX) / n, xy - (sumX * sumY) / n, yy - (sumY * sumY) / n];
  if (!(sxx + syy > 0)) return null;
  const angle = Math.atan2(2 * sxy, sxx - syy) / 2;
  return { x: Math.cos(angle), y: Math.sin(angle) };
}
