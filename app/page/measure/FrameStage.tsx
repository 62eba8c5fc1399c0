import { useSignalEffect } from '@preact/signals';
import { useEffect, useRef } from 'preact/hooks';
import type { PointPx } from '../../../src/testfile/schema.ts';
import { preferences } from '../state/bench.ts';
import { shownClip } from '../state/view.ts';
import { drawScene, type Scene } from './draw-frame.ts';
import { FrameLoader } from './frame-loader.ts';
import { spotPhrase } from './judgement-words.ts';
import {
  armedTool,
  clipTrouble,
  clipView,
  frame,
  judgements,
  points,
  pxPerMm,
  scaleText,
  selectedPoint,
  track,
} from './measure-state.ts';
import { movePoint, place, settle } from './point-actions.ts';
import type { PointKey } from './points.ts';
import { isMoving } from './scrub-state.ts';
import { stageKeys } from './stage-keys.ts';
import { hand, loaded, ownView, stageSize, viewOf } from './stage-state.ts';
import { toPicture, toView, zoomedAt } from './view-transform.ts';

const GRAB_PX = 12;

const loader = new FrameLoader((next) => {
  if (next.clip === shownClip.peek()?.id) loaded.value = next;
});
(window as { frameLatenciesMs?: readonly number[] }).frameLatenciesMs = loader.latenciesMs;

/** The clip's frame, large, with everything placed on it; click places, drag moves a point or the picture. */
export function FrameStage() {
  const canvas = useRef<HTMLCanvasElement>(null);
  useStageSize(canvas);
  useSignalEffect(() => {
    const [clip, view] = [shownClip.value, clipView.value];
    if (clip && view && view.id === clip.id) loader.show(clip.id, frame.value, view.width, isMoving.value);
    else loaded.value = null;
  });
  useSignalEffect(() => {
    const element = canvas.current;
    const context = element?.getContext('2d');
    const { width, height } = stageSize.value;
    if (!element || !context) return;
    const ratio = window.devicePixelRatio || 1;
    const [columns, rows] = [Math.round(width * ratio), Math.round(height * ratio)];
    if (element.width !== columns) element.width = columns;
    if (element.height !== rows) element.height = rows;
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    const scene = sceneNow();
    if (scene) drawScene(context, { width, height }, scene);
    else context.clearRect(0, 0, width, height);
  });
  return (
    <div
      class="stage"
      // biome-ignore lint/a11y/noNoninteractiveTabindex: the picture is worked on by keyboard as well
      tabIndex={0}
      role="application"
      aria-label={stageLabel()}
      aria-describedby="stage-help"
      data-picture={
        clipView.value && loaded.value ? `${clipView.value.width}x${clipView.value.height}` : undefined
      }
      onKeyDown={stageKeys}
      onBlur={() => void settle()}
    >
      <canvas ref={canvas} class={armedTool.value ? 'armed' : ''} {...pointerHandlers()} />
      <p id="stage-help" class="unseen">
        Arrow keys move the selected point by a tenth of a pixel, with Shift by one; comma and full stop step
        through the frames; plus, minus and zero zoom.
      </p>
      {clipTrouble.value && <p class="stage-trouble">{clipTrouble.value}</p>}
      {!clipTrouble.value && !loaded.value && <p class="stage-waiting">Reading the clip …</p>}
    </div>
  );
}

function stageLabel(): string {
  const view = clipView.value;
  if (!view) return 'Clip frame';
  return `Frame ${frame.value + 1} of ${view.frameCount}, with ${points.value.length} points placed`;
}

function sceneNow(): Scene | null {
  const view = clipView.value;
  if (!view) return null;
  const words = new Map<PointKey, string>();
  const patchPx = new Map<PointKey, number>();
  for (const [key, judgement] of judgements.value) {
    words.set(key, spotPhrase(judgement));
    if (judgement !== 'looking') patchPx.set(key, judgement.sizePx);
  }
  for (const { key, marker } of points.value) if (marker?.size) patchPx.set(key, marker.size[0]);
  const textPercent = preferences.value?.textPercent ?? 100;
  return {
    loaded: loaded.value,
    picture: view,
    view: viewOf(view),
    points: points.value,
    selected: selectedPoint.value,
    track: track.value,
    // the track is drawn where the picture stands, which may lag behind a moving hand
    frame: loaded.value?.frame ?? frame.value,
    patchPx,
    words,
    aim: armedTool.value ? hand.value : null,
    scaleText: pxPerMm.value === null ? null : scaleText.value,
    stageWidth: stageSize.value.width,
    rem: (13 * textPercent) / 100,
  };
}

function useStageSize(canvas: { current: HTMLCanvasElement | null }): void {
  useEffect(() => {
    const stage = canvas.current?.parentElement;
    if (!stage) return;
    const observer = new ResizeObserver(() => {
      stageSize.value = { width: Math.max(50, stage.clientWidth), height: Math.max(50, stage.clientHeight) };
    });
    observer.observe(stage);
    const element = canvas.current;
    const wheel = (event: WheelEvent): void => {
      const view = clipView.value;
      if (!view) return;
      event.preventDefault();
      ownView.value = zoomedAt(viewOf(view), Math.exp(-event.deltaY / 400), event.offsetX, event.offsetY);
    };
    element?.addEventListener('wheel', wheel, { passive: false });
    return () => {
      observer.disconnect();
      element?.removeEventListener('wheel', wheel);
    };
  }, []);
}

type Drag = { key: PointKey } | { fromX: number; fromY: number; moved: boolean };
let drag: Drag | null = null;

function pointerHandlers() {
  return {
    onPointerDown: (event: PointerEvent) => {
      const view = clipView.value;
      if (!view || event.button !== 0) return;
      (event.currentTarget as HTMLElement).setPointerCapture(event.pointerId);
      const key = armedTool.value ? null : pointNear(event.offsetX, event.offsetY);
      if (key) selectedPoint.value = key;
      drag = key ? { key } : { fromX: event.offsetX, fromY: event.offsetY, moved: false };
    },
    onPointerMove: (event: PointerEvent) => {
      const view = clipView.value;
      if (!view) return;
      const transform = viewOf(view);
      const at = toPicture(transform, event.offsetX, event.offsetY);
      hand.value = at;
      if (!drag) return;
      if ('key' in drag) {
        movePoint(drag.key, at);
        return;
      }
      const [dx, dy] = [event.offsetX - drag.fromX, event.offsetY - drag.fromY];
      if (!drag.moved && Math.hypot(dx, dy) < 4) return;
      ownView.value = { ...transform, offsetX: transform.offsetX + dx, offsetY: transform.offsetY + dy };
      drag = { fromX: event.offsetX, fromY: event.offsetY, moved: true };
    },
    onPointerUp: (event: PointerEvent) => {
      const [was, view, tool] = [drag, clipView.value, armedTool.value];
      drag = null;
      if (!was || !view) return;
      if ('key' in was) void settle();
      else if (!was.moved && tool && loaded.value) {
        const at = toPicture(viewOf(view), event.offsetX, event.offsetY);
        if (isInside(at, view.width, view.height)) void place(tool, at);
      } else if (!was.moved) selectedPoint.value = null;
    },
    onPointerLeave: () => {
      hand.value = null;
    },
  };
}

function isInside([x, y]: PointPx, width: number, height: number): boolean {
  return x >= -0.5 && y >= -0.5 && x <= width - 0.5 && y <= height - 0.5;
}

function pointNear(x: number, y: number): PointKey | null {
  const view = clipView.value;
  if (!view) return null;
  let nearest: PointKey | null = null;
  let least = GRAB_PX;
  for (const point of points.value) {
    const [px, py] = toView(viewOf(view), point.at);
    const distance = Math.hypot(px - x, py - y);
    if (distance < least) [nearest, least] = [point.key, distance];
  }
  return nearest;
}
