import { useComputed } from '@preact/signals';
import { clipView, frame, track } from './measure-state.ts';
import { showFrame } from './scrub-state.ts';

/** Goes through the clip by hand; frames in which a marker was lost are marked under the way. */
export function Scrubber() {
  const view = clipView.value;
  const lost = useComputed(() => lostStretches());
  if (!view) return <div class="scrubber" />;
  const last = Math.max(1, view.frameCount - 1);
  return (
    <div class="scrubber">
      <input
        type="range"
        aria-label="Frame"
        aria-valuetext={`frame ${frame.value + 1} of ${view.frameCount}`}
        min={0}
        max={last}
        step={1}
        value={frame.value}
        onInput={(event) => showFrame(Number(event.currentTarget.value), true)}
      />
      <svg viewBox={`0 0 ${last} 1`} preserveAspectRatio="none" role="img" aria-label={lostLabel(lost.value)}>
        {lost.value.map(([from, to]) => (
          <rect key={from} x={from - 0.5} y={0} width={to - from + 1} height={1} fill="var(--bad)" />
        ))}
      </svg>
    </div>
  );
}

function lostLabel(stretches: readonly (readonly [number, number])[]): string {
  const frames = stretches.reduce((sum, [from, to]) => sum + to - from + 1, 0);
  return frames === 0 ? 'No frame lost' : `${frames} frames in which a marker was lost`;
}

/** Runs of frames in which some marker was lost. */
function lostStretches(): [number, number][] {
  const now = track.value;
  const stretches: [number, number][] = [];
  if (!now) return stretches;
  for (let k = 0; k < now.frame.length; k++) {
    if (!now.markers.some((each) => each.state[k] === 2)) continue;
    const index = now.frame[k] ?? 0;
    const last = stretches.at(-1);
    if (last && index === last[1] + 1) last[1] = index;
    else stretches.push([index, index]);
  }
  return stretches;
}
