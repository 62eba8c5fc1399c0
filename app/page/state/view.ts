import { computed, effect, signal } from '@preact/signals';
import type { ClipSpec, Configuration, DwellSpec, Setup } from '../../../src/testfile/schema.ts';
import { bench, test } from './bench.ts';

/** The pages along the top. */
export type PageName = 'plan' | 'measure' | 'resonance' | 'compare' | 'report';

export const page = signal<PageName>('measure');
const configurationId = signal<string | null>(null);
const dwellId = signal<string | null>(null);

/** The configuration whose run sheet is shown. */
export const configuration = computed<Configuration | null>(() => {
  const all = test.value?.configurations ?? [];
  return all.find((each) => each.id === configurationId.value) ?? all[0] ?? null;
});

/** The selected row of the run sheet. */
export const dwell = computed<DwellSpec | null>(() => {
  const all = configuration.value?.dwells ?? [];
  return all.find((each) => each.id === dwellId.value) ?? all[0] ?? null;
});

/** The clip shown: the selected dwell's, or a ring-down's. */
export const shownClip = computed<ClipSpec | null>(() => {
  const ringdown = configuration.value?.ringdowns.find((each) => each.id === dwellId.value);
  const id = ringdown?.clip ?? dwell.value?.clip;
  return test.value?.clips.find((each) => each.id === id) ?? null;
});

/** Camera setup of the clip shown; the first one where no clip is shown. */
export const setup = computed<Setup | null>(() => {
  const all = test.value?.setups ?? [];
  return all.find((each) => each.id === shownClip.value?.setup) ?? all[0] ?? null;
});

/** Id of the selected row: a dwell or a ring-down. */
export const selectedId = computed(() => dwellId.value ?? dwell.value?.id ?? null);

/** Selects a row of the run sheet. */
export function selectDwell(id: string | null): void {
  dwellId.value = id;
}

/** Shows the run sheet of another configuration. */
export function selectConfiguration(id: string): void {
  configurationId.value = id;
  dwellId.value = null;
}

let opening = 0;
effect(() => {
  const now = bench.value?.file?.opening ?? 0;
  if (now === opening) return;
  opening = now;
  configurationId.value = null;
  dwellId.value = null;
});
