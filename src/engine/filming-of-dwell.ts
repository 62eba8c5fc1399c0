import { compressionOf } from '../camera/codec-limit.ts';
import type { FilmingFacts } from '../camera/correct-dwell.ts';
import { type RowReadout, readoutDirection, readoutFraction } from '../camera/rolling-shutter.ts';
import type { RowFacts } from '../camera/row-correction.ts';
import { type NoiseFloor, noiseFloor } from '../motion/noise-floor.ts';
import { localMmPerPx } from '../scale/perspective.ts';
import type { PointPx } from '../scale/point-track.ts';
import { inWindow, sineInWindow } from './dwell-at-frequency.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';

/** Millimetres of true motion along the axis for one pixel of seen motion at a place. */
export function mmPerPx(clip: EvaluatedClip, restPx: PointPx): number {
  const { toMm } = clip.geometry;
  return toMm.kind === 'plane'
    ? localMmPerPx(toMm, restPx, [clip.axis.directionX, clip.axis.directionY])
    : toMm.mmPerPx;
}

function readout(clip: EvaluatedClip): RowReadout {
  const { displayedWidth, displayedHeight, rotationDeg } = clip.tracks.facts;
  return {
    rowReadoutS: clip.spec.rowReadout ?? 0,
    displayedWidthPx: displayedWidth,
    displayedHeightPx: displayedHeight,
    rotationDeg,
  };
}

/** Where the markers are in the readout; the amplitude along it as a fraction of the rows. */
export function rowFacts(clip: EvaluatedClip, amplitudePx: number): RowFacts {
  const { motion, axis, spec, tracks } = clip;
  const shutter = readout(clip);
  const [alongX, alongY] = readoutDirection(shutter.rotationDeg);
  const rows = alongX === 0 ? tracks.facts.displayedHeight : tracks.facts.displayedWidth;
  const along = Math.abs(alongX * axis.directionX + alongY * axis.directionY);
  return {
    rowReadoutS: spec.rowReadout ?? null,
    undone: spec.rowReadout !== undefined,
    amplitudeFraction: (amplitudePx * along) / rows,
    fractionDifference: motion.driveRestPx
      ? readoutFraction(shutter, ...motion.responseRestPx) - readoutFraction(shutter, ...motion.driveRestPx)
      : null,
  };
}

/** How the clip was filmed, in the window of a dwell. */
export function filmingFacts(clip: EvaluatedClip, window: readonly [number, number]): FilmingFacts {
  const { facts } = clip.tracks;
  return {
    frameRateHz: facts.frameRate ?? 1,
    durationS: window[1] - window[0],
    exposureS: clip.spec.exposure ?? null,
    exposureUS: null,
    stampJitterS: null, // stamps are each frame's own: their scatter is true motion of the shutter, not an error
    stampQuantumS: facts.tickS,
    compression: compressionOf(facts.codec),
  };
}

/** Amplitude along the motion axis of something at rest, px; null where nothing at rest was followed. */
export function stillAmplitudePx(
  clip: EvaluatedClip,
  window: readonly [number, number],
  frequencyHz: number,
): number | null {
  const { still, groundSubtracted } = clip.motion;
  if (!still || groundSubtracted) return null;
  const along = still.x.map(
    (x, i) => x * clip.axis.directionX + (still.y[i] ?? Number.NaN) * clip.axis.directionY,
  );
  return (
    sineInWindow({ timesS: still.timesS, displacementMm: along }, window, frequencyHz)?.amplitude ?? null
  );
}

/**
 * How small a motion along the axis could be seen in a dwell, from something at rest in the same clip; null where
 * nothing at rest was followed.
 */
export function floorOf(
  clip: EvaluatedClip,
  window: readonly [number, number],
  frequencyHz: number,
  frames: number,
): NoiseFloor | null {
  const { still } = clip.motion;
  if (!still) return null;
  const scale = mmPerPx(clip, clip.motion.responseRestPx);
  const along = still.x.map(
    (x, i) => scale * (x * clip.axis.directionX + (still.y[i] ?? Number.NaN) * clip.axis.directionY),
  );
  return noiseFloor(
    inWindow({ timesS: still.timesS, displacementMm: along }, window),
    frequencyHz,
    Math.max(1, frames),
  );
}
