import { batch } from '@preact/signals';
import { freshId } from '../../../src/testfile/edit-lists.ts';
import type { MarkerSpec, PointPx } from '../../../src/testfile/schema.ts';
import type { SpotJudgement } from '../../../src/track/template.ts';
import { CallError } from '../bridge/bench-client.ts';
import { client, edit, notify } from '../state/bench.ts';
import { setup, shownClip } from '../state/view.ts';
import {
  armedTool,
  axisDraft,
  clipView,
  frame,
  judgements,
  movedPoints,
  points,
  scaleDraft,
  selectedPoint,
  tool,
} from './measure-state.ts';
import type { PointKey, Tool } from './points.ts';

const SETTLE_MS = 350; // a row of nudges is one step for undo

function rounded([x, y]: PointPx): PointPx {
  return [Math.round(x * 100) / 100, Math.round(y * 100) / 100];
}

/** Places what the tool stands for at a point of the picture. */
export async function place(what: Tool, at: PointPx): Promise<void> {
  const spot = rounded(at);
  tool.value = null;
  if (what === 'scale-from' || what === 'scale-to') await placeScale(what, spot);
  else if (what === 'axis-from' || what === 'axis-to') await placeAxis(what, spot);
  else await placeMarker(what, spot);
}

async function placeScale(what: 'scale-from' | 'scale-to', at: PointPx): Promise<void> {
  selectedPoint.value = what;
  const end = what === 'scale-from' ? 'from' : 'to';
  if (setup.value?.scale) await edit({ kind: 'scale', setup: setup.value.id, scale: { [end]: at } });
  else scaleDraft.value = { ...scaleDraft.value, [end]: at };
}

/** Sets the true length between the scale points, mm, which completes the scale. */
export async function setScaleLength(length: number): Promise<void> {
  const { from, to } = scaleDraft.value;
  const id = setup.value?.id;
  if (id === undefined) return;
  await edit({
    kind: 'scale',
    setup: id,
    scale: { ...(from ? { from } : {}), ...(to ? { to } : {}), length },
  });
  if (setup.value?.scale || (from && to)) scaleDraft.value = {};
}

async function placeAxis(what: 'axis-from' | 'axis-to', at: PointPx): Promise<void> {
  const axis = typeof setup.value?.motionAxis === 'object' ? setup.value.motionAxis : null;
  const next = { ...axis, ...axisDraft.value, [what === 'axis-from' ? 'from' : 'to']: at };
  selectedPoint.value = what;
  if (next.from && next.to && setup.value) {
    await edit({ kind: 'motion-axis', setup: setup.value.id, axis: { from: next.from, to: next.to } });
    axisDraft.value = {};
  } else {
    axisDraft.value = next;
    tool.value = what === 'axis-from' ? 'axis-to' : 'axis-from';
  }
}

async function placeMarker(role: MarkerSpec['role'], at: PointPx): Promise<void> {
  const [into, clip] = [setup.value, shownClip.value];
  if (!into || !clip) return;
  const before = role === 'ground' ? undefined : into.markers.find((each) => each.role === role);
  const id = before?.id ?? freshId(new Set(into.markers.map((each) => each.id)), role);
  selectedPoint.value = `marker:${id}`;
  const marker = { id, role, at, frame: frame.value, clip: clip.id };
  void judge(`marker:${id}`, at, frame.value, clip.id);
  await edit({ kind: 'place-marker', setup: into.id, marker });
}

/** Asks how well a marker's spot will track, and shows the answer beside it. */
export async function judge(key: PointKey, at: PointPx, inFrame: number, clip: string): Promise<void> {
  const set = (value: SpotJudgement | 'looking' | null): void => {
    const next = new Map(judgements.value);
    if (value) next.set(key, value);
    else next.delete(key);
    judgements.value = next;
  };
  set('looking');
  try {
    const judgement = await client.call('judgeSpot', { clip, frame: inFrame, at });
    const now = points.value.find((each) => each.key === key)?.at;
    if (!now || (Math.abs(now[0] - at[0]) < 1e-6 && Math.abs(now[1] - at[1]) < 1e-6)) set(judgement);
  } catch (error) {
    set(null);
    if (error instanceof CallError && !error.cancelled) notify('caution', error.message);
  }
}

let settling: ReturnType<typeof setTimeout> | null = null;

/** Moves the selected point by so many pixels; it is put into the test when the hand rests. */
export function nudge(dx: number, dy: number): void {
  const point = points.value.find((each) => each.key === selectedPoint.value);
  if (point) movePoint(point.key, [point.at[0] + dx, point.at[1] + dy]);
}

/** Moves a point to a place; it is put into the test when the hand rests. */
export function movePoint(key: PointKey, to: PointPx): void {
  movedPoints.value = new Map(movedPoints.value).set(key, rounded(to));
  if (settling) clearTimeout(settling);
  settling = setTimeout(() => void settle(), SETTLE_MS);
}

/** Puts moved points into the test now. */
export async function settle(): Promise<void> {
  if (settling) clearTimeout(settling);
  settling = null;
  const moves = [...movedPoints.value];
  for (const [key, at] of moves) {
    if (key === 'scale-from' || key === 'scale-to') await placeScale(key, at);
    else if (key === 'axis-from' || key === 'axis-to') await placeAxis(key, at);
    else await moveMarker(key, at);
  }
  const left = new Map(movedPoints.value);
  for (const [key, at] of moves) if (left.get(key) === at) left.delete(key);
  movedPoints.value = left;
}

async function moveMarker(key: PointKey, at: PointPx): Promise<void> {
  const marker = points.value.find((each) => each.key === key)?.marker;
  const into = setup.value;
  if (!marker || !into) return;
  const clip = marker.clip ?? shownClip.value?.id;
  if (clip !== undefined) void judge(key, at, marker.frame ?? 0, clip);
  const { id, role, frame: inFrame, size } = marker;
  await edit({
    kind: 'place-marker',
    setup: into.id,
    marker: {
      ...{ id, role, at },
      ...(inFrame === undefined ? {} : { frame: inFrame }),
      ...(marker.clip === undefined ? {} : { clip: marker.clip }),
      ...(size === undefined ? {} : { size }),
    },
  });
}

/** Takes a point away. */
export async function removePoint(key: PointKey): Promise<void> {
  const into = setup.value;
  if (!into) return;
  batch(() => {
    if (selectedPoint.value === key) selectedPoint.value = null;
    if (key.startsWith('scale')) scaleDraft.value = {};
    if (key.startsWith('axis')) axisDraft.value = {};
  });
  if (key === 'scale-from' || key === 'scale-to') {
    if (into.scale) await edit({ kind: 'scale', setup: into.id, scale: null });
  } else if (key === 'axis-from' || key === 'axis-to')
    await edit({ kind: 'motion-axis', setup: into.id, axis: 'auto' });
  else await edit({ kind: 'remove-marker', setup: into.id, id: key.slice('marker:'.length) });
}

/** Whether the next click on the picture places something. */
export function isArmed(): boolean {
  return armedTool.value !== null && clipView.value !== null;
}
