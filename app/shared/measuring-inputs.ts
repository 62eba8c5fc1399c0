import { createHash } from 'node:crypto';
import type { TestFile } from '../../src/testfile/schema.ts';

interface ClipInputs {
  readonly tracking: string;
  readonly measuring: string;
}

const NONE: ClipInputs = { tracking: 'no such clip', measuring: 'no such clip' };
const known = new WeakMap<TestFile, ReadonlyMap<string, ClipInputs>>(); // a test is never changed in place

/** What the tracks of a clip depend on: its markers and its clock. Where the file lies does not matter. */
export function trackingInputs(test: TestFile, clip: string): string {
  return (inputsOf(test).get(clip) ?? NONE).tracking;
}

/** What the results of a clip depend on: its tracks, scale, axis, exposure, and the dwells read from it. */
export function measuringInputs(test: TestFile, clip: string): string {
  return (inputsOf(test).get(clip) ?? NONE).measuring;
}

function digest(value: unknown): string {
  return createHash('sha256').update(JSON.stringify(value)).digest('base64url');
}

function inputsOf(test: TestFile): ReadonlyMap<string, ClipInputs> {
  const before = known.get(test);
  if (before) return before;
  const readings = readingsByClip(test);
  const setups = new Map(test.setups.map((each) => [each.id, each]));
  const made = new Map<string, ClipInputs>();
  for (const clip of test.clips) {
    const setup = setups.get(clip.setup);
    const tracking = digest([clip.captureFps ?? null, setup?.id ?? null, setup?.markers ?? null]);
    const measuring = digest([
      tracking,
      clip.exposure ?? null,
      clip.rowReadout ?? null,
      setup?.scale ?? null,
      setup?.motionAxis ?? null,
      readings.get(clip.id) ?? [],
    ]);
    made.set(clip.id, { tracking, measuring });
  }
  known.set(test, made);
  return made;
}

/** What is read from each clip: dwells, sweeps and ring-downs, as far as it bears on their results. */
function readingsByClip(test: TestFile): Map<string, unknown[]> {
  const readings = new Map<string, unknown[]>();
  const add = (clip: string | undefined, reading: unknown): void => {
    if (clip === undefined) return;
    const list = readings.get(clip) ?? [];
    list.push(reading);
    readings.set(clip, list);
  };
  for (const { id, dwells, sweeps, ringdowns } of test.configurations) {
    for (const dwell of dwells) add(dwell.clip, [id, dwell.id, dwell.driveHz ?? null, dwell.window ?? null]);
    for (const sweep of sweeps) add(sweep.clip, [id, sweep]);
    for (const { excluded: _, ...ringdown } of ringdowns) add(ringdown.clip, [id, ringdown]);
  }
  return readings;
}
