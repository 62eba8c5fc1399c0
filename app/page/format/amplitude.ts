import { computed } from '@preact/signals';
import type { Preferences } from '../../shared/preferences.ts';
import { preferences } from '../state/bench.ts';

/** How an amplitude is stated. */
export interface AmplitudeUnit {
  /** What a zero-to-peak value is multiplied by. */
  readonly factor: number;
  /** Short name behind the unit: `peak`, `p-p`, `RMS`. */
  readonly short: string;
  /** Name in full. */
  readonly long: string;
}

/** The ways to state an amplitude; in files and results it is always zero-to-peak. */
export const AMPLITUDE_UNITS: Readonly<Record<Preferences['amplitudeAs'], AmplitudeUnit>> = {
  peak: { factor: 1, short: 'peak', long: 'peak (zero to peak)' },
  'peak-to-peak': { factor: 2, short: 'p-p', long: 'peak to peak' },
  rms: { factor: Math.SQRT1_2, short: 'RMS', long: 'RMS' },
};

/** The way chosen. */
export const amplitudeUnit = computed(() => AMPLITUDE_UNITS[preferences.value?.amplitudeAs ?? 'peak']);
