import { presentSamples, spanS } from '../sine/samples.ts';
import { endOf, matchInOrder } from './match-dwells.ts';
import type { MotionRecord } from './motion-record.ts';
import { requireOrderedRecord } from './record-checks.ts';
import { placeUnseen } from './split-boundary.ts';
import { steadyCores } from './steady-cores.ts';

/** One dwell within a record of several. */
export interface DwellSegment {
  /** When the drive came to this frequency: the end of the dwell before, or the record's start. Seconds. */
  readonly fromS: number;
  /** When it left it, seconds. */
  readonly toS: number;
  /** The listed drive frequency, or the measured one where there is no list; Hz. */
  readonly frequencyHz: number;
  /** Place in the list of drive frequencies; null without a list. */
  readonly listIndex: number | null;
  /** False where a listed dwell shows no steady stretch and its place is the one that explains the motion best. */
  readonly seen: boolean;
}

/** How to look for the dwells of a record. */
export interface SegmentOptions {
  /** Drive frequencies in order, Hz; measured where absent. */
  readonly driveHz?: readonly number[];
  /** The exciter's motion at the same times: it changes at once, without transients. */
  readonly driveRecord?: MotionRecord;
}

// Share of the record in which the drive must be steady to be trusted with the boundaries.
const WELL_SEEN = 0.7;

/**
 * Finds the dwells that follow each other in one record, from the motion itself. A steady stretch is one that a
 * single sine describes; whatever lies between two of them is the transient at the beginning of the later dwell.
 * Without a list only dwells that come to rest can be found; with one, the others get the place at which steady
 * motion and transient explain the record best.
 *
 * @returns segments in order of time; with a list one for each of its frequencies, without one as many as are found
 * @throws InputError where the record's times are out of order
 */
export function findDwells(record: MotionRecord, options: SegmentOptions = {}): DwellSegment[] {
  requireOrderedRecord(record);
  if (options.driveRecord !== undefined) requireOrderedRecord(options.driveRecord);
  const response = presentSamples(record.timesS, record.displacementMm);
  if (response.timesS.length < 10) return [];
  const ofResponse = steadyCores(response, true);
  const { driveRecord, driveHz } = options;
  const ofDrive =
    driveRecord === undefined
      ? []
      : steadyCores(presentSamples(driveRecord.timesS, driveRecord.displacementMm), false);
  // the drive is the better witness wherever it is seen throughout
  const seenS = ofDrive.reduce((sum, core) => sum + core.toS - core.fromS, 0);
  const cores = seenS > WELL_SEEN * spanS(response) ? ofDrive : ofResponse;
  const ends = [response.timesS[0]!, response.timesS[response.timesS.length - 1]!] as const;
  if (driveHz !== undefined) return placeUnseen(response, matchInOrder(cores, driveHz, ends));
  let fromS = ends[0];
  return cores.map((core) => {
    const segment = {
      fromS,
      toS: endOf(core, ends[1]),
      frequencyHz: core.frequencyHz,
      listIndex: null,
      seen: true,
    };
    fromS = core.toS;
    return segment;
  });
}

/** The part of a record inside a segment, as a record of its own. */
export function segmentRecord(
  record: MotionRecord,
  segment: Pick<DwellSegment, 'fromS' | 'toS'>,
): MotionRecord {
  const first = record.timesS.findIndex((time) => time >= segment.fromS);
  const beyond = record.timesS.findIndex((time) => time > segment.toS);
  const [from, to] = [first < 0 ? record.timesS.length : first, beyond < 0 ? record.timesS.length : beyond];
  return { timesS: record.timesS.slice(from, to), displacementMm: record.displacementMm.slice(from, to) };
}
