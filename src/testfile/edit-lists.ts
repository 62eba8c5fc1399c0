import { InputError } from '../errors.ts';

/** A copy with the changes made: `null` takes a key away, `undefined` leaves it as it is. */
export function changed<T extends object>(value: T, changes: Readonly<Record<string, unknown>>): T {
  const copy = { ...value } as Record<string, unknown>;
  for (const [key, change] of Object.entries(changes)) {
    if (change === undefined) continue;
    if (change === null) delete copy[key];
    else copy[key] = change;
  }
  return copy as T;
}

/**
 * A copy of a list with one member replaced.
 * @throws InputError when no member has the id.
 */
export function replaceById<T extends { id: string }>(
  list: readonly T[],
  id: string,
  what: string,
  replace: (member: T) => T,
): T[] {
  let found = false;
  const copy = list.map((each) => {
    if (each.id !== id) return each;
    found = true;
    return replace(each);
  });
  if (!found) throw new InputError(`There is no ${what} "${id}"; it may have been removed meanwhile.`);
  return copy;
}

/** An id not among those taken, made from a name: lower-case letters, digits and hyphens, numbered where needed. */
export function freshId(taken: ReadonlySet<string>, name: string): string {
  const base =
    name
      .normalize('NFKD')
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 60) || 'item';
  if (!taken.has(base)) return base;
  let count = 2;
  while (taken.has(`${base}-${count}`)) count++;
  return `${base}-${count}`;
}
