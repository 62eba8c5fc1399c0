import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';

/**
 * Where Electron's binary lies; null where there is none. The package is not loaded for this: loading it without its
 * binary would try to fetch it.
 */
export function electronBinary(
  env: Readonly<Record<string, string | undefined>> = process.env,
  packageFolder: string | null = electronPackage(),
): string | null {
  if (packageFolder === null) return null;
  try {
    const name = readFileSync(join(packageFolder, 'path.txt'), 'utf8').trim();
    const path = join(env['ELECTRON_OVERRIDE_DIST_PATH'] ?? join(packageFolder, 'dist'), name);
    return name !== '' && existsSync(path) ? path : null;
  } catch {
    return null;
  }
}

function electronPackage(): string | null {
  try {
    return dirname(createRequire(import.meta.url).resolve('electron/package.json'));
  } catch {
    return null;
  }
}
