import { useEffect, useRef, useState } from 'preact/hooks';
import { parseMeasured } from '../format/numbers.ts';
import { edit, notify } from '../state/bench.ts';
import { setup } from '../state/view.ts';
import { scaleDraft } from './measure-state.ts';
import { setScaleLength } from './point-actions.ts';

/** The true distance between the scale points: the one length that is typed. */
export function ScaleLength() {
  const scale = setup.value?.scale;
  const { from, to } = scaleDraft.value;
  const lacking = !scale && from !== undefined && to !== undefined;
  const [text, setText] = useState<string | null>(null);
  const input = useRef<HTMLInputElement>(null);
  useEffect(() => {
    if (lacking) input.current?.focus();
  }, [lacking]);
  useEffect(() => setText(null), [scale?.length, scale?.lengthU]);
  if (!scale && !lacking) return null;
  const now = scale ? `${scale.length}${scale.lengthU === undefined ? '' : ` ± ${scale.lengthU}`}` : '';
  const take = async (): Promise<void> => {
    if (text === null || text.trim() === now) return;
    const typed = parseMeasured(text.replace(/mm\s*$/i, ''));
    if (!typed || typed.value <= 0) {
      notify(
        'caution',
        `"${text}" is no length: a number above 0 is expected, such as 300 or 300 ± 0.2, in mm.`,
      );
      return;
    }
    await setScaleLength(typed.value);
    const id = setup.value?.id;
    if (typed.u !== null && id !== undefined)
      await edit({ kind: 'scale', setup: id, scale: { lengthU: typed.u } });
  };
  return (
    <form
      class={lacking ? 'scale-length lacking-length' : 'scale-length'}
      onSubmit={(event) => {
        event.preventDefault();
        void take();
      }}
    >
      <label>
        {lacking ? 'Type the true distance between A and B, mm' : 'Scale length, mm'}
        <input
          ref={input}
          inputMode="decimal"
          value={text ?? now}
          placeholder="300 ± 0.2"
          onInput={(event) => setText(event.currentTarget.value)}
          onBlur={() => scale && void take()}
        />
      </label>
      {lacking && (
        <button type="submit" class="go" disabled={!text}>
          Set
        </button>
      )}
    </form>
  );
}
