import type { ConfigurationPlan } from '../engine/plan-test.ts';
import type { PlanRow } from '../plan/plan.ts';
import { frequencyText, significant, withUncertainty } from './format-number.ts';
import { type TextColumn, textTable, wrapped } from './text-table.ts';

const COLUMNS: readonly TextColumn[] = [
  { title: 'drive Hz', align: 'right' },
  { title: 'wait s', align: 'right' },
  { title: 'film s', align: 'right' },
  { title: 'frames', align: 'right' },
  { title: 'expected mm (95 % below)', align: 'right' },
  { title: 'px', align: 'right' },
  { title: 'travel', align: 'left' },
];

const TRAVEL: Readonly<Record<PlanRow['travel'], string>> = {
  below: 'below the limit',
  ramp: 'ramp up slowly',
  refused: 'NOT TO BE RUN',
  unknown: 'not known',
};

function row(step: PlanRow): string[] {
  const { predictedAmplitudeMm: predicted, predictedAmplitudePx: px } = step;
  return [
    frequencyText(step.driveHz),
    step.waitS.toFixed(0),
    step.filmS.toFixed(1),
    String(step.frames),
    predicted === null ? '–' : `${significant(predicted.medianMm, 3)} (${significant(predicted.upperMm, 3)})`,
    px === null ? '–' : significant(px, 2),
    TRAVEL[step.travel],
  ];
}

function bullets(title: string, sentences: readonly string[]): string {
  if (sentences.length === 0) return '';
  const lines = sentences.flatMap((sentence) =>
    wrapped(sentence, 76).map((line, k) => `${k === 0 ? '  - ' : '    '}${line}\n`),
  );
  return `${title}\n${lines.join('')}`;
}

function minutes(seconds: number): string {
  return seconds < 90 ? `${seconds.toFixed(0)} s` : `${(seconds / 60).toFixed(0)} min`;
}

function planOf({ configuration, plan }: ConfigurationPlan, label: string): string {
  const title = `${label === configuration ? label : `${label} (${configuration})`}\n`;
  if (plan.reason !== null)
    return `${title}${bullets('', [plan.reason])}${bullets(
      'take care',
      plan.cautions.map((each) => each.text),
    )}`;
  const { totals, next, camera, promised } = plan;
  const known = `natural frequency ${withUncertainty(plan.naturalHz.value, plan.naturalHz.u)} Hz, damping ratio ${withUncertainty(plan.dampingRatio.value, plan.dampingRatio.u)} (± u)\n`;
  const total = `${totals.dwells} dwells, on the bench ${minutes(totals.benchS)}: waiting ${minutes(totals.waitS)}, filming ${minutes(totals.filmS)}, handling ${minutes(totals.handlingS)}\n`;
  const promise =
    promised === null
      ? ''
      : `promises the natural frequency to ${significant(100 * promised.naturalHz, 2)} % and the damping ratio to ${significant(100 * promised.dampingRatio, 2)} % (u)\n`;
  return (
    title +
    known +
    (plan.rows.length > 0 ? `\n${textTable(COLUMNS, plan.rows.map(row))}${total}${promise}` : '') +
    '\n' +
    (next === null
      ? ''
      : bullets('run next', [
          `${next.driveHz === null ? 'nothing' : `${frequencyText(next.driveHz)} Hz`}: ${next.sentence}`,
        ])) +
    bullets('camera', camera?.sentences ?? []) +
    bullets('sweeping instead', plan.sweep === null ? [] : [plan.sweep.sentence]) +
    bullets('mind', plan.warnings) +
    bullets(
      'take care',
      plan.cautions.map((each) => each.text),
    )
  );
}

/** The plans of a test's configurations, for a person at a terminal. */
export function plansText(
  title: string,
  plans: readonly ConfigurationPlan[],
  labels: ReadonlyMap<string, string>,
): string {
  const blocks = plans.map((each) => planOf(each, labels.get(each.configuration) ?? each.configuration));
  return `${title}\n\n${blocks.length > 0 ? blocks.join('\n') : 'The test has no configuration to plan; add one.\n'}`;
}
