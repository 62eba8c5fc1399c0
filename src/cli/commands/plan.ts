import { planTest } from '../../engine/plan-test.ts';
import { PROGRAM } from '../../engine/program.ts';
import { plansText } from '../../report/plan-text.ts';
import { loadTest } from '../../testfile/on-disk.ts';
import { EXIT } from '../exit-status.ts';
import { labelsOf } from '../labels.ts';

/** `plan TEST`: prints run sheet advice for every configuration. Returns the exit status: 1 where one cannot be planned. */
export async function plan(testPath: string, options: { readonly json?: true }): Promise<number> {
  const test = await loadTest(testPath);
  const plans = planTest(test);
  const json = { format: 'dwellbook-plan', version: 1, program: PROGRAM, test: test.title, plans };
  process.stdout.write(
    options.json ? `${JSON.stringify(json, null, 2)}\n` : plansText(test.title, plans, labelsOf(test)),
  );
  return plans.some((each) => each.plan.reason !== null) ? EXIT.someFailed : EXIT.ok;
}
