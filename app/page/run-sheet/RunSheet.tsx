import { useComputed } from '@preact/signals';
import { runCommand } from '../chrome/commands.ts';
import { amplitudeUnit } from '../format/amplitude.ts';
import { bench, job, results, test } from '../state/bench.ts';
import { configuration, dwell, selectConfiguration } from '../state/view.ts';
import { ConfigurationFields } from './ConfigurationFields.tsx';
import { RunSheetGrid } from './RunSheetGrid.tsx';
import { type RowView, rowViews } from './row-view.ts';

/** The run sheet of one configuration, and what can be done with its rows. */
export function RunSheet() {
  const rows = useComputed<readonly RowView[]>(() => {
    const [sheet, state] = [configuration.value, bench.value];
    if (!sheet || !state?.test) return [];
    return rowViews(sheet, {
      test: state.test,
      results: results.value,
      missing: state.missing,
      job: job.value,
      unit: amplitudeUnit.value,
    });
  });
  const sheet = configuration.value;
  const missing = bench.value?.missing.length ?? 0;
  return (
    <section class="run-sheet" aria-labelledby="run-sheet">
      <div class="head">
        <h2 id="run-sheet">Run sheet</h2>
        <select
          aria-label="Configuration"
          value={sheet?.id}
          onChange={(event) => selectConfiguration(event.currentTarget.value)}
        >
          {test.value?.configurations.map((each) => (
            <option key={each.id} value={each.id}>
              {each.label ?? each.id}
            </option>
          ))}
        </select>
        <ConfigurationFields />
      </div>
      {missing > 0 && (
        <p class="lacking">
          {missing === 1 ? 'One clip is' : `${missing} clips are`} not where the test file says.
          <button type="button" onClick={() => runCommand('find-clips')}>
            Find them …
          </button>
        </p>
      )}
      <RunSheetGrid rows={rows} />
      <div class="row-actions">
        <button type="button" class="plain" onClick={() => runCommand('add-dwell')}>
          Add dwell
        </button>
        <button
          type="button"
          class="plain"
          disabled={!dwell.value}
          onClick={() => runCommand('duplicate-dwell')}
        >
          Duplicate
        </button>
        <button
          type="button"
          class="plain"
          disabled={!dwell.value}
          onClick={() => runCommand('exclude-dwell')}
        >
          {dwell.value?.excluded === undefined ? 'Exclude …' : 'Include'}
        </button>
        <button type="button" class="plain" onClick={() => runCommand('sort-dwells')}>
          Sort
        </button>
        <button type="button" class="plain" onClick={() => runCommand('add-clips')}>
          Add clips …
        </button>
      </div>
    </section>
  );
}
