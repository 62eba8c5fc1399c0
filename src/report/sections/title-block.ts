import { type Html, html } from '../html.ts';
import { factTable } from '../html-table.ts';
import type { ReportContext } from '../report-context.ts';

const NOT_STATED = html`<span class="soft">not stated</span>`;

function stated(text: string | undefined): string | Html {
  return text !== undefined && text.trim() !== '' ? text : NOT_STATED;
}

/** Company, test, assembly, operator, date, program: who measured what, when and with what. */
export function titleBlock({ test, words, measurement, madeOn }: ReportContext): Html {
  const company = words.company?.trim() || words.header?.trim();
  const optional = (name: string, text: string | undefined): [string, string][] =>
    text?.trim() ? [[name, text]] : [];
  return html`<header>
${company ? html`<div class="head"><div><b>${words.company ?? ''}</b><div class="words soft">${words.header ?? ''}</div></div><div class="soft">Test report</div></div>` : null}
<h1>${test.title}</h1>
<p class="soft">Sine dwell test: natural frequency, damping and bandwidth from motion filmed at steady drive frequencies</p>
<div class="titles">${factTable([
    ['Assembly', stated(words.assembly)],
    ...optional('Customer', words.customer),
    ['Operator', stated(words.operator)],
    ['Date of the test', stated(words.date)],
  ])}${factTable([
    ['Configurations', test.configurations.length],
    ['Dwells', measurement.results.dwells.length],
    ['Program', measurement.results.program],
    ...(madeOn === null ? [] : [['Report made', madeOn] as const]),
  ])}</div>
</header>
`;
}
