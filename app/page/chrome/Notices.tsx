import { dismissNotice, notices } from '../state/bench.ts';

/** What there is to tell, until put away; nothing waits for it. */
export function Notices() {
  return (
    <div class="notices" role="log" aria-label="Notices" aria-live="polite">
      {notices.value.map(({ id, level, text }) => (
        <div key={id} class={`notice ${level}`}>
          <span>{text}</span>
          <button type="button" class="plain" onClick={() => dismissNotice(id)}>
            Put away
          </button>
        </div>
      ))}
    </div>
  );
}
