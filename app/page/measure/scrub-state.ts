import { signal } from '@preact/signals';
import { clipView, frame } from './measure-state.ts';

/** Whether the hand is on its way through the clip: more frames are to be expected at once. */
export const isMoving = signal(false);
let rest: ReturnType<typeof setTimeout> | null = null;

/** Shows another frame; `moving` while more are to be expected at once. */
export function showFrame(next: number, moving = false): void {
  const count = clipView.value?.frameCount ?? 0;
  if (count === 0) return;
  if (rest) clearTimeout(rest);
  isMoving.value = moving;
  if (moving)
    rest = setTimeout(() => {
      isMoving.value = false;
    }, 200);
  frame.value = Math.min(count - 1, Math.max(0, Math.round(next)));
}
