import type { DwellResult } from '../../engine/results.ts';
import type { ConfigurationView } from '../configuration-view.ts';
import { decimalsFor, significant } from '../format-number.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { htmlTable } from '../html-table.ts';
import type { LengthUnit } from '../length-unit.ts';
import type { ReportContext } from '../report-context.ts';
import { dwellName } from '../results-text.ts';

/** What each source of uncertainty is, for the reader of the report. */
const SOURCES: Readonly<Record<string, string>> = {
  fit: 'scatter of the displacement about the fitted sine',
  'scale length': 'the true distance of the scale points',
  'scale clicks': 'where the scale points were marked',
  perspective: 'points of the oblique plane as marked',
  axis: 'direction of the motion axis',
  tilt: 'motion out of the plane that the camera faces',
  parallax: 'distances of camera, rule and motion',
  exposure: 'exposure time, or its being unknown',
  'rolling shutter': 'the rows of the sensor being read one after the other',
  'time stamps': 'times of the frames',
  leftover: 'what remains of the start-up transient',
  drift: 'amplitude changing within the window',
  shake: 'motion of the camera that no ground marker takes off',
  codec: 'what video compression does to small motion',
};

interface Column {
  readonly source: string;
  readonly common: boolean;
}

const NEGLIGIBLE = 0.01; // of u: changes it by 0.005 %

/** Sources in use, common ones first, each group by its largest part; those that count nowhere are told apart. */
function sourcesOf(dwells: readonly DwellResult[]): { shown: Column[]; negligible: string[] } {
  const largest = new Map<string, { common: boolean; u: number; share: number }>();
  for (const dwell of dwells)
    for (const { source, common, u } of dwell.budget) {
      const before = largest.get(source);
      const share = u / (dwell.amplitude.u ?? u);
      largest.set(source, {
        common,
        u: Math.max(u, before?.u ?? 0),
        share: Math.max(share, before?.share ?? 0),
      });
    }
  const sorted = [...largest].sort(([, a], [, b]) => Number(b.common) - Number(a.common) || b.u - a.u);
  return {
    shown: sorted
      .filter(([, { share }]) => share >= NEGLIGIBLE)
      .map(([source, { common }]) => ({ source, common })),
    negligible: sorted.filter(([, { share }]) => share < NEGLIGIBLE).map(([source]) => source),
  };
}

function lengthText(mm: number | null, unit: LengthUnit): string {
  return mm === null ? '–' : significant(mm * unit.perMm, 2);
}

/** A part of a dwell's uncertainty with as many decimals as can be seen beside the whole. */
function partText(mm: number | null, whole: number | null, unit: LengthUnit): string {
  if (mm === null) return '–';
  const decimals = decimalsFor((whole ?? mm) * unit.perMm) + 1;
  const text = (mm * unit.perMm).toFixed(decimals);
  return Number(text) === 0 ? '0' : text;
}

function row(dwell: DwellResult, columns: readonly Column[], unit: LengthUnit): HtmlValue[] {
  const of = (wanted: string) => dwell.budget.find(({ source }) => source === wanted);
  return [
    dwellName(dwell),
    ...columns.map(({ source }) => partText(of(source)?.u ?? null, dwell.amplitude.u, unit)),
    partText(dwell.independentU, dwell.amplitude.u, unit),
    partText(dwell.amplitude.u, dwell.amplitude.u, unit),
    dwell.coverageFactor === null ? '–' : dwell.coverageFactor.toFixed(2),
    lengthText(dwell.amplitudeU95, unit),
  ];
}

function budgetTable(view: ConfigurationView, unit: LengthUnit): Html | null {
  const dwells = view.dwells.filter((dwell) => dwell.budget.length > 0);
  if (dwells.length === 0) return null;
  const columns = sourcesOf(dwells).shown;
  return htmlTable(
    [
      { title: 'dwell' },
      ...columns.map(({ source, common }) => ({
        title: html`${source}${common ? html`<br>common` : null}`,
        kind: 'number' as const,
      })),
      { title: html`u own`, kind: 'number' },
      { title: html`u`, kind: 'number' },
      { title: 'k', kind: 'number' },
      { title: html`U`, kind: 'number' },
    ],
    dwells.map((dwell) => row(dwell, columns, unit)),
    {
      caption: html`<b>${view.name}</b>: standard uncertainties of the amplitude by source, ${unit.name}`,
      look: 'small',
    },
  );
}

/** Where the uncertainty of each amplitude comes from, common parts and own. */
export function budgetSection({ views, unit, measurement }: ReportContext): Html {
  const tables = views.map((view) => budgetTable(view, unit)).filter((each) => each !== null);
  if (tables.length === 0)
    return html`<h2>Uncertainty budget</h2><p>No amplitude was measured from a clip, so there is no budget by source.</p>`;
  const { shown, negligible } = sourcesOf(measurement.results.dwells);
  return html`<h2>Uncertainty budget</h2>
${tables}
<p class="soft">${shown.map(({ source }) => `${source}: ${SOURCES[source] ?? source}`).join('; ')}. “Common” parts are the same for all dwells of a camera setup; “u own” combines the others.${negligible.length > 0 ? ` Below 1 % of u in every dwell, counted but not shown: ${negligible.join(', ')}.` : null}</p>`;
}
