import type { ClipOutcome } from '../../src/engine/clip-tracks.ts';
import { isTracked } from '../../src/engine/clip-tracks.ts';
import { keptDwell } from '../../src/engine/dwell-without-clip.ts';
import { evaluateTest } from '../../src/engine/evaluate-test.ts';
import { fitConfiguration } from '../../src/engine/fit-configuration.ts';
import type { DwellResult, Results } from '../../src/engine/results.ts';
import { InputError } from '../../src/errors.ts';
import { reportHtml } from '../../src/report/report-html.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import type { EvaluationAnswer, KeyedClip } from './engine.ts';
import { packTrack } from './tracks-bytes.ts';

/** Evaluates a test again and again as it is edited; holds the tracks, so that they are handed over once. */
export class EvaluatingSession {
  readonly #held = new Map<string, ClipOutcome>();
  #outcomes: ReadonlyMap<string, ClipOutcome> = new Map();
  #displacements: ReadonlyMap<string, Float64Array> = new Map();
  #results: Results | null = null;

  hold(tracks: readonly (readonly [string, ClipOutcome])[]): void {
    for (const [key, outcome] of tracks) this.#held.set(key, outcome);
  }

  /** Evaluates, or says which tracks are wanting. Tracks that no clip uses any more are forgotten. */
  evaluate(test: TestFile, clips: readonly KeyedClip[]): EvaluationAnswer {
    const wanting = clips.filter(({ key }) => !this.#held.has(key)).map(({ key }) => key);
    if (wanting.length > 0) return { results: null, wanting };
    const outcomes = new Map<string, ClipOutcome>();
    const used = new Set(clips.map(({ key }) => key));
    for (const { clip, key } of clips) {
      const outcome = this.#held.get(key);
      if (outcome) outcomes.set(clip, outcome);
    }
    for (const key of this.#held.keys()) if (!used.has(key)) this.#held.delete(key);
    const { results, displacements } = evaluateTest(test, outcomes);
    this.#outcomes = outcomes;
    this.#displacements = displacements;
    this.#results = withKept(test, results, outcomes);
    return { results: this.#results, wanting: null };
  }

  /** The report of the test as of the last evaluation. Throws InputError before there was one. */
  report(test: TestFile): string {
    if (!this.#results)
      throw new InputError('There is nothing to report yet: measure or type a dwell first.');
    const [outcomes, displacements] = [this.#outcomes, this.#displacements];
    return reportHtml(test, { results: this.#results, displacements, outcomes });
  }

  /** The motion record of a clip as of the last evaluation; null where it has none. */
  motion(clip: string): Uint8Array | null {
    const tracks = this.#outcomes.get(clip);
    if (!tracks || !isTracked(tracks)) return null;
    const { timesS } = tracks;
    return packTrack({
      clip,
      frame: Float64Array.from(tracks.frameIndex),
      timeS: timesS,
      displacementMm: this.#displacements.get(clip) ?? new Float64Array(timesS.length).fill(Number.NaN),
      markers: tracks.markers
        .filter((marker) => marker.role !== 'still')
        .map((marker) => ({ ...marker, state: Float64Array.from(marker.state) })),
    });
  }
}

/**
 * The results with the dwells that were measured in an earlier run in the places of those without tracks, and the fits
 * made from both; dwells without any amplitude are left out: they only have not been measured yet.
 */
function withKept(test: TestFile, results: Results, outcomes: ReadonlyMap<string, ClipOutcome>): Results {
  const evaluated = new Map(results.dwells.map((each) => [`${each.configuration}\n${each.id}`, each]));
  const dwells: DwellResult[] = [];
  const known = new Set<string>();
  const resonances = test.configurations.map((configuration, index) => {
    let anyKept = false;
    const own = configuration.dwells.flatMap((spec): DwellResult[] => {
      const key = `${configuration.id}\n${spec.id}`;
      known.add(key);
      const result = evaluated.get(key);
      if (result && (spec.typed || (spec.clip !== undefined && outcomes.has(spec.clip)))) return [result];
      if (!spec.measured) return [];
      anyKept = true;
      return [keptDwell(configuration, spec)];
    });
    dwells.push(...own);
    const fit = results.resonances[index];
    const found = results.dwells.filter(
      (each) => each.configuration === configuration.id && !known.has(`${configuration.id}\n${each.id}`),
    );
    dwells.push(...found);
    return fit && !anyKept ? fit : fitConfiguration(configuration, [...own, ...found]);
  });
  return { ...results, dwells, resonances };
}
