import { expect, it } from 'vitest';
import { sourcesUnder, textOf } from './source-files.ts';

const EXPORT =
  /^export (?:declare )?(?:abstract )?(?:async )?(?:function\*?|class|interface|const|let|enum|type) (\w+)/;
const SHORTEST_DOC = 12; // letters: enough to rule out an empty block, not to judge prose

/** Exported names of a source that no block of prose stands above. */
function withoutDoc(path: string): string[] {
  const lines = textOf(path).split('\n');
  return lines.flatMap((line, k) => {
    const name = EXPORT.exec(line)?.[1];
    if (!name) return [];
    if (!lines[k - 1]?.trimEnd().endsWith('*/')) return [`${path}: ${name}`];
    let from = k - 1;
    while (from > 0 && !lines[from]?.includes('/**')) from -= 1;
    const prose = lines
      .slice(from, k)
      .join(' ')
      .replace(/[/*\s]/g, '');
    return prose.length < SHORTEST_DOC ? [`${path}: ${name}`] : [];
  });
}

it('every exported name of the engine says what it is', () => {
  expect(sourcesUnder('src').flatMap(withoutDoc)).toEqual([]);
});
