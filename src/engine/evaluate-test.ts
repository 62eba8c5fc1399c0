import type { Configuration, DwellSpec, TestFile } from '../testfile/schema.ts';
import { clipResults } from './clip-results.ts';
import type { ClipOutcome } from './clip-tracks.ts';
import { failedDwell, typedDwell } from './dwell-without-clip.ts';
import { type EvaluatedClips, evaluateClips } from './evaluate-clips.ts';
import { evaluateDwell } from './evaluate-dwell.ts';
import { evaluateRingDown, failedRingDown } from './evaluate-ringdown.ts';
import { evaluateSweep, failedSweep } from './evaluate-sweep.ts';
import { fitConfiguration } from './fit-configuration.ts';
import { PROGRAM } from './program.ts';
import {
  type DwellResult,
  RESULTS_FORMAT,
  RESULTS_VERSION,
  type Results,
  type RingDownResult,
} from './results.ts';

/** Results, and each clip's displacement of the response marker along the motion axis, mm, NaN where lost. */
export interface Evaluation {
  readonly results: Results;
  readonly displacements: ReadonlyMap<string, Float64Array>;
}

function dwellResult(
  test: TestFile,
  evaluated: EvaluatedClips,
  configuration: Configuration,
  spec: DwellSpec,
): DwellResult {
  if (spec.typed) return typedDwell(configuration, spec);
  if (spec.clip === undefined)
    return failedDwell(
      configuration,
      spec,
      `Dwell "${spec.id}" has neither a clip nor a typed amplitude; film it, or type the amplitude in.`,
    );
  const clip = evaluated.clips.get(spec.clip);
  if (clip) return evaluateDwell(configuration, spec, clip);
  return failedDwell(configuration, spec, whyNotMeasured(test, evaluated, spec.clip));
}

/** Why a clip that something refers to brought no motion, in one sentence. */
function whyNotMeasured(test: TestFile, evaluated: EvaluatedClips, clip: string): string {
  const known = test.clips.some((each) => each.id === clip);
  if (!known) return `There is no clip "${clip}" in the test file; add the clip or correct the id.`;
  return evaluated.failures.get(clip) ?? `Clip "${clip}" has not been measured yet.`;
}

/**
 * Everything that follows from the tracks of a test's clips: dwells, ring-downs, resonances. Pure and quick, so that it
 * can run again whenever a window, an exclusion or a typed number changes.
 */
export function evaluateTest(test: TestFile, outcomes: ReadonlyMap<string, ClipOutcome>): Evaluation {
  const evaluated = evaluateClips(test, outcomes);
  const dwells: DwellResult[] = [];
  const ringdowns: RingDownResult[] = [];
  const resonances = test.configurations.map((configuration) => {
    const own = [
      ...configuration.dwells.map((spec) => dwellResult(test, evaluated, configuration, spec)),
      ...configuration.sweeps.flatMap((sweep) => {
        const clip = evaluated.clips.get(sweep.clip);
        return clip
          ? evaluateSweep(configuration, sweep, clip)
          : failedSweep(configuration, sweep, whyNotMeasured(test, evaluated, sweep.clip));
      }),
    ];
    const decays = configuration.ringdowns.map((spec) => {
      const clip = evaluated.clips.get(spec.clip);
      if (clip) return evaluateRingDown(configuration, spec, clip);
      return {
        result: failedRingDown(configuration, spec, whyNotMeasured(test, evaluated, spec.clip)),
        levels: [],
      };
    });
    dwells.push(...own);
    ringdowns.push(...decays.map((each) => each.result));
    const levels = decays.filter((each) => each.result.error === null).flatMap((each) => each.levels);
    return fitConfiguration(configuration, own, levels);
  });
  return {
    results: {
      format: RESULTS_FORMAT,
      version: RESULTS_VERSION,
      program: PROGRAM,
      test: test.title,
      clips: clipResults(test, outcomes, evaluated),
      dwells,
      ringdowns,
      resonances,
    },
    displacements: new Map([...evaluated.clips].map(([id, clip]) => [id, clip.response.displacementMm])),
  };
}
