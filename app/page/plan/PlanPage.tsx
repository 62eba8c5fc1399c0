import type { Plan } from '../../../src/plan/plan-types.ts';
import { frequencyText, withUncertainty } from '../../../src/report/format-number.ts';
import { freshId } from '../../../src/testfile/edit-lists.ts';
import { amplitudeUnit } from '../format/amplitude.ts';
import { durationText } from '../format/numbers.ts';
import { shownPlan } from '../response/NextDwell.tsx';
import { edit } from '../state/bench.ts';
import { configuration } from '../state/view.ts';
import { PlanFields } from './PlanFields.tsx';

/** Which frequencies to run, how long to wait and film at each, and what to mind. */
export function PlanPage() {
  const plan = shownPlan();
  return (
    <div class="plan">
      <header>
        <h1>Plan: {configuration.value?.label ?? configuration.value?.id}</h1>
        <button type="button" onClick={() => window.print()}>
          Print
        </button>
      </header>
      <PlanFields />
      {!plan && <p class="soft">The plan is being worked out …</p>}
      {plan?.reason && <p class="wait">{plan.reason}</p>}
      {plan && plan.rows.length > 0 && <PlanTable plan={plan} />}
      {plan && <PlanWords plan={plan} />}
    </div>
  );
}

function PlanTable({ plan }: { plan: Plan }) {
  const { factor, short } = amplitudeUnit.value;
  const { totals } = plan;
  return (
    <>
      <p class="soft">
        Reckoned with a natural frequency of {withUncertainty(plan.naturalHz.value, plan.naturalHz.u)} Hz and
        a damping ratio of {withUncertainty(plan.dampingRatio.value, plan.dampingRatio.u)}.
      </p>
      <table class="parameters">
        <caption class="unseen">Run sheet advice</caption>
        <thead>
          <tr>
            <th scope="col">drive Hz</th>
            <th scope="col">wait</th>
            <th scope="col">film</th>
            <th scope="col">expected mm, {short}</th>
            <th scope="col">with 95 % below</th>
            <th scope="col">to mind</th>
          </tr>
        </thead>
        <tbody>
          {plan.rows.map((row) => (
            <tr key={row.driveHz} class={row.aboveLimit ? 'bad' : ''}>
              <td>{frequencyText(row.driveHz)}</td>
              <td>{durationText(row.waitS)}</td>
              <td>
                {durationText(row.filmS)}, {row.frames} frames
              </td>
              <td>{mm(row.predictedAmplitudeMm?.medianMm, factor)}</td>
              <td>{mm(row.predictedAmplitudeMm?.upperMm, factor)}</td>
              <td>
                {[row.aboveLimit ? 'may pass the travel limit: do not run' : '', ...row.advice].join(' ')}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p>
        {totals.dwells} dwells take {durationText(totals.benchS)} on the rig.{' '}
        <button type="button" onClick={() => void takeOver(plan)}>
          Put these into the run sheet
        </button>
      </p>
    </>
  );
}

function mm(value: number | undefined, factor: number): string {
  return value === undefined ? 'not known' : (value * factor).toPrecision(3);
}

async function takeOver(plan: Plan): Promise<void> {
  const sheet = configuration.value;
  if (!sheet) return;
  const there = new Set(sheet.dwells.map((each) => each.driveHz));
  const taken = new Set(sheet.dwells.map((each) => each.id));
  const dwells = plan.rows
    .filter((row) => !row.aboveLimit && !there.has(row.driveHz))
    .map(({ driveHz }) => {
      const id = freshId(taken, `d${taken.size + 1}`);
      taken.add(id);
      return { id, driveHz };
    });
  if (dwells.length > 0) await edit({ kind: 'add-dwells', configuration: sheet.id, dwells });
}

function PlanWords({ plan }: { plan: Plan }) {
  return (
    <div class="plan-words">
      {plan.cautions.length > 0 && (
        <Words heading="Take care" tone="wait" texts={plan.cautions.map((each) => each.text)} />
      )}
      {plan.camera && <Words heading="Camera" tone="" texts={plan.camera.sentences} />}
      {plan.warnings.length > 0 && <Words heading="Mind" tone="soft" texts={plan.warnings} />}
    </div>
  );
}

function Words({ heading, tone, texts }: { heading: string; tone: string; texts: readonly string[] }) {
  return (
    <section>
      <h2>{heading}</h2>
      {texts.map((text) => (
        <p key={text} class={tone}>
          {text}
        </p>
      ))}
    </section>
  );
}
