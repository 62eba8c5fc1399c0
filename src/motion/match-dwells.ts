import type { DwellSegment } from './change-points.ts';
import type { SteadyCore } from './steady-core.ts';

// A listed frequency and a measured one are the same dwell when they differ by less than this share.
const SAME_SHARE = 0.02;

/**
 * The end of a dwell for measuring: a period before the motion is seen to change, because it changes slowly at first.
 * At the end of the record there is nothing to keep away from.
 */
export function endOf(core: SteadyCore, recordEndS: number): number {
  const periodS = 1 / core.frequencyHz;
  return core.toS >= recordEndS - periodS / 2 ? core.toS : core.toS - periodS;
}

/** How well a core fits a listed frequency: its duration, less what the frequencies differ by; 0 where it does not. */
function likeness(core: SteadyCore, listedHz: number): number {
  const apart = Math.abs(core.frequencyHz - listedHz) / listedHz;
  return apart > SAME_SHARE ? 0 : (core.toS - core.fromS) * (1 - apart / SAME_SHARE);
}

/**
 * Puts the steady stretches found to a list of drive frequencies, both in order, so that as much steady time as
 * possible finds its place. A listed dwell without a steady stretch gets an equal share of the time its neighbours
 * leave, marked as not seen.
 *
 * @param cores in order of time
 * @param ends first and last time of the record, seconds
 * @returns one segment per listed frequency, in order
 */
export function matchInOrder(
  cores: readonly SteadyCore[],
  driveHz: readonly number[],
  ends: readonly [number, number],
): DwellSegment[] {
  const places = alignment(cores, driveHz);
  const segments: DwellSegment[] = [];
  let fromS = ends[0];
  for (let k = 0; k < driveHz.length; ) {
    // listed dwells that were not seen, up to the next that was
    let next = k;
    while (next < driveHz.length && places[next] === null) next++;
    const core = next < driveHz.length ? cores[places[next]!]! : null;
    const unseen = next - k;
    const room = (core?.toS ?? ends[1]) - fromS;
    // an unseen dwell ends at the latest where the next steady stretch begins
    const unseenEndS = core === null ? ends[1] : Math.min(core.fromS, fromS + (room * unseen) / (unseen + 1));
    for (let j = 0; j < unseen; j++) {
      const shareS = (unseenEndS - fromS) / (unseen - j);
      segments.push({
        fromS,
        toS: fromS + shareS,
        frequencyHz: driveHz[k + j]!,
        listIndex: k + j,
        seen: false,
      });
      fromS += shareS;
    }
    if (core !== null) {
      const toS = endOf(core, ends[1]);
      segments.push({ fromS, toS, frequencyHz: driveHz[next]!, listIndex: next, seen: true });
      fromS = core.toS;
    }
    k = next + 1;
  }
  return segments;
}

/** For each listed frequency the index of its core, or null: the order-keeping pairing with the most likeness. */
function alignment(cores: readonly SteadyCore[], driveHz: readonly number[]): (number | null)[] {
  const rows = driveHz.length + 1;
  const columns = cores.length + 1;
  const best = new Float64Array(rows * columns);
  for (let k = 1; k < rows; k++) {
    for (let c = 1; c < columns; c++) {
      const pair = likeness(cores[c - 1]!, driveHz[k - 1]!);
      best[k * columns + c] = Math.max(
        best[(k - 1) * columns + c]!,
        best[k * columns + c - 1]!,
        pair > 0 ? best[(k - 1) * columns + c - 1]! + pair : 0,
      );
    }
  }
  const places = new Array<number | null>(driveHz.length).fill(null);
  for (let k = rows - 1, c = columns - 1; k > 0 && c > 0; ) {
    const here = best[k * columns + c]!;
    if (here === best[(k - 1) * columns + c]!) k--;
    else if (here === best[k * columns + c - 1]!) c--;
    else {
      places[k - 1] = c - 1;
      k--;
      c--;
    }
  }
  return places;
}
