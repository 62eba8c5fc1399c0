import type { TestFile } from './schema.ts';

/** The text of a test file: JSON, two spaces, a newline at the end. Unknown keys are kept, order too. */
export function writeTest(test: TestFile): string {
  return `${JSON.stringify(test, null, 2)}\n`;
}
