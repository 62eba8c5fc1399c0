import { InputError } from '../errors.ts';
import type { PixelsToMm } from '../scale/displacement.ts';
import { axisFromPoints, type MotionAxis } from '../scale/motion-axis.ts';
import { type Parallax, parallaxFromDistances } from '../scale/parallax.ts';
import { planeMapping, planePointMm } from '../scale/perspective.ts';
import { DEFAULT_CLICK_U_PX, scaleFromPoints, scaleInMotionPlane } from '../scale/scale.ts';
import type { Scale as ScaleSpec, Setup } from '../testfile/schema.ts';

/** How a camera setup turns pixels into millimetres, and what that leaves uncertain in every amplitude alike. */
export interface SetupGeometry {
  readonly toMm: PixelsToMm;
  /** The motion axis where the user marked it; null where it is to be found from the motion. */
  readonly givenAxis: MotionAxis | null;
  /** null where the distances were not given. */
  readonly parallax: Parallax | null;
  readonly warnings: readonly string[];
}

function uniform(setup: Setup, spec: ScaleSpec): SetupGeometry {
  const scale = scaleFromPoints({
    fromPx: spec.from,
    toPx: spec.to,
    lengthMm: spec.length,
    lengthUMm: spec.lengthU,
    clickUPx: spec.clickU,
  });
  const { cameraToScale, cameraToMotion } = spec;
  if ((cameraToScale === undefined) !== (cameraToMotion === undefined)) {
    throw new InputError(
      `setup "${setup.id}": parallax needs both distances, cameraToScale and cameraToMotion; give both or none.`,
    );
  }
  const parallax =
    cameraToScale !== undefined && cameraToMotion !== undefined
      ? parallaxFromDistances({ cameraToScaleMm: cameraToScale, cameraToMotionMm: cameraToMotion })
      : null;
  const warnings = [scale.warning, parallax?.warning ?? null].flatMap((each) =>
    each ? [each.sentence] : [],
  );
  const axis = setup.motionAxis;
  return {
    toMm: parallax ? scaleInMotionPlane(scale, parallax.factor) : scale,
    givenAxis:
      axis === undefined || axis === 'auto'
        ? null
        : axisFromPoints(axis.from, axis.to, spec.clickU ?? DEFAULT_CLICK_U_PX),
    parallax,
    warnings,
  };
}

function oblique(setup: Setup, spec: ScaleSpec, plane: NonNullable<ScaleSpec['plane']>): SetupGeometry {
  const mapping = planeMapping(
    plane.map((point) => ({ at: point.at, mm: point.mm })),
    spec.clickU ?? DEFAULT_CLICK_U_PX,
  );
  const axis = setup.motionAxis;
  const mmPerPx = spec.length / Math.hypot(spec.to[0] - spec.from[0], spec.to[1] - spec.from[1]);
  return {
    toMm: mapping,
    givenAxis:
      axis === undefined || axis === 'auto'
        ? null
        : axisFromPoints(
            planePointMm(mapping, axis.from),
            planePointMm(mapping, axis.to),
            (spec.clickU ?? DEFAULT_CLICK_U_PX) * (mmPerPx || 1),
          ),
    parallax: null,
    warnings: mapping.warning ? [mapping.warning.sentence] : [],
  };
}

/**
 * What the scale of a camera setup comes to: four or more points of the plane of motion where they are given, else two
 * scale points with parallax.
 * @throws InputError naming the setup where there is no scale or it cannot be used
 */
export function setupGeometry(setup: Setup): SetupGeometry {
  const spec = setup.scale;
  if (!spec)
    throw new InputError(
      `setup "${setup.id}" has no scale: mark two scale points on the rule and give their true distance.`,
    );
  try {
    return spec.plane && spec.plane.length > 0 ? oblique(setup, spec, spec.plane) : uniform(setup, spec);
  } catch (error) {
    if (error instanceof InputError && !error.message.startsWith('setup ')) {
      throw new InputError(`setup "${setup.id}": ${error.message}`);
    }
    throw error;
  }
}
