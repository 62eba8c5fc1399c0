import { parseNumber } from '../format/numbers.ts';
import { edit, notify, test } from '../state/bench.ts';

type NumberKey =
  | 'naturalHz'
  | 'dampingRatio'
  | 'stiffness'
  | 'staticDeflection'
  | 'resolutionHz'
  | 'dwells'
  | 'leftover'
  | 'amplitudeRelativeU'
  | 'frameRate'
  | 'frameWidth';

/** The fields in the order of asking: key, words, and what a typed number is divided by to be kept. */
const FIELDS: readonly (readonly [NumberKey, string, number])[] = [
  ['naturalHz', 'Natural frequency, about, Hz', 1],
  ['dampingRatio', 'Damping ratio, about', 1],
  ['stiffness', 'or stiffness, N/m (with the moving mass)', 1],
  ['staticDeflection', 'Amplitude well below resonance, mm', 1],
  ['resolutionHz', 'Smallest step of the generator, Hz', 1],
  ['dwells', 'Dwells in all', 1],
  ['leftover', 'Leftover when filming starts, %', 100],
  ['amplitudeRelativeU', 'Uncertainty wanted of amplitudes, %', 100],
  ['frameRate', 'Frame rate of the camera, frames/s', 1],
  ['frameWidth', 'Width of the frame, px', 1],
];

/** What is known before the test, and what is wanted of it. */
export function PlanFields() {
  const plan = test.value?.plan;
  const timed = plan?.timed;
  const change = (changes: Record<string, unknown>): void => void edit({ kind: 'plan', changes });
  return (
    <form class="plan-fields" onSubmit={(event) => event.preventDefault()}>
      {FIELDS.map(([key, label, divide]) => (
        <Field
          key={key}
          label={label}
          value={plan?.[key] === undefined ? null : plan[key] * divide}
          onChange={(value) => change({ [key]: value === null ? null : value / divide })}
        />
      ))}
      <Field
        label="or timed: cycles"
        value={timed?.cycles ?? null}
        onChange={(cycles) => change({ timed: cycles === null ? null : { seconds: 10, ...timed, cycles } })}
      />
      <Field
        label="took, s"
        value={timed?.seconds ?? null}
        onChange={(seconds) => change({ timed: seconds === null ? null : { cycles: 10, ...timed, seconds } })}
      />
    </form>
  );
}

function Field(props: { label: string; value: number | null; onChange: (value: number | null) => void }) {
  const text = props.value === null ? '' : String(Number(props.value.toPrecision(10)));
  return (
    <label class="field">
      {props.label}
      <input
        key={text}
        inputMode="decimal"
        defaultValue={text}
        onChange={(event) => {
          const typed = event.currentTarget.value.trim();
          const value = typed === '' ? null : parseNumber(typed);
          if (typed !== '' && (value === null || value <= 0))
            notify('caution', `"${typed}" is no number above 0.`);
          else props.onChange(value);
        }}
      />
    </label>
  );
}
