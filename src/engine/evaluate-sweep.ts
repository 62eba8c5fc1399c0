import { findDwells, segmentRecord } from '../motion/change-points.ts';
import type { Configuration, DwellSpec, SweepSpec } from '../testfile/schema.ts';
import { failedDwell } from './dwell-without-clip.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import { evaluateDwell } from './evaluate-dwell.ts';
import type { DwellResult } from './results.ts';

/** Id of the dwell found at a place (from 1) in a sweep's clip. */
export function sweepDwellId(clip: string, place: number): string {
  return `${clip}-${place}`;
}

/** The dwells of a sweep when its clip cannot be read: one for each frequency of the list, or one in all. */
export function failedSweep(configuration: Configuration, sweep: SweepSpec, reason: string): DwellResult[] {
  const frequencies: readonly (number | undefined)[] =
    sweep.driveHz && sweep.driveHz.length > 0 ? sweep.driveHz : [undefined];
  return frequencies.map((driveHz, k) => {
    const spec: DwellSpec = {
      id: sweepDwellId(sweep.clip, k + 1),
      clip: sweep.clip,
      ...(driveHz === undefined ? {} : { driveHz }),
    };
    return failedDwell(configuration, spec, reason);
  });
}

/**
 * The dwells that follow each other in one clip: found from the motion, each judged like any other. Frequencies come from
 * the sweep's list, in its order, or are measured where there is none.
 */
export function evaluateSweep(
  configuration: Configuration,
  sweep: SweepSpec,
  clip: EvaluatedClip,
): DwellResult[] {
  const wrong = sweep.driveHz?.find((driveHz) => !(driveHz > 0));
  if (wrong !== undefined) {
    return failedSweep(
      configuration,
      sweep,
      `The sweep of clip "${sweep.clip}" lists a drive frequency of ${wrong} Hz; every frequency must be above 0.`,
    );
  }
  const segments = findDwells(clip.response, {
    ...(sweep.driveHz && sweep.driveHz.length > 0 ? { driveHz: sweep.driveHz } : {}),
    ...(clip.drive ? { driveRecord: clip.drive } : {}),
  });
  if (segments.length === 0) {
    return failedSweep(
      configuration,
      sweep,
      `No steady stretch was found in clip "${sweep.clip}"; stay longer at each frequency, or list the drive frequencies.`,
    );
  }
  return segments.map((segment, k) => {
    const listed = segment.listIndex === null ? undefined : segment.frequencyHz;
    const spec: DwellSpec = {
      id: sweepDwellId(sweep.clip, k + 1),
      clip: sweep.clip,
      ...(listed === undefined ? {} : { driveHz: listed }),
    };
    // the moment of the change is known to a fraction of a period only
    const own =
      k === 0
        ? segment
        : { ...segment, fromS: Math.min(segment.fromS + 1 / segment.frequencyHz, segment.toS) };
    return evaluateDwell(configuration, spec, {
      ...clip,
      response: segmentRecord(clip.response, own),
      drive: clip.drive ? segmentRecord(clip.drive, own) : null,
    });
  });
}
