import type { TestFile } from '../testfile/schema.ts';
import { type ClipOutcome, isTracked, type MarkerTrack, TRACK_STATE } from './clip-tracks.ts';
import type { EvaluatedClips } from './evaluate-clips.ts';
import type { ClipResult, MarkerResult } from './results.ts';

function count(states: Uint8Array, wanted: number): number {
  let n = 0;
  for (const state of states) if (state === wanted) n += 1;
  return n;
}

function markerResult(marker: MarkerTrack): MarkerResult | null {
  if (marker.role === 'still') return null;
  const scores = marker.score.filter(Number.isFinite).sort();
  return {
    id: marker.id,
    role: marker.role,
    lostFrames: count(marker.state, TRACK_STATE.lost),
    doubtfulFrames: count(marker.state, TRACK_STATE.doubtful),
    medianScore: scores[scores.length >> 1] ?? null,
    expectedUPx: marker.medianUPx,
  };
}

/** What the clips of a test are and how their markers fared; clips that nothing uses are left out. */
export function clipResults(
  test: TestFile,
  outcomes: ReadonlyMap<string, ClipOutcome>,
  evaluated: EvaluatedClips,
): ClipResult[] {
  const said = new Set<string>(); // what concerns a whole setup is said at its first clip
  return test.clips.flatMap((spec): ClipResult[] => {
    const outcome = outcomes.get(spec.id);
    if (!outcome) return [];
    if (!isTracked(outcome)) {
      return [
        {
          id: spec.id,
          file: spec.file,
          frames: 0,
          duration: 0,
          codec: '',
          width: 0,
          height: 0,
          frameRate: null,
          sha256: null,
          markers: [],
          warnings: [],
          error: outcome.error,
        },
      ];
    }
    const { facts } = outcome;
    const ofSetup = said.has(spec.setup) ? [] : (evaluated.setupWarnings.get(spec.setup) ?? []);
    said.add(spec.setup);
    const lostMarkers = outcome.markers.flatMap((marker) => (marker.error !== null ? [marker.error] : []));
    return [
      {
        id: spec.id,
        file: spec.file,
        frames: outcome.timesS.length,
        duration: facts.durationS,
        codec: facts.codec,
        width: facts.displayedWidth,
        height: facts.displayedHeight,
        frameRate: facts.frameRate,
        sha256: facts.sha256,
        markers: outcome.markers.flatMap((marker) => markerResult(marker) ?? []),
        warnings: [...ofSetup, ...outcome.warnings, ...lostMarkers],
        error: evaluated.failures.get(spec.id) ?? null,
      },
    ];
  });
}
