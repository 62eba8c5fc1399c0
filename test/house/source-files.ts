import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve, sep } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The project's top folder. */
export const top = resolve(dirname(fileURLToPath(import.meta.url)), '..', '..');

/** Every TypeScript source under a folder of the project, as paths from the top with forward slashes. */
export function sourcesUnder(folder: string): string[] {
  return readdirSync(join(top, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.tsx?$/.test(entry.name) && !entry.name.endsWith('.d.ts'))
    .map((entry) => relative(top, join(entry.parentPath, entry.name)).split(sep).join('/'))
    .filter((path) => !path.includes('/node_modules/'))
    .sort();
}

/** The text of a source. */
export function textOf(path: string): string {
  return readFileSync(join(top, path), 'utf8');
}

/**
 * What a source imports: module names as written, relative ones resolved to paths from the top.
 * @param valuesOnly leave out what is imported for its types alone
 */
export function importsOf(path: string, valuesOnly = false): string[] {
  const text = valuesOnly ? textOf(path).replace(/(?:^|\n)(?:import|export) type [^;]*;/g, '') : textOf(path);
  const found = text.matchAll(
    /(?:^|\n)\s*(?:import|export)\s[^;]*?from\s+'([^']+)'|import\('([^']+)'\)|(?:^|\n)import\s+'([^']+)'/g,
  );
  return [...found].map((match) => {
    const name = match[1] ?? match[2] ?? match[3] ?? '';
    if (!name.startsWith('.')) return name;
    return relative(top, resolve(top, dirname(path), name))
      .split(sep)
      .join('/');
  });
}
