import { type Html, type HtmlValue, html } from './html.ts';

/** A column of a table in a report. */
export interface HtmlColumn {
  readonly title: HtmlValue;
  /** `number`: flush right, never broken; `word`: flush left, never broken; `text`: flush left, broken where it must (where absent). */
  readonly kind?: 'number' | 'word' | 'text';
}

/** How a table behaves beside its cells. */
export interface HtmlTableOptions {
  readonly caption?: HtmlValue;
  /** Extra class, such as `small`. */
  readonly look?: string;
}

const KEPT_WHOLE_ROWS = 16; // longer tables may run over pages, with their head repeated

const KIND_CLASS = { number: 'n', word: 'w', text: 't' } as const;

/** A table whose short form is never cut by a page and whose long form is cut between rows only. The first cell of a row is its head. */
export function htmlTable(
  columns: readonly HtmlColumn[],
  rows: readonly (readonly HtmlValue[])[],
  { caption, look = '' }: HtmlTableOptions = {},
): Html {
  const kind = (k: number): string => KIND_CLASS[columns[k]?.kind ?? 'text'];
  const head = columns.map(({ title }, k) => html`<th scope="col" class="${kind(k)}">${title}</th>`);
  const body = rows.map(
    (row) =>
      html`<tr>${row.map((cell, k) =>
        k === 0
          ? html`<th scope="row" class="${kind(k)}">${cell}</th>`
          : html`<td class="${kind(k)}">${cell}</td>`,
      )}</tr>`,
  );
  return html`<table class="${rows.length <= KEPT_WHOLE_ROWS ? 'whole' : 'long'} ${look}">${
    caption === undefined ? null : html`<caption>${caption}</caption>`
  }<thead><tr>${head}</tr></thead><tbody>${body}</tbody></table>
`;
}

/** Facts by name, without a head: a title block, the parts of a set-up. */
export function factTable(facts: readonly (readonly [HtmlValue, HtmlValue])[], look = ''): Html {
  return html`<table class="facts whole ${look}"><tbody>${facts.map(
    ([name, value]) => html`<tr><th scope="row" class="t">${name}</th><td class="t">${value}</td></tr>`,
  )}</tbody></table>
`;
}
