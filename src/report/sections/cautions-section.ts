import { type CautionSituation, cautionsFor } from '../../plan/cautions.ts';
import { type Html, html } from '../html.ts';
import type { ReportContext } from '../report-context.ts';

const NEARLY = 0.8; // of the travel limit: the overshoot on the way up may have reached it

/** What in this test calls for a caution to whoever repeats it. */
export function situationsOf({ test, measurement }: ReportContext): CautionSituation[] {
  const { configurations } = test;
  const found: CautionSituation[] = ['toward-peak', 'magnets'];
  if (new Set(configurations.map((each) => each.movingMass)).size > 1) found.push('added-masses');
  if (configurations.some((each) => each.travelLimit === undefined)) found.push('no-travel-limit');
  const near = configurations.some(
    ({ id, travelLimit }) =>
      travelLimit !== undefined &&
      measurement.results.dwells.some(
        (dwell) => dwell.configuration === id && (dwell.amplitude.value ?? 0) > NEARLY * travelLimit,
      ),
  );
  if (near) found.push('near-travel-limit');
  return found;
}

/** Cautions for whoever repeats the test, and what the report is not. */
export function cautionsSection(context: ReportContext): Html {
  return html`<h2>Cautions</h2>
<p>For whoever repeats this test or goes on from it:</p>
<ul>${cautionsFor(situationsOf(context)).map((caution) => html`<li>${caution.text}</li>`)}</ul>
<p class="notice">This report states what was measured. It does not replace local codes, standards and site rules, nor the judgement of a qualified person, who decides what may be built, loaded or run on the strength of it.</p>
<div class="sign"><div>measured by, date</div><div>checked by, date</div><div>released by, date</div></div>`;
}
