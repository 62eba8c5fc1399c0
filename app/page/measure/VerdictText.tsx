import type { DwellResult } from '../../../src/engine/results.ts';
import { frequencyText, withUncertainty } from '../../../src/report/format-number.ts';
import { amplitudeUnit } from '../format/amplitude.ts';
import { edit } from '../state/bench.ts';
import { configuration, dwell } from '../state/view.ts';
import { shownResult } from './measure-state.ts';

/** What the selected dwell amounts to, in sentences. */
export function VerdictText() {
  const result = shownResult.value;
  const row = dwell.value;
  const hz = row?.driveHz ?? result?.driveHz ?? result?.frequency.value ?? null;
  return (
    <div class="say">
      <h2>{hz === null ? 'no drive frequency' : `${frequencyText(hz)} Hz`}</h2>
      {result ? <Said result={result} /> : <p class="soft">Not measured yet.</p>}
      {row?.window && (
        <button
          type="button"
          class="plain"
          onClick={() => {
            const sheet = configuration.value;
            if (sheet)
              void edit({
                kind: 'change-dwells',
                configuration: sheet.id,
                dwells: [{ id: row.id, window: null }],
              });
          }}
        >
          Find the steady window by itself
        </button>
      )}
    </div>
  );
}

function Said({ result }: { result: DwellResult }) {
  const { factor, short } = amplitudeUnit.value;
  const { amplitude, lag, verdict } = result;
  const tone = verdict === 'steady' ? 'ok' : verdict === 'settling' ? 'wait' : 'bad';
  const scaled = (value: number | null): number | null => (value === null ? null : value * factor);
  return (
    <>
      {amplitude.value !== null && (
        <p>
          <b>{withUncertainty(scaled(amplitude.value), scaled(amplitude.u))} mm</b> {short}
          {lag.value !== null && `, lag ${withUncertainty(lag.value, lag.u)}°`}
        </p>
      )}
      <p class={tone}>
        {result.error ??
          (result.sentence === '' ? `${verdict[0]?.toUpperCase()}${verdict.slice(1)}.` : result.sentence)}
      </p>
      {result.warnings.map((warning) => (
        <p key={warning} class="soft">
          {warning}
        </p>
      ))}
      {result.lostFrames > 0 && (
        <p class="soft">
          {result.lostFrames} of {result.frames} frames lost.
        </p>
      )}
    </>
  );
}
