import type { ClipInfo } from '../clip/clip-info.ts';
import { contentHash } from '../clip/content-hash.ts';
import { type Ffmpeg, findFfmpeg } from '../clip/find-ffmpeg.ts';
import { probeClip } from '../clip/probe.ts';
import { CancelledError, InputError } from '../errors.ts';
import { clipPath } from '../testfile/on-disk.ts';
import type { ClipSpec, Setup, TestFile } from '../testfile/schema.ts';
import type { ClipOutcome } from './clip-tracks.ts';
import type { DecodeContext } from './frame-luma.ts';
import { type PreparedSetup, prepareMarkers } from './prepare-markers.ts';
import type { MeasureProgress } from './progress.ts';
import { trackClip } from './track-clip.ts';

/** How to track the clips of a test. */
export interface TrackTestOptions {
  /** Path of the test file; clip paths are relative to it. */
  readonly testPath: string;
  readonly signal?: AbortSignal | undefined;
  readonly onProgress?: ((progress: MeasureProgress) => void) | undefined;
  /** Second pass over each clip with templates averaged over the first. */
  readonly refine?: boolean | undefined;
  /** Clips to track; all that are used where absent. */
  readonly only?: ReadonlySet<string> | undefined;
  /** Outcomes of an earlier run that still hold; these clips are not tracked again. */
  readonly known?: ReadonlyMap<string, ClipOutcome> | undefined;
}

/** Ids of the clips that some dwell, sweep or ring-down uses, in the order of the test file. */
export function usedClips(test: TestFile): string[] {
  const used = new Set<string>();
  for (const configuration of test.configurations) {
    for (const dwell of configuration.dwells)
      if (dwell.clip !== undefined && !dwell.typed) used.add(dwell.clip);
    for (const sweep of configuration.sweeps) used.add(sweep.clip);
    for (const ringdown of configuration.ringdowns) used.add(ringdown.clip);
  }
  return test.clips.filter((clip) => used.has(clip.id)).map((clip) => clip.id);
}

/** Reads clips once each, and the markers of a setup once for all its clips. */
class Tracking {
  private readonly infos = new Map<string, Promise<ClipInfo>>();
  private readonly setups = new Map<string, Promise<PreparedSetup>>();

  constructor(
    private readonly test: TestFile,
    private readonly options: TrackTestOptions,
    private readonly context: DecodeContext,
  ) {}

  private info(id: string): Promise<ClipInfo> {
    const known = this.infos.get(id);
    if (known) return known;
    const spec = this.test.clips.find((clip) => clip.id === id);
    const info = spec
      ? probeClip(clipPath(this.options.testPath, spec), {
          ffmpeg: this.context.ffmpeg,
          ...(this.context.signal ? { signal: this.context.signal } : {}),
        })
      : Promise.reject(
          new InputError(`There is no clip "${id}" in the test file; add it to the clips or name another.`),
        );
    this.infos.set(id, info);
    info.catch(() => undefined);
    return info;
  }

  private prepared(setup: Setup): Promise<PreparedSetup> {
    const known = this.setups.get(setup.id);
    if (known) return known;
    const first = this.test.clips.find((clip) => clip.setup === setup.id);
    if (!first) throw new Error('a setup without the clip that asked for it');
    const prepared = prepareMarkers(setup, first.id, (clip) => this.info(clip), this.context);
    this.setups.set(setup.id, prepared);
    prepared.catch(() => undefined);
    return prepared;
  }

  async track(
    spec: ClipSpec,
    onTracked: (frame: number, frameCount: number, framesPerS: number | null) => void,
  ): Promise<ClipOutcome> {
    try {
      const setup = this.test.setups.find((each) => each.id === spec.setup);
      if (!setup)
        throw new InputError(
          `Clip "${spec.id}" belongs to setup "${spec.setup}", which is not in the test file; correct the id or add the setup.`,
        );
      if (!setup.markers.some((marker) => marker.role === 'response')) {
        throw new InputError(
          `Setup "${setup.id}" has no response marker; mark a feature of the moving part.`,
        );
      }
      const info = await this.info(spec.id);
      const prepared = await this.prepared(setup);
      const refusedResponse = setup.markers.find(
        (marker) => marker.role === 'response' && prepared.refused.has(marker.id),
      );
      if (refusedResponse && !prepared.markers.some((marker) => marker.role === 'response')) {
        throw new InputError(
          prepared.refused.get(refusedResponse.id) ?? 'The response marker cannot be tracked.',
        );
      }
      // hashing waits for the disk, tracking for the decoder: together they cost no more than the longer
      const hash = contentHash(info.path, this.context.signal);
      hash.catch(() => undefined);
      const tracks = await trackClip(
        { spec, info, setup: prepared, refine: this.options.refine ?? false },
        this.context,
        onTracked,
      );
      return {
        ...tracks,
        facts: { ...tracks.facts, sha256: await hash },
        warnings: [
          ...tracks.warnings,
          ...(prepared.cautions.get(spec.id) ?? []),
          ...prepared.refused.values(),
        ],
      };
    } catch (error) {
      if (error instanceof InputError) return { clip: spec.id, error: error.message };
      throw error;
    }
  }
}

/**
 * Tracks the clips of a test, one after the other (decoding one clip already uses the cores). A clip that cannot be
 * read or tracked becomes a failure with its reason; the others are tracked all the same.
 * @throws CancelledError when stopped; InputError when no ffmpeg is found
 */
export async function trackTest(
  test: TestFile,
  options: TrackTestOptions,
): Promise<Map<string, ClipOutcome>> {
  const outcomes = new Map<string, ClipOutcome>(options.known ?? []);
  const wanted = usedClips(test).filter((id) => (options.only ? options.only.has(id) : !outcomes.has(id)));
  if (wanted.length === 0) return outcomes;
  const ffmpeg: Ffmpeg = await findFfmpeg();
  const tracking = new Tracking(test, options, { ffmpeg, signal: options.signal });
  for (const [clipIndex, id] of wanted.entries()) {
    if (options.signal?.aborted) throw new CancelledError();
    const spec = test.clips.find((clip) => clip.id === id);
    if (!spec) continue;
    const tell = (frame: number, frameCount: number | null, framesPerS: number | null): void =>
      options.onProgress?.({ clip: id, clipIndex, clipCount: wanted.length, frame, frameCount, framesPerS });
    tell(0, null, null);
    outcomes.set(id, await tracking.track(spec, tell));
  }
  return outcomes;
}
