import type { PixelsToMm } from '../scale/displacement.ts';
import { axisAngleRelU, type MotionAxis } from '../scale/motion-axis.ts';
import type { Parallax } from '../scale/parallax.ts';
import { localScaleRelU } from '../scale/perspective.ts';
import type { PointPx } from '../scale/point-track.ts';
import { DEFAULT_TILT_U_DEG, unknownTiltRelU } from '../scale/tilt.ts';
import type { RelativeLine } from './dwell-facts.ts';

/** What a camera setup's geometry leaves uncertain. */
export interface GeometryLinesInput {
  readonly toMm: PixelsToMm;
  readonly axis: MotionAxis;
  /** null where the distances were not given: rule and motion are then taken to share a plane. */
  readonly parallax: Parallax | null;
  /** Where the marker rests, px as displayed. */
  readonly restPx: PointPx;
  /** Standard uncertainty of the camera's squareness, degrees; `DEFAULT_TILT_U_DEG` where absent. */
  readonly tiltUDeg?: number | undefined;
}

/**
 * Budget lines of scale and geometry, relative to the amplitude and common to every dwell of the setup. With a
 * marked plane the view's obliqueness is in the mapping, so tilt and parallax have no lines of their own.
 */
export function geometryLines(input: GeometryLinesInput): RelativeLine[] {
  const { toMm, axis, parallax } = input;
  const line = (source: RelativeLine['source'], relU: number): RelativeLine => ({
    source,
    relU,
    dof: null,
    common: true,
  });
  const lines = [line('axis', axisAngleRelU(axis))];
  if (toMm.kind === 'plane') {
    const direction: PointPx = [axis.directionX, axis.directionY];
    lines.push(line('perspective', localScaleRelU(toMm, input.restPx, direction)));
  } else {
    lines.push(line('scale length', toMm.relULength), line('scale clicks', toMm.relUClicks));
    lines.push(line('tilt', unknownTiltRelU(input.tiltUDeg ?? DEFAULT_TILT_U_DEG)));
    if (parallax !== null) lines.push(line('parallax', parallax.u / parallax.factor));
  }
  return lines.filter((entry) => entry.relU > 0);
}
