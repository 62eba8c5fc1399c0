import type { MarkerSpec, PointPx, Scale, Setup } from '../../../src/testfile/schema.ts';

/** A point set on the picture: an end of the scale or of the motion axis, or a marker by its id. */
export type PointKey = 'scale-from' | 'scale-to' | 'axis-from' | 'axis-to' | `marker:${string}`;

/** A point as it is listed and drawn. */
export interface PlacedPoint {
  readonly key: PointKey;
  readonly at: PointPx;
  readonly name: string;
  /** What it is for, in words. */
  readonly meaning: string;
  readonly marker: MarkerSpec | null;
}

/** What can be placed by the next click. */
export type Tool = 'scale-from' | 'scale-to' | 'axis-from' | 'axis-to' | 'response' | 'drive' | 'ground';

/** Each tool's name, what it is for, and what to click. */
export const TOOLS: Readonly<Record<Tool, { name: string; meaning: string; ask: string }>> = {
  'scale-from': {
    name: 'Scale point A',
    meaning: 'one end of a known distance on the rule',
    ask: 'Click the first scale point: a line of the rule, near one end of what is in view.',
  },
  'scale-to': {
    name: 'Scale point B',
    meaning: 'the other end of the known distance',
    ask: 'Click the second scale point: a line of the rule, as far from the first as can be.',
  },
  'axis-from': {
    name: 'Axis point A',
    meaning: 'where the line of motion begins',
    ask: 'Click a point on the line along which the part moves.',
  },
  'axis-to': {
    name: 'Axis point B',
    meaning: 'where the line of motion ends',
    ask: 'Click a second point on that line, far from the first.',
  },
  response: {
    name: 'Response',
    meaning: 'the moving part: its amplitude is measured',
    ask: 'Click a mark on the moving part: a corner, a dot or a pattern, not a plain edge.',
  },
  drive: {
    name: 'Drive',
    meaning: 'the exciter: gives the lag, and the gain',
    ask: 'Click a mark on the moving part of the exciter.',
  },
  ground: {
    name: 'Ground',
    meaning: 'fixed to the bench: takes out camera shake',
    ask: 'Click a mark that is fixed to the bench, near the moving part.',
  },
};

/** A scale being set: complete only with both points and the length. */
export interface ScaleDraft {
  readonly from?: PointPx;
  readonly to?: PointPx;
}

/** An axis being set. */
export interface AxisDraft {
  readonly from?: PointPx;
  readonly to?: PointPx;
}

/** Every point of a setup, with those being set or moved in their new places. */
export function placedPoints(
  setup: Setup | null,
  scaleDraft: ScaleDraft,
  axisDraft: AxisDraft,
  moved: ReadonlyMap<PointKey, PointPx>,
): PlacedPoint[] {
  const points: PlacedPoint[] = [];
  const add = (
    key: PointKey,
    at: PointPx | undefined,
    tool: Tool,
    marker: MarkerSpec | null = null,
  ): void => {
    if (!at) return;
    const { name, meaning } = TOOLS[tool];
    const called = marker && marker.id !== marker.role ? `${name}: ${marker.id}` : name;
    points.push({ key, at: moved.get(key) ?? at, name: called, meaning, marker });
  };
  const scale: Partial<Scale> = setup?.scale ?? {};
  add('scale-from', scaleDraft.from ?? scale.from, 'scale-from');
  add('scale-to', scaleDraft.to ?? scale.to, 'scale-to');
  const axis = typeof setup?.motionAxis === 'object' ? setup.motionAxis : null;
  add('axis-from', axisDraft.from ?? axis?.from, 'axis-from');
  add('axis-to', axisDraft.to ?? axis?.to, 'axis-to');
  for (const marker of setup?.markers ?? []) add(`marker:${marker.id}`, marker.at, marker.role, marker);
  return points;
}

/** What is still to be placed before the clips can be measured, in the order of asking; null when nothing is. */
export function nextTool(points: readonly PlacedPoint[]): Tool | null {
  const has = (key: PointKey): boolean => points.some((each) => each.key === key);
  if (!has('scale-from')) return 'scale-from';
  if (!has('scale-to')) return 'scale-to';
  if (!points.some((each) => each.marker?.role === 'response')) return 'response';
  return null;
}
