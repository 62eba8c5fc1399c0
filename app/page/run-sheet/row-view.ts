import type { DwellResult, Results } from '../../../src/engine/results.ts';
import { frequencyText } from '../../../src/report/format-number.ts';
import type { Configuration, DwellSpec, Setup, TestFile } from '../../../src/testfile/schema.ts';
import type { JobState } from '../../shared/bench-state.ts';
import type { AmplitudeUnit } from '../format/amplitude.ts';
import { measuredTexts } from '../format/numbers.ts';

/** One row of the run sheet as it is shown. */
export interface RowView {
  readonly id: string;
  readonly kind: 'dwell' | 'ring-down' | 'found';
  readonly drive: string;
  readonly amplitude: string;
  readonly amplitudeU: string | null;
  readonly lag: string;
  /** Verdict, or what the row lacks. */
  readonly says: string;
  readonly tone: 'ok' | 'wait' | 'bad' | 'faint';
  /** Why it is left out of the fit; null where it is not. */
  readonly excluded: string | null;
  readonly typed: boolean;
}

/** What rows are made from. */
export interface RowSources {
  readonly test: TestFile;
  readonly results: Results | null;
  readonly missing: readonly string[];
  readonly job: JobState | null;
  readonly unit: AmplitudeUnit;
}

/** The rows of a configuration: its dwells, those found in sweeps, and its ring-downs. */
export function rowViews(sheet: Configuration, sources: RowSources): RowView[] {
  const results = sources.results?.dwells.filter((each) => each.configuration === sheet.id) ?? [];
  const byId = new Map(results.map((each) => [each.id, each]));
  const own = new Set(sheet.dwells.map((each) => each.id));
  return [
    ...sheet.dwells.map((dwell) => dwellRow(dwell, byId.get(dwell.id) ?? null, sources)),
    ...results.filter((each) => !own.has(each.id)).map((each) => foundRow(each, sources)),
    ...sheet.ringdowns.map((each) => ringDownRow(sheet, each, sources)),
  ];
}

function dwellRow(dwell: DwellSpec, result: DwellResult | null, sources: RowSources): RowView {
  const numbers = result ? numbersOf(result, sources.unit) : NO_NUMBERS;
  const drive = dwell.driveHz ?? result?.driveHz ?? null;
  return {
    id: dwell.id,
    kind: 'dwell',
    drive: drive === null ? '' : frequencyText(drive),
    ...numbers,
    ...(verdictOf(dwell, result, sources) ?? {}),
    excluded: dwell.excluded ?? null,
    typed: dwell.typed !== undefined,
  };
}

function foundRow(result: DwellResult, { unit }: RowSources): RowView {
  const drive = result.driveHz ?? result.frequency.value;
  return {
    id: result.id,
    kind: 'found',
    drive: drive === null ? '' : frequencyText(drive),
    ...numbersOf(result, unit),
    ...saysOf(result),
    excluded: result.excluded,
    typed: false,
  };
}

function ringDownRow(
  sheet: Configuration,
  ringdown: Configuration['ringdowns'][number],
  { results }: RowSources,
): RowView {
  const result = results?.ringdowns.find(
    (each) => each.configuration === sheet.id && each.id === ringdown.id,
  );
  const { naturalHz, dampingRatio } = result ?? {};
  const fn = naturalHz?.value == null ? '' : measuredTexts(naturalHz.value, naturalHz.u).value;
  const zeta = dampingRatio?.value == null ? null : measuredTexts(dampingRatio.value, dampingRatio.u).value;
  return {
    id: ringdown.id,
    kind: 'ring-down',
    drive: fn,
    amplitude: zeta === null ? '' : `damping ratio ${zeta}`,
    amplitudeU: null,
    lag: '',
    says: result?.error ? 'failed' : result ? 'ring-down' : 'ring-down, not measured',
    tone: result?.error ? 'bad' : result ? 'ok' : 'faint',
    excluded: ringdown.excluded ?? null,
    typed: false,
  };
}

type Numbers = Pick<RowView, 'amplitude' | 'amplitudeU' | 'lag'>;
type Says = Pick<RowView, 'says' | 'tone'>;
const NO_NUMBERS: Numbers = { amplitude: '', amplitudeU: null, lag: '' };

function numbersOf({ amplitude, lag }: DwellResult, { factor }: AmplitudeUnit): Numbers {
  if (amplitude.value === null) return NO_NUMBERS;
  const shown = measuredTexts(amplitude.value * factor, amplitude.u === null ? null : amplitude.u * factor);
  const lagShown = lag.value === null ? '' : lag.value.toFixed(1);
  return { amplitude: shown.value, amplitudeU: shown.u, lag: lagShown };
}

function saysOf(result: DwellResult): Says {
  if (result.typed) return { says: 'typed', tone: 'faint' };
  const joint = result.jointFit && result.verdict === 'settling' ? ' · joint fit' : '';
  const codec = result.codecLimited ? ' · codec-limited' : '';
  const tone = result.verdict === 'steady' ? 'ok' : result.verdict === 'settling' ? 'wait' : 'bad';
  return {
    says: `${result.verdict}${joint}${codec}`,
    tone: result.verdict === 'steady' && codec ? 'wait' : tone,
  };
}

function verdictOf(dwell: DwellSpec, result: DwellResult | null, sources: RowSources): Says {
  const { test, missing, job } = sources;
  const clip = test.clips.find((each) => each.id === dwell.clip);
  if (job && clip && job.clip === clip.id) {
    const part = job.frameCount ? ` ${Math.round((100 * job.frame) / job.frameCount)} %` : ' …';
    return { says: `measuring${part}`, tone: 'wait' };
  }
  if (result) return saysOf(result);
  if (!clip)
    return dwell.clip ? { says: 'clip not listed', tone: 'bad' } : { says: 'planned', tone: 'faint' };
  if (missing.includes(clip.id)) return { says: 'clip not found', tone: 'bad' };
  const lack = lackOf(test.setups.find((each) => each.id === clip.setup));
  return lack ? { says: lack, tone: 'bad' } : { says: 'not measured', tone: 'faint' };
}

/** What a camera setup lacks before its clips can be measured; null where nothing. */
export function lackOf(setup: Setup | undefined): string | null {
  if (!setup) return 'needs a camera setup';
  if (!setup.scale) return 'needs the scale';
  if (!setup.markers.some((marker) => marker.role === 'response')) return 'needs a marker';
  return null;
}
