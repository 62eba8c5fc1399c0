const LONGEST_NAME = 80;

/**
 * File names made from ids of a test file: letters, digits, dot, dash and underscore only, never a path, never a
 * hidden file, and no two alike (also on file systems that do not tell upper from lower case).
 * @returns one name for each id, in order, with `extension` (such as `.csv`) added
 */
export function fileNamesFor(ids: readonly string[], extension: string): string[] {
  const taken = new Set<string>();
  return ids.map((id) => {
    const plain =
      id
        .normalize('NFC')
        .replace(/[^\p{L}\p{N}._-]/gu, '_')
        .replace(/^[.]+/, '_')
        .slice(0, LONGEST_NAME) || '_';
    let name = plain;
    for (let k = 2; taken.has(name.toLowerCase()); k++) name = `${plain}-${k}`;
    taken.add(name.toLowerCase());
    return name + extension;
  });
}
