import { batch, computed, effect, signal } from '@preact/signals';
import type { PointPx } from '../../../src/testfile/schema.ts';
import type { SpotJudgement } from '../../../src/track/template.ts';
import type { ClipView } from '../../shared/clip-view.ts';
import { type MotionTrack, unpackTrack } from '../../shared/tracks-bytes.ts';
import { CallError } from '../bridge/bench-client.ts';
import { bench, client, results, test } from '../state/bench.ts';
import { configuration, selectedId, setup, shownClip } from '../state/view.ts';
import {
  type AxisDraft,
  nextTool,
  type PointKey,
  placedPoints,
  type ScaleDraft,
  type Tool,
} from './points.ts';

/** What the shown clip is; null while it is not known. */
export const clipView = signal<ClipView | null>(null);
/** Why the shown clip cannot be shown, one sentence. */
export const clipTrouble = signal<string | null>(null);
/** Frame shown, from 0. */
export const frame = signal(0);
/** Motion record of the shown clip as its markers stand. */
export const track = signal<MotionTrack | null>(null);
/** What the next click places; null where it places nothing. */
export const tool = signal<Tool | null>(null);
/** The point the arrow keys move. */
export const selectedPoint = signal<PointKey | null>(null);
export const scaleDraft = signal<ScaleDraft>({});
export const axisDraft = signal<AxisDraft>({});
/** Points on the way to a new place, not yet in the test. */
export const movedPoints = signal<ReadonlyMap<PointKey, PointPx>>(new Map());
/** How well each marker's spot will track, by its key. */
export const judgements = signal<ReadonlyMap<PointKey, SpotJudgement | 'looking'>>(new Map());
/** Whether the user stopped the asking for the next point. */
export const asksNothing = signal(false);

export const points = computed(() =>
  placedPoints(setup.value, scaleDraft.value, axisDraft.value, movedPoints.value),
);

/** What the next click places: what was chosen, else what is still lacking. */
export const armedTool = computed<Tool | null>(
  () => tool.value ?? (asksNothing.value || !clipView.value ? null : nextTool(points.value)),
);

/** Result of the selected dwell; null where it has none. */
export const shownResult = computed(() => {
  const [sheet, id] = [configuration.value?.id, selectedId.value];
  return results.value?.dwells.find((each) => each.configuration === sheet && each.id === id) ?? null;
});

/** The scale as it stands, px per mm; null where there is none. */
export const pxPerMm = computed(() => {
  const scale = setup.value?.scale;
  if (!scale) return null;
  return Math.hypot(scale.to[0] - scale.from[0], scale.to[1] - scale.from[1]) / scale.length;
});

const clipId = computed(() => shownClip.value?.id ?? null);
const clipFile = computed(() => shownClip.value?.file ?? null);
const opening = computed(() => bench.value?.file?.opening ?? 0);

// a new clip: look at it
effect(() => {
  const id = clipId.value;
  void clipFile.value; // a clip found again is looked at again
  void opening.value;
  batch(() => {
    clipView.value = null;
    clipTrouble.value = null;
    frame.value = 0;
    track.value = null;
  });
  if (id === null) return;
  client.call('clip', { clip: id }).then(
    (view) => {
      if (clipId.peek() === id) clipView.value = view;
    },
    (error: unknown) => {
      if (clipId.peek() === id)
        clipTrouble.value = error instanceof CallError ? error.message : String(error);
    },
  );
});

// a new setup: forget what was being set
const setupId = computed(() => `${opening.value} ${setup.value?.id}`);
effect(() => {
  void setupId.value;
  batch(() => {
    scaleDraft.value = {};
    axisDraft.value = {};
    movedPoints.value = new Map();
    judgements.value = new Map();
    selectedPoint.value = null;
    tool.value = null;
    asksNothing.value = false;
  });
});

// a motion record: fetch it when there is one
const isTracked = computed(() => bench.value?.tracked.includes(clipId.value ?? '') ?? false);
const resultOfClip = computed(() => results.value?.clips.find((each) => each.id === clipId.value) ?? null);
effect(() => {
  const id = clipId.value;
  void resultOfClip.value; // a new result has a new record
  if (id === null || !isTracked.value) {
    track.value = null;
    return;
  }
  client.call('tracks', { clip: id }).then(
    (bytes) => {
      if (clipId.peek() === id) track.value = unpackTrack(bytes);
    },
    () => undefined,
  );
});

/** How many clips of the test could be measured now and are not. */
export const unmeasured = computed(() => {
  const used = new Set<string>();
  const done = new Set(results.value?.dwells.map((each) => `${each.configuration}\n${each.id}`));
  for (const sheet of test.value?.configurations ?? []) {
    for (const each of sheet.dwells)
      if (each.clip !== undefined && !each.typed && !done.has(`${sheet.id}\n${each.id}`)) used.add(each.clip);
    for (const each of sheet.ringdowns)
      if (!results.value?.ringdowns.some((one) => one.configuration === sheet.id && one.id === each.id))
        used.add(each.clip);
  }
  return [...used];
});

/** The scale in words, for the picture. */
export const scaleText = computed(() => {
  const scale = setup.value?.scale;
  return scale ? `${scale.length} mm` : null;
});
