import { type ParseError, parse, printParseErrorCode } from 'jsonc-parser';
import { InputError } from '../errors.ts';

/** Line and column, both counted from 1, of an offset in a text. */
export function lineAndColumn(text: string, offset: number): { line: number; column: number } {
  const before = text.slice(0, offset);
  const line = before.split('\n').length;
  return { line, column: offset - before.lastIndexOf('\n') };
}

const SAYING: Record<string, string> = {
  InvalidSymbol: 'a word that JSON does not know',
  InvalidNumberFormat: 'a number that cannot be read',
  PropertyNameExpected: 'a key in double quotes is expected',
  ValueExpected: 'a value is expected',
  ColonExpected: 'a colon is expected',
  CommaExpected: 'a comma is expected',
  CloseBraceExpected: 'a closing } is missing',
  CloseBracketExpected: 'a closing ] is missing',
  EndOfFileExpected: 'text after the end',
  InvalidCommentToken: 'comments are not allowed',
  UnexpectedEndOfString: 'a string is not closed',
  UnexpectedEndOfNumber: 'a number breaks off',
  UnexpectedEndOfComment: 'a comment is not closed',
  InvalidUnicode: 'a \\u escape that cannot be read',
  InvalidEscapeCharacter: 'an escape that JSON does not know',
  InvalidCharacter: 'a character that must be escaped',
};

/**
 * Parses JSON text.
 * @throws InputError naming the file, the line and the column (from 1) of the first mistake.
 */
export function parseJson(text: string, fileName: string): unknown {
  const body = text.startsWith('\uFEFF') ? text.slice(1) : text;
  if (body.trim() === '')
    throw new InputError(`${fileName} is empty: a test file is JSON text with "format": "dwellbook-test".`);
  const errors: ParseError[] = [];
  const value: unknown = parse(body, errors, {
    disallowComments: true,
    allowTrailingComma: false,
    allowEmptyContent: false,
  });
  const first = errors[0];
  if (first) {
    const { line, column } = lineAndColumn(body, first.offset);
    const what = SAYING[printParseErrorCode(first.error)] ?? 'not valid JSON';
    throw new InputError(`${fileName}, line ${line}, column ${column}: ${what}; correct the text there.`);
  }
  return value;
}
