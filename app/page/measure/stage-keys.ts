import { armedTool, asksNothing, clipView, frame, selectedPoint, tool } from './measure-state.ts';
import { nudge, removePoint } from './point-actions.ts';
import { showFrame } from './scrub-state.ts';
import { ownView, zoomMiddle } from './stage-state.ts';

const STEP_PX = 0.1;
const ARROWS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};

/** Keys on the picture. */
export function stageKeys(event: KeyboardEvent): void {
  const view = clipView.value;
  if (!view || event.ctrlKey || event.metaKey || event.altKey) return;
  const arrow = ARROWS[event.key];
  const step = event.shiftKey ? 1 : STEP_PX;
  if (arrow && selectedPoint.value) nudge(arrow[0] * step, arrow[1] * step);
  else if (event.key === ',') showFrame(frame.value - 1);
  else if (event.key === '.') showFrame(frame.value + 1);
  else if (event.key === '+' || event.key === '=') zoomMiddle(view, 1.25);
  else if (event.key === '-') zoomMiddle(view, 0.8);
  else if (event.key === '0') ownView.value = null;
  else if (event.key === 'Delete' && selectedPoint.value) void removePoint(selectedPoint.value);
  else if (event.key === 'Escape' && armedTool.value) {
    tool.value = null;
    asksNothing.value = true;
  } else return;
  event.preventDefault();
}
