import { unknownFrequencyWarning } from '../camera/aliasing.ts';
import type { BudgetEntry } from '../camera/amplitude-budget.ts';
import { judgeShake, stillRmsPx } from '../camera/camera-shake.ts';
import { compressionOf } from '../camera/codec-limit.ts';
import { type CorrectedDwell, correctDwell, type FilmingFacts } from '../camera/correct-dwell.ts';
import { geometryLines } from '../camera/geometry-lines.ts';
import { smearWarning } from '../camera/marker-smear.ts';
import { type RowReadout, readoutDirection, readoutFraction } from '../camera/rolling-shutter.ts';
import type { RowFacts } from '../camera/row-correction.ts';
import { checkFrequency } from '../camera/slow-motion.ts';
import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { localMmPerPx } from '../scale/perspective.ts';
import type { PointPx } from '../scale/point-track.ts';
import { fitSine } from '../sine/four-parameter.ts';
import { lagDegrees } from '../sine/lag.ts';
import type { Configuration, DwellSpec } from '../testfile/schema.ts';
import { inWindow, type SeenSine, sineInWindow } from './dwell-at-frequency.ts';
import { emptyDwell, failedDwell } from './dwell-without-clip.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import { type JudgedDwell, judgeClipDwell } from './judge-clip-dwell.ts';
import type { DwellResult } from './results.ts';

const DEG_PER_RAD = 180 / Math.PI;

function mmPerPx(clip: EvaluatedClip, restPx: PointPx): number {
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
function rowFacts(clip: EvaluatedClip, amplitudePx: number): RowFacts {
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

function filmingFacts(clip: EvaluatedClip, window: readonly [number, number]): FilmingFacts {
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
function stillAmplitudePx(
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

function shakeWarnings(clip: EvaluatedClip): string[] {
  const { still, groundSubtracted } = clip.motion;
  if (!still) return [];
  const rms = Math.hypot(stillRmsPx(still.x) ?? 0, stillRmsPx(still.y) ?? 0);
  const warning = judgeShake(rms, groundSubtracted);
  return warning ? [warning.sentence] : [];
}

/** The part of the amplitude that belongs to this dwell alone, as a relative standard uncertainty. */
function ownRelative(corrected: CorrectedDwell): number | null {
  const { amplitude, amplitudeBudget } = corrected;
  return amplitude.value === null || amplitudeBudget === null || amplitude.value === 0
    ? null
    : amplitudeBudget.uOwn / amplitude.value;
}

/** Response over drive: what scale and camera do to both alike cancels, what each has of its own adds up. */
function gainOf(response: CorrectedDwell, drive: CorrectedDwell | null): Measured {
  const x = drive?.amplitude.value ?? null;
  const a = response.amplitude.value;
  if (a === null || x === null || x === 0 || !drive) return NOT_MEASURED;
  const ownA = ownRelative(response);
  const ownX = ownRelative(drive);
  return measured(a / x, ownA === null || ownX === null ? null : (a / x) * Math.hypot(ownA, ownX));
}

/** A lag of -90 degrees or less is one beyond 90 degrees seen from the other side: lags run from 0 to 180 through resonance. */
function unwrapped(lag: Measured): Measured {
  return lag.value !== null && lag.value < -90 ? { ...lag, value: lag.value + 360 } : lag;
}

const START_PERIODS = 2; // a record with the start-up in it may hold the exciter's own start too
const LEAST_PERIODS = 3;

/** Where the drive is fitted: the dwell's window, less the exciter's own start where the start-up is in it. */
function driveWindow(judged: JudgedDwell): readonly [number, number] {
  const [from, to] = judged.window;
  const later = from + START_PERIODS / judged.frequencyHz;
  return judged.jointFit && to - later >= LEAST_PERIODS / judged.frequencyHz ? [later, to] : judged.window;
}

function correctedDrive(clip: EvaluatedClip, judged: JudgedDwell, drive: SeenSine): CorrectedDwell {
  const restPx = clip.motion.driveRestPx ?? clip.motion.responseRestPx;
  const scale = mmPerPx(clip, restPx);
  return correctDwell({
    frequencyHz: judged.frequencyHz,
    fittedAt: 'true-frequency',
    filming: filmingFacts(clip, judged.window),
    amplitude: {
      amplitudeMm: drive.amplitude,
      uFitMm: drive.amplitudeU,
      dof: drive.dof,
      residualRmsMm: drive.residualRms,
      mmPerPx: scale,
    },
    lag: null,
    rows: rowFacts(clip, drive.amplitude / scale),
    stillPatchAmplitudePx: stillAmplitudePx(clip, judged.window, judged.frequencyHz),
    relativeLines: geometryLines({
      toMm: clip.geometry.toMm,
      axis: clip.axis,
      parallax: clip.geometry.parallax,
      restPx,
    }),
    amplitudeLines: [],
    lagLines: [],
  });
}

/** Budget lines of what keeps the motion from being steady, mm. */
function unsteadyLines(judged: JudgedDwell): BudgetEntry[] {
  return [
    { source: 'leftover' as const, u: judged.leftoverU, dof: null, common: false },
    { source: 'drift' as const, u: judged.driftU, dof: null, common: false },
  ].filter((line) => line.u > 0);
}

function seen(
  judged: JudgedDwell,
  drive: SeenSine,
  drivePx: number,
): { lagDeg: number; uFitDeg: number; dof: number; driveAmplitudePx: number } {
  return {
    lagDeg: lagDegrees(drive.phaseRad, judged.phaseRad),
    uFitDeg: DEG_PER_RAD * Math.hypot(judged.phaseU, drive.phaseU),
    dof: Math.min(judged.dof, drive.dof),
    driveAmplitudePx: drivePx,
  };
}

function frequencyWarnings(clip: EvaluatedClip, spec: DwellSpec, judged: JudgedDwell): string[] {
  const { value, u } = judged.measuredHz;
  const rate = clip.tracks.facts.frameRate;
  if (value === null || value <= 0 || rate === null) return [];
  if (spec.driveHz === undefined) return [unknownFrequencyWarning(value, rate).sentence];
  const { warning } = checkFrequency(value, u ?? 0, spec.driveHz, rate);
  return warning ? [warning.sentence] : [];
}

const CLEAR_MOTION = 10; // amplitude over its uncertainty from which a motion at another frequency is no accident

/** Where nothing moves at the set frequency: a clear motion at another one, and what it may mean (slow motion not stated). */
function elsewhere(clip: EvaluatedClip, spec: DwellSpec): string | null {
  const rate = clip.tracks.facts.frameRate;
  if (spec.driveHz === undefined || !(spec.driveHz > 0) || rate === null) return null;
  const { timesS, displacementMm } = spec.window ? inWindow(clip.response, spec.window) : clip.response;
  const free = fitSine(timesS, displacementMm);
  if (!free || free.frequencyHz <= 0 || free.amplitude < CLEAR_MOTION * free.amplitudeU) return null;
  return checkFrequency(free.frequencyHz, free.frequencyU ?? 0, spec.driveHz, rate).warning?.sentence ?? null;
}

function smearWarnings(clip: EvaluatedClip, judged: JudgedDwell, scale: number): string[] {
  const peakSpeedPxPerS = (2 * Math.PI * judged.frequencyHz * judged.amplitudeMm) / scale;
  const warning = smearWarning(peakSpeedPxPerS, clip.spec.exposure ?? null);
  return warning ? [warning.sentence] : [];
}

/**
 * Measures one dwell of a clip: the steady window is judged, the sine in it corrected for what filming does to it, and
 * the lag taken against the drive marker where there is one.
 */
export function evaluateDwell(
  configuration: Configuration,
  spec: DwellSpec,
  clip: EvaluatedClip,
): DwellResult {
  const judged = judgeClipDwell(clip, spec);
  if ('error' in judged) {
    const { error, verdict, lostFrames } = judged;
    return {
      ...failedDwell(configuration, spec, elsewhere(clip, spec) ?? error),
      clip: clip.spec.id,
      verdict,
      lostFrames,
    };
  }
  const scale = mmPerPx(clip, clip.motion.responseRestPx);
  const driveSine = clip.drive ? sineInWindow(clip.drive, driveWindow(judged), judged.frequencyHz) : null;
  const drive = driveSine ? correctedDrive(clip, judged, driveSine) : null;
  const drivePx = driveSine
    ? driveSine.amplitude / mmPerPx(clip, clip.motion.driveRestPx ?? clip.motion.responseRestPx)
    : 0;
  const response = correctDwell({
    frequencyHz: judged.frequencyHz,
    fittedAt: 'true-frequency',
    filming: filmingFacts(clip, judged.window),
    amplitude: {
      amplitudeMm: judged.amplitudeMm,
      uFitMm: judged.amplitudeU,
      dof: judged.dof,
      residualRmsMm: judged.residualRmsMm,
      mmPerPx: scale,
    },
    lag: driveSine ? seen(judged, driveSine, drivePx) : null,
    rows: rowFacts(clip, judged.amplitudeMm / scale),
    stillPatchAmplitudePx: stillAmplitudePx(clip, judged.window, judged.frequencyHz),
    relativeLines: geometryLines({
      toMm: clip.geometry.toMm,
      axis: clip.axis,
      parallax: clip.geometry.parallax,
      restPx: clip.motion.responseRestPx,
    }),
    amplitudeLines: unsteadyLines(judged),
    lagLines:
      judged.leftoverU > 0
        ? [
            {
              source: 'leftover',
              u: DEG_PER_RAD * (judged.leftoverU / judged.amplitudeMm),
              dof: null,
              common: false,
            },
          ]
        : [],
  });
  const refused = response.amplitude.value === null;
  const reason = refused
    ? (response.refusal?.sentence ?? 'This frequency cannot be measured at this frame rate.')
    : null;
  return {
    ...emptyDwell(configuration, spec),
    clip: clip.spec.id,
    frequency: judged.measuredHz,
    amplitude: response.amplitude,
    lag: unwrapped(response.lag),
    driveAmplitude: drive?.amplitude ?? NOT_MEASURED,
    gain: gainOf(response, drive),
    amplitudeU95: response.amplitudeBudget?.U ?? null,
    lagU95: response.lagBudget?.U ?? null,
    coverageFactor: response.amplitudeBudget?.k ?? null,
    independentU: response.amplitudeBudget?.uOwn ?? null,
    amplitudePx: judged.amplitudeMm / scale,
    window: judged.window,
    frames: inWindow(clip.response, judged.window).displacementMm.filter(Number.isFinite).length,
    lostFrames: judged.lostFrames,
    verdict: refused ? 'failed' : judged.verdict,
    sentence: reason ?? judged.sentence,
    leftover: judged.leftover,
    jointFit: judged.jointFit,
    transient: judged.transient,
    harmonics: judged.harmonics,
    budget: (response.amplitudeBudget?.entries ?? []).map(({ source, u, common }) => ({ source, u, common })),
    codecLimited: response.codecLimited,
    warnings: [
      ...judged.warnings,
      ...(refused ? [] : response.warnings.map((warning) => warning.sentence)),
      ...frequencyWarnings(clip, spec, judged),
      ...smearWarnings(clip, judged, scale),
      ...shakeWarnings(clip),
    ],
    error: reason,
  };
}
