import type * as z from 'zod';
import { InputError } from '../errors.ts';
import { checkReferences } from './check-references.ts';
import { parseJson } from './parse-json.ts';
import { TEST_FORMAT, TEST_VERSION, type TestFile, testSchema } from './schema.ts';

/** A path into the file as a reader would write it: `clips[2].file`. */
function pathText(path: readonly PropertyKey[]): string {
  let text = '';
  for (const part of path)
    text += typeof part === 'number' ? `[${part}]` : text === '' ? String(part) : `.${String(part)}`;
  return text === '' ? 'the top level' : text;
}

function valueAt(root: unknown, path: readonly PropertyKey[]): unknown {
  let at: unknown = root;
  for (const part of path) {
    if (typeof at !== 'object' || at === null) return undefined;
    at = (at as Record<PropertyKey, unknown>)[part];
  }
  return at;
}

function shown(value: unknown): string {
  const text = value === undefined ? 'nothing' : JSON.stringify(value);
  return text.length > 40 ? `${text.slice(0, 37)}...` : text;
}

function expectation(issue: z.core.$ZodIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return `expected ${issue.expected === 'int' ? 'a whole number' : issue.expected}`;
    case 'invalid_value':
      return `expected ${issue.values.map((value) => JSON.stringify(value)).join(' or ')}`;
    case 'too_small':
      return `expected at least ${issue.minimum}${issue.inclusive === false ? ' (and not equal to it)' : ''}`;
    case 'too_big':
      return `expected at most ${issue.maximum}`;
    default:
      return issue.message.charAt(0).toLowerCase() + issue.message.slice(1);
  }
}

/** The issue that says most: of a union's branches, the one that got furthest into the value. */
function deepest(issue: z.core.$ZodIssue): { issue: z.core.$ZodIssue; path: readonly PropertyKey[] } {
  if (issue.code !== 'invalid_union') return { issue, path: issue.path };
  const inner = issue.errors
    .flat()
    .map((each) => deepest(each))
    .sort((a, b) => b.path.length - a.path.length)[0];
  if (!inner || inner.path.length === 0) return { issue, path: issue.path };
  return { issue: inner.issue, path: [...issue.path, ...inner.path] };
}

/**
 * Reads the text of a test file.
 * @param fileName the name to use in messages
 * @throws InputError with one sentence: where in the file, what was expected, what stands there.
 */
export function readTest(text: string, fileName: string): TestFile {
  const raw = parseJson(text, fileName);
  if (typeof raw !== 'object' || raw === null || Array.isArray(raw)) {
    throw new InputError(
      `${fileName} is not a test file: expected an object with "format": "${TEST_FORMAT}".`,
    );
  }
  const head = raw as { format?: unknown; version?: unknown };
  if (head.format !== TEST_FORMAT) {
    throw new InputError(
      `${fileName} is not a test file: "format" should be "${TEST_FORMAT}", but is ${shown(head.format)}.`,
    );
  }
  if (typeof head.version === 'number' && head.version > TEST_VERSION) {
    throw new InputError(
      `${fileName} was written by a newer program (test file version ${head.version}, this one reads up to ${TEST_VERSION}): update Dwellbook to open it.`,
    );
  }
  const parsed = testSchema.safeParse(raw);
  if (!parsed.success) {
    const first = parsed.error.issues[0];
    if (!first) throw new Error('a failed parse without an issue');
    const { issue, path } = deepest(first);
    const more = parsed.error.issues.length - 1;
    throw new InputError(
      `${fileName}: ${pathText(path)}: ${expectation(issue)}, but found ${shown(valueAt(raw, path))}${more > 0 ? ` (and ${more} more)` : ''}.`,
    );
  }
  checkReferences(parsed.data, fileName);
  return parsed.data;
}
