import type { ClipInfo } from '../clip/clip-info.ts';
import { decodeRegions } from '../clip/decode-regions.ts';
import { fitRegion, type Region } from '../clip/region.ts';
import { trueTimes } from '../clip/true-times.ts';
import { InputError } from '../errors.ts';
import type { ClipSpec } from '../testfile/schema.ts';
import type { MotionModel } from '../track/adaptive-registrar.ts';
import { TemplateAverager } from '../track/averaged-template.ts';
import { MarkerTracker } from '../track/marker-tracker.ts';
import type { ClipFacts, ClipTracks, MarkerTrack } from './clip-tracks.ts';
import type { DecodeContext } from './frame-luma.ts';
import { lookOverClip, type Sighting } from './look-over-clip.ts';
import { planRegions, type RegionWish } from './plan-regions.ts';
import type { PreparedMarker, PreparedSetup } from './prepare-markers.ts';
import { TrackRecorder } from './track-recorder.ts';

const GROWTHS = [1, 2, 4, 1000]; // each try gives a marker more room; the last decodes the whole frame
const AVERAGED_FRAMES = 100; // beyond this an averaged template gains nothing that compression leaves to gain
const PROGRESS_EVERY = 16; // frames: some ten messages a second
const THROUGH_MARK_PX = 3; // a track that passes further than this from the clicked point follows something else

/** What tracking a clip needs to know. */
export interface TrackClipJob {
  readonly spec: ClipSpec;
  readonly info: ClipInfo;
  readonly setup: PreparedSetup;
  /** Whether to go over the clip once more with templates averaged over it. */
  readonly refine: boolean;
}

/** Tells how far the clip is; called every few frames. */
export type OnTracked = (frame: number, frameCount: number, framesPerS: number | null) => void;

interface Pass {
  readonly recorders: readonly TrackRecorder[];
  readonly frameIndex: Int32Array;
  readonly lostFrames: number;
  readonly complaints: readonly string[];
  readonly cramped: boolean;
  readonly averagers: readonly TemplateAverager[];
  /** Motion model each marker ended with. */
  readonly models: readonly MotionModel[];
}

/** One decoding pass over the clip with every marker followed in it; ends early when a marker needs more room. */
async function trackOnce(
  job: TrackClipJob,
  markers: readonly PreparedMarker[],
  sightings: readonly (readonly Sighting[])[],
  regions: readonly Region[],
  mayGrow: boolean,
  models: readonly MotionModel[],
  context: DecodeContext,
  onTracked: OnTracked,
): Promise<Pass> {
  const { info } = job;
  const { timesS } = trueTimes(info, job.spec.captureFps);
  const recorders = markers.map((marker) => new TrackRecorder(marker, info.frameCount));
  const trackers = markers.map((marker, k) => {
    const first = sightings[k]?.find((seen) => seen.frame === 0);
    return new MarkerTracker(marker.template, {
      ...(first ? { start: first } : {}),
      model: models[k] ?? 'auto',
    });
  });
  const decoded = regions.map((region) => fitRegion(region, info));
  const averagers = job.refine ? markers.map((marker) => new TemplateAverager(marker.template)) : [];
  const stride = Math.max(1, Math.floor(info.frameCount / AVERAGED_FRAMES));
  const frameIndex = new Int32Array(info.frameCount);
  let cramped = false;
  let done = 0;
  const startedMs = performance.now();
  const whole =
    decoded.length === 1 && decoded[0]?.width === info.codedWidth && decoded[0]?.height === info.codedHeight;
  const result = await decodeRegions(
    info,
    regions,
    (frame) => {
      for (const [k, tracker] of trackers.entries()) {
        const image = frame.regions[regions.length === 1 ? 0 : k];
        const region = decoded[regions.length === 1 ? 0 : k];
        const recorder = recorders[k];
        if (!image || !region || !recorder) throw new Error('a marker without its region');
        const step = tracker.step(image, region.x, region.y, timesS[frame.index] ?? frame.timeS);
        recorder.add(step, frame.doubtful);
        if (step.state === 'ok' && step.blurPx === 0 && !frame.doubtful && done % stride === 0) {
          averagers[k]?.add(image, region.x, region.y, step.x, step.y, tracker.deformation);
        }
        if (step.nearBorder && mayGrow && !whole) cramped = true;
      }
      frameIndex[done++] = frame.index;
      if (done % PROGRESS_EVERY === 0)
        onTracked(done, info.frameCount, (1000 * done) / (performance.now() - startedMs));
      return !cramped;
    },
    { ffmpeg: context.ffmpeg, ...(context.signal ? { signal: context.signal } : {}) },
  );
  return {
    recorders,
    frameIndex: frameIndex.slice(0, done),
    lostFrames: result.lostFrames.length,
    complaints: result.complaints,
    cramped,
    averagers,
    models: trackers.map((tracker) => tracker.model),
  };
}

function wishOf(marker: PreparedMarker, seen: readonly Sighting[]): RegionWish {
  return {
    patchWidthPx: marker.template.widthPx,
    patchHeightPx: marker.template.heightPx,
    seen: seen.length > 0 ? seen : [marker.at],
  };
}

function withAverages(
  markers: readonly PreparedMarker[],
  averagers: readonly TemplateAverager[],
): PreparedMarker[] {
  return markers.map((marker, k) => ({ ...marker, template: averagers[k]?.finish() ?? marker.template }));
}

/** Why a finished track must not be trusted as a whole; null where it may. */
function trackError(
  job: TrackClipJob,
  marker: PreparedMarker,
  recorder: TrackRecorder,
  frameIndex: Int32Array,
): string | null {
  let seen = 0;
  for (let i = 0; i < recorder.frames; i++) if (recorder.at(i)) seen += 1;
  if (seen === 0) {
    return `Marker "${marker.id}" was not found in clip "${job.spec.id}"; mark it in this clip, or check that the clip was filmed from the same place.`;
  }
  if (marker.clip !== job.spec.id) return null;
  const there = recorder.at(frameIndex.indexOf(marker.frame));
  if (!there || Math.hypot(there.x - marker.at.x, there.y - marker.at.y) <= THROUGH_MARK_PX) return null;
  return `Marker "${marker.id}" was confused with something that looks alike in clip "${job.spec.id}": in frame ${marker.frame} it was followed elsewhere than where it was marked; choose a spot that looks unlike its surroundings.`;
}

function factsOf(job: TrackClipJob, stretch: number, undecodedFrames: number): ClipFacts {
  const { info } = job;
  const [numerator, denominator] = info.timeBase;
  const jitter = info.regularity.jitterRmsS;
  return {
    frameCount: info.frameCount,
    durationS: info.durationS / stretch,
    codec: info.codec,
    displayedWidth: info.displayedWidth,
    displayedHeight: info.displayedHeight,
    rotationDeg: info.rotationDeg,
    pixelAspect: info.pixelAspect,
    frameRate: info.measuredFps === null ? null : info.measuredFps * stretch,
    fileFrameRate: info.measuredFps,
    captureFps: stretch === 1 || info.measuredFps === null ? null : info.measuredFps * stretch,
    tickS: numerator / denominator / stretch,
    jitterRmsS: jitter === null ? null : jitter / stretch,
    undecodedFrames,
    sha256: null,
    fileBytes: info.fileBytes,
  };
}

/**
 * Follows the markers of a camera setup through one clip in one decoding pass (more only where a marker swings out of the
 * room it was given).
 * @throws InputError when the clip cannot be used at all; CancelledError when stopped
 */
export async function trackClip(
  job: TrackClipJob,
  context: DecodeContext,
  onTracked: OnTracked,
): Promise<ClipTracks> {
  const { info, setup, spec } = job;
  const { timesS, stretch, warnings } = trueTimes(info, spec.captureFps);
  if (
    setup.picture &&
    (setup.picture.codedWidth !== info.codedWidth || setup.picture.codedHeight !== info.codedHeight)
  ) {
    throw new InputError(
      `Clip "${spec.id}" is ${info.codedWidth} x ${info.codedHeight} px but its setup "${spec.setup}" was marked in ${setup.picture.codedWidth} x ${setup.picture.codedHeight} px; give it a setup of its own.`,
    );
  }
  const sightings = await lookOverClip(info, setup.markers, context);
  const wishes = setup.markers.map((marker, k) => wishOf(marker, sightings[k] ?? []));
  const unseen = sightings.some((list) => list.length === 0);
  let pass: Pass | null = null;
  let regions: Region[] = [];
  for (const [k, growth] of GROWTHS.entries()) {
    const last = k === GROWTHS.length - 1;
    if (unseen && !last) continue;
    regions = planRegions(info, wishes, growth);
    pass = await trackOnce(job, setup.markers, sightings, regions, !last, [], context, onTracked);
    if (!pass.cramped) break;
  }
  if (!pass) throw new Error('no pass was made');
  const { averagers, models } = pass;
  const done = job.refine
    ? await trackOnce(
        { ...job, refine: false },
        withAverages(setup.markers, averagers),
        sightings,
        regions,
        false,
        models,
        context,
        onTracked,
      )
    : pass;
  if (done.frameIndex.length === 0)
    throw new InputError(
      `No frame of clip "${spec.id}" decodes; film it again or copy it anew from the phone.`,
    );
  const markers: MarkerTrack[] = setup.markers.map((marker, k) => {
    const recorder = done.recorders[k];
    if (!recorder) throw new Error('a marker without a record');
    return recorder.finish(info, trackError(job, marker, recorder, done.frameIndex));
  });
  const lost =
    done.lostFrames > 0
      ? [
          `${done.lostFrames} of ${info.frameCount} frames do not decode; the file is damaged there, the rest is measured.`,
        ]
      : [];
  return {
    clip: spec.id,
    frameIndex: done.frameIndex,
    timesS: Float64Array.from(done.frameIndex, (index) => timesS[index] ?? Number.NaN),
    markers,
    facts: factsOf(job, stretch, done.lostFrames),
    warnings: [...info.warnings, ...warnings, ...lost],
  };
}
