import { runCommand } from '../chrome/commands.ts';
import { durationText } from '../format/numbers.ts';
import { ask, bench, job } from '../state/bench.ts';
import { shownClip } from '../state/view.ts';
import { clipView, frame, points, track, unmeasured } from './measure-state.ts';
import { nextTool } from './points.ts';
import { showFrame } from './scrub-state.ts';

/** Which clip and frame is shown, and the one thing to do next. */
export function ClipBar() {
  const [clip, view] = [shownClip.value, clipView.value];
  return (
    <div class="bar">
      <span class="step clip-name" title={clip?.file}>
        clip <b>{clip ? clip.file.split('/').at(-1) : 'none'}</b>
      </span>
      {view && (
        <span class="step">
          frame <b>{frame.value + 1}</b> of {view.frameCount}, <b>{timeText()}</b>
        </span>
      )}
      {view && (
        <span class="steps">
          <button type="button" aria-label="One frame back" onClick={() => showFrame(frame.value - 1)}>
            Back
          </button>
          <button type="button" aria-label="One frame on" onClick={() => showFrame(frame.value + 1)}>
            On
          </button>
        </span>
      )}
      {job.value ? <Progress /> : <NextThing />}
    </div>
  );
}

function timeText(): string {
  const view = clipView.value;
  const at = track.value?.frame.indexOf(frame.value) ?? -1;
  const seconds = at >= 0 ? track.value?.timeS[at] : view?.timesS[frame.value];
  return `${(seconds ?? 0).toFixed(3)} s`;
}

function NextThing() {
  const count = unmeasured.value.length;
  const ready = nextTool(points.value) === null;
  const missing = bench.value?.missing.includes(shownClip.value?.id ?? '') ?? false;
  const again = count === 0 && shownClip.value !== null;
  const text = count === 1 ? 'Measure the clip' : `Measure the rest (${count})`;
  return (
    <button
      type="button"
      class="go"
      disabled={missing || (!ready && count > 0) || (count === 0 && !again)}
      title={ready ? undefined : 'Set the scale and the response marker first'}
      onClick={() => runCommand(again ? 'measure-clip' : 'measure-rest')}
    >
      {again ? 'Measure again' : text}
    </button>
  );
}

function Progress() {
  const state = job.value;
  if (!state) return null;
  const { frame: done, frameCount, framesPerS, leftS, clipIndex, clipCount, cancelling } = state;
  const part = ((frameCount ? done / frameCount : 0) + clipIndex) / clipCount;
  const words = [
    `clip ${clipIndex + 1} of ${clipCount}`,
    framesPerS === null ? null : `${Math.round(framesPerS)} frames/s`,
    leftS === null ? null : `${durationText(leftS)} left`,
  ];
  return (
    <div class="progress" role="status">
      <progress max={1} value={part} aria-label="Measuring" />
      <span>{words.filter((each) => each !== null).join(', ')}</span>
      <button type="button" disabled={cancelling} onClick={() => void ask('cancelMeasuring', {})}>
        {cancelling ? 'Stopping …' : 'Cancel'}
      </button>
    </div>
  );
}
