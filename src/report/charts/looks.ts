/** How charts look: colours, type and line widths of one ground. Lengths in CSS pixels. */
export interface ChartLooks {
  /** Ground that open points are filled with. */
  readonly sheet: string;
  readonly ink: string;
  readonly soft: string;
  readonly rule: string;
  readonly grid: string;
  /** Colours of series, told apart by colour-blind eyes (Okabe and Ito 2008), dark enough for paper. */
  readonly series: readonly string[];
  readonly fontFamily: string;
  readonly fontSizePx: number;
  readonly lineWidthPx: number;
  readonly pointRadiusPx: number;
}

/** Name under which the packaged font for charts is registered; where it is missing the system's sans-serif stands in. */
export const CHART_FONT = 'Dwellbook Chart';

/** Light ground, for paper and for a page that is read by day. */
export const PAPER_LOOKS: ChartLooks = {
  sheet: '#ffffff',
  ink: '#1b2430',
  soft: '#4b5563',
  rule: '#8b94a0',
  grid: '#e4e1d8',
  series: ['#0072b2', '#d55e00', '#009e73', '#aa4499', '#b8860b', '#000000'],
  fontFamily: `"${CHART_FONT}", sans-serif`,
  fontSizePx: 10.5,
  lineWidthPx: 1.4,
  pointRadiusPx: 3.6,
};

/** How the n-th of several series is told from the others, also without colour. */
export interface SeriesLook {
  readonly colour: string;
  readonly pointStyle: 'circle' | 'rect' | 'triangle' | 'rectRot';
  readonly dash: number[];
}

const POINT_STYLES = ['circle', 'rect', 'triangle', 'rectRot'] as const;
const DASHES: readonly (readonly number[])[] = [[], [7, 3], [2, 2], [7, 3, 2, 3]];

/** Look of series `index` (0 upward); colours, shapes and dashes repeat with different periods. */
export function seriesLook(looks: ChartLooks, index: number): SeriesLook {
  return {
    colour: looks.series[index % looks.series.length] ?? looks.ink,
    pointStyle: POINT_STYLES[index % POINT_STYLES.length] ?? 'circle',
    dash: [...(DASHES[Math.floor(index / POINT_STYLES.length + index) % DASHES.length] ?? [])],
  };
}

const HEX_BYTES = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i;

/**
 * A colour let through to `opacity` (0 to 1).
 * @param colour as #rrggbb; anything else comes back as it is
 */
export function seeThrough(colour: string, opacity: number): string {
  const bytes = HEX_BYTES.exec(colour)
    ?.slice(1)
    .map((pair) => Number.parseInt(pair, 16));
  return bytes ? `rgba(${bytes.join(', ')}, ${opacity})` : colour;
}
