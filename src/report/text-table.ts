/** A column of a text table. */
export interface TextColumn {
  readonly title: string;
  readonly align: 'left' | 'right';
}

/** Width of a text on a terminal, in columns; combining marks count as nothing. */
function width(text: string): number {
  return [...text.normalize('NFC')].filter((sign) => !/\p{M}/u.test(sign)).length;
}

function padded(text: string, columns: number, align: 'left' | 'right'): string {
  const space = ' '.repeat(Math.max(0, columns - width(text)));
  return align === 'right' ? space + text : text + space;
}

/** Breaks a text into lines no longer than `columns`, at spaces where there are any. */
export function wrapped(text: string, columns: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(/\s+/)) {
    if (line !== '' && width(line) + 1 + width(word) > columns) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  if (line !== '') lines.push(line);
  return lines;
}

/** Rows under their titles, two spaces between columns, numbers flush right. */
export function textTable(columns: readonly TextColumn[], rows: readonly (readonly string[])[]): string {
  const widths = columns.map((column, k) =>
    Math.max(width(column.title), ...rows.map((row) => width(row[k] ?? ''))),
  );
  const line = (cells: readonly string[]): string =>
    columns
      .map((column, k) => padded(cells[k] ?? '', widths[k] ?? 0, column.align))
      .join('  ')
      .trimEnd();
  return [line(columns.map((column) => column.title)), ...rows.map(line)].map((text) => `${text}\n`).join('');
}
