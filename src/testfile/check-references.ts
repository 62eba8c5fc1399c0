import { InputError } from '../errors.ts';
import type { TestFile } from './schema.ts';

function firstTwice(ids: readonly string[]): string | null {
  const seen = new Set<string>();
  for (const id of ids) {
    if (seen.has(id)) return id;
    seen.add(id);
  }
  return null;
}

/**
 * Checks that no id stands twice where ids are looked up: without that, results could not be told apart.
 * An id that refers to nothing is left to the measurement, which fails that one dwell and goes on with the others.
 * @throws InputError naming the kind and the id.
 */
export function checkReferences(test: TestFile, fileName: string): void {
  const lists: [string, string[]][] = [
    ['setups', test.setups.map((each) => each.id)],
    ['clips', test.clips.map((each) => each.id)],
    ['configurations', test.configurations.map((each) => each.id)],
    ...test.setups.map((each): [string, string[]] => [
      `markers of setup "${each.id}"`,
      each.markers.map((marker) => marker.id),
    ]),
    ...test.configurations.map((each): [string, string[]] => [
      `dwells and ring-downs of configuration "${each.id}"`,
      [...each.dwells.map((dwell) => dwell.id), ...each.ringdowns.map((ringdown) => ringdown.id)],
    ]),
  ];
  for (const [where, ids] of lists) {
    const twice = firstTwice(ids);
    if (twice !== null)
      throw new InputError(
        `${fileName}: the id "${twice}" stands twice among the ${where}; give each its own.`,
      );
  }
}
