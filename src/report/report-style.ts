import { Html, html } from './html.ts';

/** Paper a report is laid out for. */
export type Paper = 'A4' | 'Letter';

/** A text as a CSS string: whatever is not a plain letter, digit or space is escaped, so that it can end nothing. */
export function cssString(text: string): string {
  const plain = [...text].map((sign) =>
    /^[A-Za-z0-9 ]$/.test(sign) ? sign : `\\${(sign.codePointAt(0) ?? 0x20).toString(16)} `,
  );
  return `"${plain.join('')}"`;
}

const LONGEST_FOOT = 70;

/** Page size, margins, and the line at the foot of each page: the test on the left, page and pages on the right. */
export function pageStyle(paper: Paper, foot: string): Html {
  const short = foot.length > LONGEST_FOOT ? `${foot.slice(0, LONGEST_FOOT - 1)}…` : foot;
  const font = 'font:8pt system-ui,"Noto Sans","DejaVu Sans",sans-serif;color:#4b5563';
  return new Html(
    `@page{size:${paper === 'A4' ? 'A4' : 'letter'};margin:14mm 14mm 16mm 16mm;` +
      `@bottom-left{${font};content:${cssString(short)}}` +
      `@bottom-right{${font};content:"page " counter(page) " of " counter(pages)}}`,
  );
}

/** The looks of a report on screen and on paper: a plain engineering sheet, readable without colour. */
export const REPORT_STYLE: Html = html`
:root{--ink:#1b2430;--soft:#4b5563;--rule:#b9b5aa;--rule2:#dcd8cd;--paper:#fff}
*{box-sizing:border-box}
html{background:#f1efe9}
body{margin:0 auto;max-width:236mm;min-height:100vh;background:var(--paper);color:var(--ink);padding:14mm 16mm 18mm;
 font:10pt/1.42 system-ui,"Segoe UI","Noto Sans","DejaVu Sans",sans-serif;font-variant-numeric:tabular-nums lining-nums}
body{counter-reset:h2}h2::before{counter-increment:h2;content:counter(h2) "  "}h2{counter-reset:h3}
h1{font-size:18pt;line-height:1.2;margin:0 0 .2em;font-weight:650}
h2{font-size:12.5pt;margin:1.7em 0 .5em;padding-bottom:.15em;border-bottom:1.2px solid var(--ink);font-weight:650}
h3{font-size:10.5pt;margin:1.2em 0 .35em;font-weight:650}
p{margin:.35em 0 .7em}ul{margin:.3em 0 .8em;padding-left:1.2em}li{margin:.15em 0}
.soft,caption,figcaption{color:var(--soft)}.soft{font-size:9pt}
.words{white-space:pre-line}
table{border-collapse:collapse;margin:.5em 0 1em;font-size:9pt;line-height:1.32}
table:not(.facts){width:100%}
caption{text-align:left;caption-side:top;padding-bottom:.3em;font-size:9pt}
th,td{padding:.22em .6em;border-bottom:1px solid var(--rule2);vertical-align:top;text-align:left}
th:first-child,td:first-child{padding-left:0}th:last-child,td:last-child{padding-right:0}
thead th{border-bottom:1px solid var(--ink);font-weight:600;vertical-align:bottom}
tbody th{font-weight:500}.t{overflow-wrap:anywhere;min-width:6em}.n{text-align:right;white-space:nowrap}.w{white-space:nowrap}
.facts th{font-weight:400;min-width:0;color:var(--soft);white-space:nowrap;padding-right:1.4em}.facts td,.facts th{border-bottom-color:var(--rule2)}
.small{font-size:8pt}.small th,.small td{padding:.15em .35em}
.struck{text-decoration:line-through;text-decoration-thickness:.6px}
.hash{font:7.2pt/1.25 ui-monospace,"DejaVu Sans Mono",monospace;white-space:nowrap}
figure{margin:.4em 0 .7em}figcaption{font-size:8.6pt;line-height:1.35;margin-top:.2em}
img,svg{max-width:100%;height:auto;display:block}main>figure>img,svg.seen{width:100%}
.head{display:flex;justify-content:space-between;gap:2em;border-bottom:1.2px solid var(--ink);padding-bottom:.5em;margin-bottom:1.2em}
.head b{font-size:11pt}.titles{display:grid;grid-template-columns:1fr 1fr;gap:0 2.4em;margin-top:.8em}.titles table{width:100%}
.pair{display:flex;gap:1.6em;align-items:flex-start}.pair>figure{flex:none;max-width:56%}.pair>div{flex:1;min-width:0}
.strips{display:grid;grid-template-columns:1fr 1fr;gap:.4em 1.6em}.strips figure{margin:0 0 .4em}.strips div{display:flex;gap:4px}.strips img{min-width:0}
sub,sup{font-size:75%;line-height:0}.formula{break-after:avoid;margin:.2em 0 .7em 1.6em;font-style:normal}
.notice{border-left:3px solid var(--ink);padding:.35em .8em;margin:.7em 0;background:#f4f2ec}
.sign{display:grid;grid-template-columns:1fr 1fr 1fr;gap:2.4em;margin-top:3.2em}.sign div{border-top:1px solid var(--ink);padding-top:.25em;font-size:8.6pt;color:var(--soft)}
.seen{border:1px solid var(--rule)}
@media screen and (max-width:700px){body{padding:16px}.titles,.strips{display:block}.pair{display:block}.pair>figure{width:auto;max-width:none}table{display:block;overflow-x:auto}}
@media print{html{background:none}body{max-width:none;padding:0;min-height:0;font-size:9pt;print-color-adjust:exact;-webkit-print-color-adjust:exact}
 table{font-size:8.2pt}.t{min-width:3.2em}.small,.hash{font-size:7pt}th,td{padding:.18em .42em}caption,figcaption,.soft{font-size:8pt}
 h2,h3{break-after:avoid}figure,tr,.whole,.keep,.notice,.pair,.sign,li{break-inside:avoid}thead{display:table-header-group}caption{break-after:avoid}
 p{orphans:3;widows:3}h2.page{break-before:page;margin-top:0}}
`;
