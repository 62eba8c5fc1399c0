import { runCommand } from '../chrome/commands.ts';
import { bench } from '../state/bench.ts';
import { shownClip } from '../state/view.ts';
import { ClipBar } from './ClipBar.tsx';
import { FrameStage } from './FrameStage.tsx';
import { Guide } from './Guide.tsx';
import { MotionStrip } from './MotionStrip.tsx';
import { PointsPanel } from './PointsPanel.tsx';
import { Scrubber } from './Scrubber.tsx';
import { VerdictText } from './VerdictText.tsx';

/** The frame, large, with what is placed on it; under it the motion record. */
export function MeasurePage() {
  const clip = shownClip.value;
  if (!clip) return <NoClip />;
  const missing = bench.value?.missing.includes(clip.id) ?? false;
  return (
    <div class="measure">
      <ClipBar />
      <div class="picture">
        <FrameStage />
        <Guide />
        {missing && (
          <p class="stage-trouble">
            {clip.file} is not there.{' '}
            <button type="button" onClick={() => runCommand('find-clips')}>
              Find it …
            </button>
          </p>
        )}
      </div>
      <PointsPanel />
      <Scrubber />
      <div class="strip">
        <MotionStrip />
        <VerdictText />
      </div>
    </div>
  );
}

function NoClip() {
  return (
    <div class="no-clip">
      <p>This row has no clip. Drop clips anywhere in the window, or choose them.</p>
      <button type="button" class="go" onClick={() => runCommand('add-clips')}>
        Add clips …
      </button>
    </div>
  );
}
