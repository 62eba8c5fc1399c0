import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { InputError } from '../../errors.ts';
import { measure } from './measure.ts';

/** Where the bundled demo test lies, seen from the built program. */
export function demoTestPath(): string {
  let folder = dirname(fileURLToPath(import.meta.url));
  while (!existsSync(join(folder, 'fixtures', 'demo', 'demo.dwellbook'))) {
    const above = dirname(folder);
    if (above === folder)
      throw new InputError(
        'The demo test is not there: fixtures/demo is missing from this installation; install Dwellbook anew.',
      );
    folder = above;
  }
  return join(folder, 'fixtures', 'demo', 'demo.dwellbook');
}

/** `demo`: measures the bundled demo test. Returns the exit status. */
export async function demo(options: { readonly out?: string }): Promise<number> {
  const path = demoTestPath();
  process.stderr.write(`Measuring the demo test ${path}\n`);
  return measure(path, options);
}
