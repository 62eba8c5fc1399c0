import { accessSync, constants, statSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { InputError } from '../errors.ts';

const NAMES = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable', 'chrome', 'msedge'];

function isExecutable(path: string): boolean {
  try {
    accessSync(path, constants.X_OK);
    return statSync(path).isFile();
  } catch {
    return false;
  }
}

/**
 * Path of a Chromium that can print: the one that DWELLBOOK_CHROMIUM names, else the first of the usual names on PATH.
 * @throws InputError where the variable names nothing that can be started, or where there is none at all
 */
export function findChromium(env: Readonly<Record<string, string | undefined>> = process.env): string {
  const named = env['DWELLBOOK_CHROMIUM'];
  if (named) {
    if (isExecutable(named)) return named;
    throw new InputError(`DWELLBOOK_CHROMIUM names ${named}, which cannot be started; correct or unset it.`);
  }
  const suffix = process.platform === 'win32' ? '.exe' : '';
  for (const folder of (env['PATH'] ?? '').split(delimiter).filter((each) => each !== '')) {
    for (const name of NAMES) {
      const path = join(folder, name + suffix);
      if (isExecutable(path)) return path;
    }
  }
  throw new InputError(
    'A PDF is printed by Chromium (or Chrome), and none was found on PATH; install one, set DWELLBOOK_CHROMIUM to its path, or write FILE.html and print that from any browser.',
  );
}
