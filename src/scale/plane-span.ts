import type { PointPx } from './point-track.ts';

/** A triangle of plane points flatter than this (area over longest side squared) counts as a line. */
const FLAT_TRIANGLE = 0.01;

/** Whether some four points have no three in line: then, and only then, they determine a plane's view. */
export function spansPlane(points: readonly PointPx[]): boolean {
  const n = points.length;
  for (let a = 0; a < n - 3; a++) {
    for (let b = a + 1; b < n - 2; b++) {
      for (let c = b + 1; c < n - 1; c++) {
        if (isFlat(points[a]!, points[b]!, points[c]!)) continue;
        for (let d = c + 1; d < n; d++) {
          const last = points[d]!;
          if (
            !isFlat(points[a]!, points[b]!, last) &&
            !isFlat(points[a]!, points[c]!, last) &&
            !isFlat(points[b]!, points[c]!, last)
          ) {
            return true;
          }
        }
      }
    }
  }
  return false;
}

function isFlat(a: PointPx, b: PointPx, c: PointPx): boolean {
  const area = Math.abs((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]));
  const longest = Math.max(
    Math.hypot(b[0] - a[0], b[1] - a[1]),
    Math.hypot(c[0] - a[0], c[1] - a[1]),
    Math.hypot(c[0] - b[0], c[1] - b[1]),
  );
  return !(area > FLAT_TRIANGLE * longest * longest);
}
