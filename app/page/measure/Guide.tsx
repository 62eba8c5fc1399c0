import { setup } from '../state/view.ts';
import { armedTool, asksNothing, scaleDraft, tool } from './measure-state.ts';
import { TOOLS } from './points.ts';

/** What the next click does, over the picture. */
export function Guide() {
  const armed = armedTool.value;
  const { from, to } = scaleDraft.value;
  const wantsLength = !setup.value?.scale && from !== undefined && to !== undefined;
  if (wantsLength && tool.value === null)
    return <p class="guide">Type the true distance between A and B, in the camera setup at the right.</p>;
  if (!armed) return null;
  return (
    <p class="guide" role="status">
      {TOOLS[armed].ask}
      <button
        type="button"
        class="plain"
        onClick={() => {
          tool.value = null;
          asksNothing.value = true;
        }}
      >
        Not now
      </button>
    </p>
  );
}
