import { cycleChart } from '../charts/cycle-chart.ts';
import { motionStrip } from '../charts/motion-strip.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { plotImage } from '../figure.ts';
import { withUncertainty } from '../format-number.ts';
import { type Html, html } from '../html.ts';
import { inUnit } from '../length-unit.ts';
import { type DwellMotion, dwellMotion } from '../motion-strips.ts';
import type { ReportContext } from '../report-context.ts';
import { dwellName } from '../results-text.ts';

const STRIP_SIZE = { widthPx: 222, heightPx: 92 };
const CYCLE_SIZE = { widthPx: 100, heightPx: 92 };

function stripFigure({ dwell, strip, cycle }: DwellMotion, { painter, unit }: ReportContext): Html {
  const amplitude = withUncertainty(inUnit(dwell.amplitude.value, unit), inUnit(dwell.amplitudeU95, unit));
  const found =
    dwell.amplitude.value === null ? 'no amplitude' : `${amplitude} ${unit.name}, ${dwell.verdict}`;
  return html`<figure><figcaption>${dwellName(dwell)} (${dwell.id}): ${found}</figcaption><div>${plotImage(
    painter,
    motionStrip(strip),
    STRIP_SIZE,
    `Displacement against time of dwell ${dwell.id}`,
  )}${cycle ? plotImage(painter, cycleChart(cycle), CYCLE_SIZE, `One cycle of dwell ${dwell.id} with the fitted sine`) : null}</div></figure>
`;
}

function stripsOf(view: ConfigurationView, context: ReportContext): Html | null {
  const motions = view.dwells
    .map((dwell) => dwellMotion(dwell, context.evaluated, context.unit))
    .filter((each) => each !== null);
  if (motions.length === 0) return null;
  return html`<h3>${view.name}</h3><div class="strips">${motions.map((motion) => stripFigure(motion, context))}</div>`;
}

/** The motion behind each dwell: record with window, and one cycle with the fitted sine; nothing where no clip was followed. */
export function stripsSection(context: ReportContext): Html | null {
  if (!context.painter) return null;
  const parts = context.views.map((view) => stripsOf(view, context)).filter((each) => each !== null);
  if (parts.length === 0) return null;
  return html`<h2 class="page">Motion records</h2>
<p class="soft">Left: displacement in ${context.unit.name} against time in s, the measured window shaded, with the steady amplitude to both sides. Right: the samples of the window laid over one cycle of the drive (0 to 1), with the fitted sine.</p>
${parts}`;
}
