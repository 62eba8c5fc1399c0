import { evaluateClips } from '../engine/evaluate-clips.ts';
import type { Measurement } from '../engine/measure-test.ts';
import type { TestFile } from '../testfile/schema.ts';
import { viewConfiguration } from './configuration-view.ts';
import type { ChartPainter } from './draw-chart.ts';
import type { PictureOutcome } from './frame-pictures.ts';
import { type Html, html } from './html.ts';
import { lengthUnit } from './length-unit.ts';
import type { ReportContext } from './report-context.ts';
import { pageStyle, REPORT_STYLE } from './report-style.ts';
import { checkReproduction } from './reproduction.ts';
import { budgetSection } from './sections/budget-section.ts';
import { cautionsSection } from './sections/cautions-section.ts';
import { clipsSection } from './sections/clips-section.ts';
import { comparisonSection } from './sections/comparison-section.ts';
import { configurationSection } from './sections/configuration-section.ts';
import { methodSection } from './sections/method-section.ts';
import { setupSection } from './sections/setup-section.ts';
import { stripsSection } from './sections/strips-section.ts';
import { summarySection } from './sections/summary-section.ts';
import { titleBlock } from './sections/title-block.ts';

/** What a report is made with beside test and measurement; everything is optional. */
export interface ReportHtmlOptions {
  /** Draws the plots; without one the report has none, and says so. */
  readonly painter?: ChartPainter | null;
  /** A frame of each camera setup; setups without one are described in words only. */
  readonly pictures?: readonly PictureOutcome[];
  /** Day on which the report is made, as it shall be printed. */
  readonly madeOn?: string;
}

// nothing may be fetched and nothing run, whatever a viewer would allow
const POLICY = "default-src 'none'; img-src data:; style-src 'unsafe-inline'";

function missingPlots({ painter }: ReportContext): Html | null {
  if (painter && painter.font !== 'none') return null;
  const why = painter
    ? 'No font was found to letter the plots with, so their axes bear no numbers; install the optional package @fontsource/dejavu-sans or any system font.'
    : 'The plots could not be drawn on this machine.';
  return html`<p class="notice">${why}</p>`;
}

/**
 * The report of a measured test: one HTML file that needs nothing else, no network and no script. The same inputs give
 * the same text. Whatever is missing (a fit, lags, a clip, the whole measurement) is said, never invented.
 */
export function reportHtml(
  test: TestFile,
  measurement: Measurement,
  options: ReportHtmlOptions = {},
): string {
  const words = test.report ?? {};
  const context: ReportContext = {
    test,
    measurement,
    words,
    views: test.configurations.map((configuration) => viewConfiguration(configuration, measurement.results)),
    evaluated: evaluateClips(test, measurement.outcomes),
    unit: lengthUnit(words.inches ?? false),
    painter: options.painter ?? null,
    pictures: options.pictures ?? [],
    reproduction: checkReproduction(test, measurement.results),
    madeOn: options.madeOn ?? null,
  };
  const page = pageStyle(words.paper ?? 'A4', `${words.company ? `${words.company}, ` : ''}${test.title}`);
  return `<!doctype html>\n${
    html`<html lang="en"><head><meta charset="utf-8"><meta http-equiv="Content-Security-Policy" content="${POLICY}"><meta name="viewport" content="width=device-width"><meta name="generator" content="${measurement.results.program}"><title>${test.title}</title><style>${page}${REPORT_STYLE}</style></head><body>
${titleBlock(context)}
<main>${missingPlots(context)}
${summarySection(context)}
${setupSection(context)}
${methodSection(context)}
${context.views.map((view) => configurationSection(view, context))}
${comparisonSection(context)}
${budgetSection(context)}
${stripsSection(context)}
${clipsSection(context)}
${cautionsSection(context)}
</main></body></html>`.markup
  }\n`;
}
