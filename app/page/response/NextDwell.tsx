import { frequencyText } from '../../../src/report/format-number.ts';
import { freshId } from '../../../src/testfile/edit-lists.ts';
import { durationText } from '../format/numbers.ts';
import { bench, edit } from '../state/bench.ts';
import { configuration, selectDwell } from '../state/view.ts';

/** The plan of the configuration shown; null until it has been worked out. */
export function shownPlan() {
  const id = configuration.value?.id;
  return bench.value?.plans?.find((each) => each.configuration === id)?.plan ?? null;
}

/** The dwell that tells most if it is run next, with what to wait, and the button that puts it into the run sheet. */
export function NextDwell() {
  const plan = shownPlan();
  const next = plan?.next;
  if (!plan || !next) return null;
  const row = plan.rows.find((each) => each.driveHz === next.driveHz);
  const { driveHz } = next;
  const isPlanned =
    configuration.value?.dwells.some((each) => each.driveHz === driveHz && !each.typed) ?? false;
  const add = async (): Promise<void> => {
    const sheet = configuration.value;
    if (!sheet || driveHz === null) return;
    const id = freshId(new Set(sheet.dwells.map((each) => each.id)), `d${sheet.dwells.length + 1}`);
    await edit({ kind: 'add-dwells', configuration: sheet.id, dwells: [{ id, driveHz }] });
    selectDwell(id);
  };
  return (
    <div class="next-dwell">
      <p title={next.sentence}>
        {driveHz === null ? (
          next.sentence
        ) : (
          <>
            <b>Next {frequencyText(driveHz)} Hz</b>
            {row && `: wait ${durationText(row.waitS)}, film ${durationText(row.filmS)}`}
            {next.enough && ' (the test may end here)'}
          </>
        )}
      </p>
      {driveHz !== null && !isPlanned && (
        <button type="button" class="plain" onClick={() => void add()}>
          Add to the run sheet
        </button>
      )}
      {row?.cautionsHere &&
        plan.cautions.map((each) => (
          <p key={each.id} class="wait">
            {each.text}
          </p>
        ))}
    </div>
  );
}
