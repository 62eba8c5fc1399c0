import { makePlan, type Plan } from '../plan/plan.ts';
import type { TestFile } from '../testfile/schema.ts';
import { fitTest } from './fit-test.ts';
import { planInput } from './plan-input.ts';
import type { Results } from './results.ts';

/** The plan of one configuration. */
export interface ConfigurationPlan {
  readonly configuration: string;
  readonly plan: Plan;
}

/**
 * Plans every configuration of a test from its planning section and what was measured so far.
 * @param results what was measured; what the test file itself holds where absent
 */
export function planTest(test: TestFile, results: Results = fitTest(test)): ConfigurationPlan[] {
  return test.configurations.map((configuration) => {
    const own = <T extends { readonly configuration: string }>(list: readonly T[]): T[] =>
      list.filter((each) => each.configuration === configuration.id);
    return {
      configuration: configuration.id,
      plan: makePlan(planInput(test, configuration, own(results.dwells), own(results.ringdowns))),
    };
  });
}
