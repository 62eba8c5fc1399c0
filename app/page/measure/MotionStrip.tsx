import { useSignal, useSignalEffect } from '@preact/signals';
import { useEffect, useMemo, useRef } from 'preact/hooks';
import { theme } from '../chrome/looks.ts';
import { edit, preferences } from '../state/bench.ts';
import { configuration, dwell } from '../state/view.ts';
import { firstAtOrAfter } from './decimate.ts';
import { columnOf, drawStrip, type StripScene, timeOf } from './draw-strip.ts';
import { frame, shownResult, track } from './measure-state.ts';
import { showFrame } from './scrub-state.ts';
import { stripFit } from './strip-fit.ts';
import { WindowHandle } from './WindowHandle.tsx';

/** Displacement against time with the steady window, its fit and residual; wheel zooms, drag pans, a click goes there. */
export function MotionStrip() {
  const canvas = useRef<HTMLCanvasElement>(null);
  const size = useSignal({ width: 600, height: 140 });
  const range = useSignal<readonly [number, number] | null>(null);
  const draft = useSignal<readonly [number, number] | null>(null);
  const [now, result] = [track.value, shownResult.value];
  const frequency = result?.driveHz ?? result?.frequency.value ?? null;
  const window_ = draft.value ?? result?.window ?? dwell.value?.window ?? null;
  const fit = useMemo(
    () =>
      now && window_ && frequency !== null
        ? stripFit(now.timeS, now.displacementMm, window_, frequency)
        : null,
    [now, window_?.[0], window_?.[1], frequency],
  );
  const ends: readonly [number, number] = now ? [now.timeS[0] ?? 0, now.timeS.at(-1) ?? 1] : [0, 1];
  const [fromS, toS] = range.value ?? ends;
  const at = now?.frame.indexOf(frame.value) ?? -1;
  const scene: StripScene | null = now && {
    timeS: now.timeS,
    displacementMm: now.displacementMm,
    ...{ fromS, toS, window: window_, fit },
    nowS: at >= 0 ? (now.timeS[at] ?? null) : null,
    rem: (13 * (preferences.value?.textPercent ?? 100)) / 100,
  };
  const latest = useRef(scene);
  latest.current = scene;

  useEffect(() => {
    range.value = null;
    draft.value = null;
  }, [now, result]);
  useEffect(() => watchStrip(canvas.current, size, range, latest), [now === null]);
  useSignalEffect(() => void theme.value);
  useEffect(() => {
    const element = canvas.current;
    const context = element?.getContext('2d');
    if (!element || !context) return;
    const ratio = window.devicePixelRatio || 1;
    element.width = Math.round(size.value.width * ratio);
    element.height = Math.round(size.value.height * ratio);
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    if (scene) drawStrip(context, size.value, scene);
  });

  const moveWindow = (next: readonly [number, number], done: boolean): void => {
    draft.value = next;
    const [sheet, row] = [configuration.value, dwell.value];
    if (!done || !sheet || !row) return;
    const kept: [number, number] = [round(next[0]), round(next[1])];
    void edit({ kind: 'change-dwells', configuration: sheet.id, dwells: [{ id: row.id, window: kept }] });
  };
  const showTime = (x: number): void => {
    if (!scene || !now) return;
    const k = firstAtOrAfter(now.timeS, timeOf(x, scene, size.value));
    showFrame(now.frame[Math.min(k, now.frame.length - 1)] ?? 0);
  };
  if (!now)
    return <p class="strip-empty soft">The motion record appears here when the clip has been measured.</p>;
  return (
    <div class="strip-plot">
      <canvas
        ref={canvas}
        role="img"
        aria-label={`Displacement against time, ${(ends[1] - ends[0]).toFixed(1)} s`}
        onPointerDown={(event) => startPan(event, scene, size, range, showTime)}
        onDblClick={() => {
          range.value = null;
        }}
      />
      {scene &&
        window_ &&
        ([0, 1] as const).map((side) => (
          <WindowHandle
            key={side}
            side={side}
            window={window_}
            limits={ends}
            x={columnOf(window_[side], scene, size.value)}
            toTime={(x) => timeOf(x, scene, size.value)}
            onMove={moveWindow}
          />
        ))}
    </div>
  );
}

function round(timeS: number): number {
  return Math.round(timeS * 1000) / 1000;
}

type Box<T> = { value: T };
type Range = readonly [number, number] | null;

function watchStrip(
  canvas: HTMLCanvasElement | null,
  size: Box<{ width: number; height: number }>,
  range: Box<Range>,
  latest: { current: StripScene | null },
): (() => void) | undefined {
  const place = canvas?.parentElement;
  if (!canvas || !place) return undefined;
  const observer = new ResizeObserver(() => {
    size.value = { width: Math.max(100, place.clientWidth), height: Math.max(60, place.clientHeight) };
  });
  observer.observe(place);
  const wheel = (event: WheelEvent): void => {
    const scene = latest.current;
    if (!scene) return;
    event.preventDefault();
    const factor = Math.exp(event.deltaY / 300);
    const middle = timeOf(event.offsetX, scene, size.value);
    const [first, last] = [scene.timeS[0] ?? 0, scene.timeS.at(-1) ?? 1];
    const next = [middle + (scene.fromS - middle) * factor, middle + (scene.toS - middle) * factor] as const;
    range.value =
      next[1] - next[0] >= last - first ? null : [Math.max(first, next[0]), Math.min(last, next[1])];
  };
  canvas.addEventListener('wheel', wheel, { passive: false });
  return () => {
    observer.disconnect();
    canvas.removeEventListener('wheel', wheel);
  };
}

/** Drag pans; a press without a drag goes to that time. */
function startPan(
  event: PointerEvent,
  scene: StripScene | null,
  size: Box<{ width: number; height: number }>,
  range: Box<Range>,
  onPress: (x: number) => void,
): void {
  const element = event.currentTarget as HTMLElement;
  if (!scene) return;
  element.setPointerCapture(event.pointerId);
  const startX = event.offsetX;
  const span = scene.toS - scene.fromS;
  const [first, last] = [scene.timeS[0] ?? 0, scene.timeS.at(-1) ?? 1];
  let moved = false;
  const move = (next: PointerEvent): void => {
    if (Math.abs(next.offsetX - startX) > 3) moved = true;
    if (!moved) return;
    const by = timeOf(startX, scene, size.value) - timeOf(next.offsetX, scene, size.value);
    const from = Math.min(Math.max(first, scene.fromS + by), last - span);
    range.value = span >= last - first ? null : [from, from + span];
  };
  const up = (next: PointerEvent): void => {
    element.removeEventListener('pointermove', move);
    if (!moved) onPress(next.offsetX);
  };
  element.addEventListener('pointermove', move);
  element.addEventListener('pointerup', up, { once: true });
}
