import type { TestFile } from '../testfile/schema.ts';

/** Configuration ids with the names a reader knows them by, in the order of the test file. */
export function labelsOf(test: TestFile): Map<string, string> {
  return new Map(test.configurations.map((each) => [each.id, each.label ?? each.id]));
}
