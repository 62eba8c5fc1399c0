import { computed } from '@preact/signals';
import type { ResonanceResult } from '../../../src/engine/results.ts';
import { results } from '../state/bench.ts';
import { configuration } from '../state/view.ts';
import { type FittedCurve, fittedCurve } from './fitted-curve.ts';
import { curveRange } from './response-plot.ts';
import { responsePoints } from './response-points.ts';

/** The resonance fit of the configuration shown; null where there is none yet. */
export const shownFit = computed<ResonanceResult | null>(() => {
  const id = configuration.value?.id;
  return results.value?.resonances.find((each) => each.configuration === id) ?? null;
});

/** Its dwells as points. */
export const shownPoints = computed(() =>
  responsePoints(results.value, configuration.value?.id ?? '', shownFit.value?.gainUnit === '1'),
);

/** Its fitted curve; null where nothing was fitted. */
export const shownCurve = computed<FittedCurve | null>(() => {
  const fit = shownFit.value;
  const range = curveRange(shownPoints.value, fit);
  return fit && range ? fittedCurve(fit, range[0], range[1]) : null;
});
