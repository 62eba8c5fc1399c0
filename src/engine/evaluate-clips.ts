import { InputError } from '../errors.ts';
import type { MotionRecord } from '../motion/motion-record.ts';
import { displacementAlong } from '../scale/displacement.ts';
import { axisFromMotion, compareAxes, type MotionAxis } from '../scale/motion-axis.ts';
import type { ClipSpec, TestFile } from '../testfile/schema.ts';
import { type ClipMotion, clipMotion } from './clip-motion.ts';
import { type ClipOutcome, type ClipTracks, isTracked } from './clip-tracks.ts';
import { setupAxis } from './setup-axis.ts';
import { type SetupGeometry, setupGeometry } from './setup-geometry.ts';

/** A clip's motion along the axis of its setup: all that a dwell or a ring-down in it is judged from. */
export interface EvaluatedClip {
  readonly spec: ClipSpec;
  readonly tracks: ClipTracks;
  readonly geometry: SetupGeometry;
  readonly motion: ClipMotion;
  readonly axis: MotionAxis;
  readonly response: MotionRecord;
  readonly drive: MotionRecord | null;
}

/** Clips that can be judged, and for the others one sentence why not. */
export interface EvaluatedClips {
  readonly clips: ReadonlyMap<string, EvaluatedClip>;
  readonly failures: ReadonlyMap<string, string>;
  /** What is to be said of a setup as a whole, by setup id. */
  readonly setupWarnings: ReadonlyMap<string, readonly string[]>;
}

/** The one drive frequency of a clip; null where it holds several dwells or none. */
function driveHzOf(test: TestFile, clip: string): number | null {
  const set = test.configurations
    .flatMap((each) => each.dwells)
    .filter((dwell) => dwell.clip === clip && !dwell.typed);
  const inSweep = test.configurations.some((each) => each.sweeps.some((sweep) => sweep.clip === clip));
  const frequency = set.length === 1 && !inSweep ? set[0]?.driveHz : undefined;
  return frequency !== undefined && frequency > 0 ? frequency : null;
}

/** Whether the exciter runs in a clip: not in a clip of free decays only. */
function isDriven(test: TestFile, clip: string): boolean {
  return test.configurations.some(
    (each) =>
      each.dwells.some((dwell) => dwell.clip === clip) || each.sweeps.some((sweep) => sweep.clip === clip),
  );
}

function tryGeometry(test: TestFile): {
  geometries: Map<string, SetupGeometry>;
  troubles: Map<string, string>;
} {
  const geometries = new Map<string, SetupGeometry>();
  const troubles = new Map<string, string>();
  for (const setup of test.setups) {
    try {
      geometries.set(setup.id, setupGeometry(setup));
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      troubles.set(setup.id, error.message);
    }
  }
  return { geometries, troubles };
}

interface Moving {
  readonly spec: ClipSpec;
  readonly tracks: ClipTracks;
  readonly geometry: SetupGeometry;
  readonly motion: ClipMotion;
  readonly ownAxis: MotionAxis | null;
}

/** Drive and response along different lines: a wrong marker or an oblique view. */
function axisWarnings(axis: MotionAxis, driveAxis: MotionAxis | null): string[] {
  const between = driveAxis ? compareAxes(axis, driveAxis).warning : null;
  return [axis.warning, between].flatMap((each) => (each ? [each.sentence] : []));
}

/**
 * Brings the tracks of every clip onto the motion axis of its setup. The axis is found from all clips of the setup
 * together, unless it was marked.
 */
export function evaluateClips(test: TestFile, outcomes: ReadonlyMap<string, ClipOutcome>): EvaluatedClips {
  const failures = new Map<string, string>();
  const { geometries, troubles } = tryGeometry(test);
  const moving: Moving[] = [];
  for (const spec of test.clips) {
    const outcome = outcomes.get(spec.id);
    if (!outcome) continue;
    const geometry = geometries.get(spec.setup);
    if (!isTracked(outcome)) failures.set(spec.id, outcome.error);
    else if (!geometry)
      failures.set(
        spec.id,
        troubles.get(spec.setup) ?? `There is no setup "${spec.setup}" in the test file.`,
      );
    else {
      try {
        const motion = clipMotion(outcome, geometry, spec.rowReadout ?? 0);
        if (motion) {
          moving.push({
            spec,
            tracks: outcome,
            geometry,
            motion,
            ownAxis: axisFromMotion(motion.response, driveHzOf(test, spec.id)),
          });
        } else
          failures.set(
            spec.id,
            outcome.markers.find((each) => each.error !== null)?.error ??
              `The response marker was seen in fewer than two of the ${outcome.timesS.length} frames of clip "${spec.id}": film at least two periods with the marker in view.`,
          );
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        failures.set(spec.id, `clip "${spec.id}": ${error.message}`);
      }
    }
  }
  const clips = new Map<string, EvaluatedClip>();
  const setupWarnings = new Map<string, readonly string[]>();
  for (const setup of test.setups) {
    const own = moving.filter((each) => each.spec.setup === setup.id);
    const axis =
      own[0]?.geometry.givenAxis ?? setupAxis(own.flatMap((each) => (each.ownAxis ? [each.ownAxis] : [])));
    if (!axis) {
      for (const each of own)
        failures.set(
          each.spec.id,
          `Nothing moves in clip "${each.spec.id}", so no motion axis can be found; mark the axis or check the response marker.`,
        );
      continue;
    }
    const driveAxis = setupAxis(
      own.flatMap((each) => {
        const found =
          each.motion.drive && isDriven(test, each.spec.id)
            ? axisFromMotion(each.motion.drive, driveHzOf(test, each.spec.id))
            : null;
        return found ? [found] : [];
      }),
    );
    setupWarnings.set(setup.id, [...(own[0]?.geometry.warnings ?? []), ...axisWarnings(axis, driveAxis)]);
    for (const { spec, tracks, geometry, motion } of own) {
      clips.set(spec.id, {
        spec,
        tracks,
        geometry,
        motion,
        axis,
        response: displacementAlong(motion.response, axis),
        drive: motion.drive ? displacementAlong(motion.drive, axis) : null,
      });
    }
  }
  return { clips, failures, setupWarnings };
}
