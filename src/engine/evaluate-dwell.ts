import type { BudgetEntry } from '../camera/amplitude-budget.ts';
import { type CorrectedDwell, correctDwell } from '../camera/correct-dwell.ts';
import { geometryLines } from '../camera/geometry-lines.ts';
import { type Measured, measured, NOT_MEASURED } from '../numeric/measured.ts';
import { lagDegrees } from '../sine/lag.ts';
import type { Configuration, DwellSpec } from '../testfile/schema.ts';
import { inWindow, type SeenSine, sineInWindow } from './dwell-at-frequency.ts';
import {
  elsewhere,
  floorWarnings,
  frequencyWarnings,
  shakeWarnings,
  smearWarnings,
} from './dwell-cautions.ts';
import { emptyDwell, failedDwell } from './dwell-without-clip.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import { filmingFacts, floorOf, mmPerPx, rowFacts, stillAmplitudePx } from './filming-of-dwell.ts';
import { type JudgedDwell, judgeClipDwell } from './judge-clip-dwell.ts';
import type { DwellResult } from './results.ts';

const DEG_PER_RAD = 180 / Math.PI;

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
  const frames = inWindow(clip.response, judged.window).displacementMm.filter(Number.isFinite).length;
  const floor = floorOf(clip, judged.window, judged.frequencyHz, frames);
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
    noiseFloor: floor?.detectable ?? null,
    frames,
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
      ...floorWarnings(judged, floor),
      ...shakeWarnings(clip),
    ],
    error: reason,
  };
}
