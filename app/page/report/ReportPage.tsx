import { dwellsCsv } from '../../../src/report/dwells-csv.ts';
import { saveFile } from '../resonance/save-plot.ts';
import { ask, results, test } from '../state/bench.ts';

/** What the customer gets, to be saved. */
export function ReportPage() {
  const name = (test.value?.title ?? 'test').replace(/[^\p{L}\p{N} ._-]+/gu, ' ').trim();
  const measured = (results.value?.dwells ?? []).filter((each) => each.amplitude.value !== null).length;
  const saveReport = async (): Promise<void> => {
    const html = await ask('report', {});
    if (html) saveFile(`${name}.html`, new Blob([html], { type: 'text/html' }));
  };
  return (
    <div class="report">
      <h1>Report</h1>
      <p class="soft">
        Method, numbers, uncertainty budget, plots and cautions of {measured} dwells, in one file that opens
        in any browser and prints to PDF from there.
      </p>
      <div class="row-buttons">
        <button type="button" class="go" disabled={measured === 0} onClick={() => void saveReport()}>
          Save the report (HTML)
        </button>
        <button
          type="button"
          disabled={!results.value}
          onClick={() => {
            if (results.value)
              saveFile(`${name} dwells.csv`, new Blob([dwellsCsv(results.value)], { type: 'text/csv' }));
          }}
        >
          Save the dwells (CSV)
        </button>
        <button
          type="button"
          disabled={!results.value}
          onClick={() =>
            saveFile(
              `${name} results.json`,
              new Blob([`${JSON.stringify(results.value, null, 2)}\n`], { type: 'application/json' }),
            )
          }
        >
          Save the results (JSON)
        </button>
      </div>
    </div>
  );
}
