/** Markup that is already safe to put into a page. Made by `html`, and where a style sheet is put together from escaped parts. */
export class Html {
  constructor(readonly markup: string) {}
  toString(): string {
    return this.markup;
  }
}

const ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => ENTITIES[sign] ?? sign);
}

/** What may stand in a template: texts and numbers are escaped, markup and lists of it are taken as they are. */
export type HtmlValue = string | number | null | Html | readonly HtmlValue[];

function rendered(value: HtmlValue): string {
  if (value === null) return '';
  if (value instanceof Html) return value.markup;
  if (typeof value === 'string' || typeof value === 'number') return escaped(String(value));
  return value.map(rendered).join('');
}

/** A template tag: every value is escaped, so that text from a file can never become markup. */
export function html(parts: TemplateStringsArray, ...values: readonly HtmlValue[]): Html {
  return new Html(
    parts.map((part, k) => part + (k < values.length ? rendered(values[k] ?? null) : '')).join(''),
  );
}
