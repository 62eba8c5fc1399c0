import { judgeAlias, unknownFrequencyWarning } from '../camera/aliasing.ts';
import { judgeShake, stillRmsPx } from '../camera/camera-shake.ts';
import { smearWarning } from '../camera/marker-smear.ts';
import { checkFrequency } from '../camera/slow-motion.ts';
import type { NoiseFloor } from '../motion/noise-floor.ts';
import { fitSine } from '../sine/four-parameter.ts';
import type { DwellSpec } from '../testfile/schema.ts';
import { inWindow } from './dwell-at-frequency.ts';
import type { EvaluatedClip } from './evaluate-clips.ts';
import type { JudgedDwell } from './judge-clip-dwell.ts';

/** Shake of the camera that no ground marker takes out. */
export function shakeWarnings(clip: EvaluatedClip): string[] {
  const { still, groundSubtracted } = clip.motion;
  if (!still) return [];
  const rms = Math.hypot(stillRmsPx(still.x) ?? 0, stillRmsPx(still.y) ?? 0);
  const warning = judgeShake(rms, groundSubtracted);
  return warning ? [warning.sentence] : [];
}

/** A measured frequency that is not the one set, or cannot be told from an alias. */
export function frequencyWarnings(clip: EvaluatedClip, spec: DwellSpec, judged: JudgedDwell): string[] {
  const { value, u } = judged.measuredHz;
  const rate = clip.tracks.facts.frameRate;
  if (value === null || value <= 0 || rate === null) return [];
  if (spec.driveHz === undefined) return [unknownFrequencyWarning(value, rate).sentence];
  const { warning } = checkFrequency(value, u ?? 0, spec.driveHz, rate);
  return warning ? [warning.sentence] : [];
}

const CLEAR_MOTION = 10; // amplitude over its uncertainty from which a motion at another frequency is no accident

/**
 * Why nothing can be fitted at the set frequency: the frame rate folds it onto standstill, or a clear motion at another
 * frequency shows that the clip's time scale is not what it says (slow motion not stated).
 */
export function elsewhere(clip: EvaluatedClip, spec: DwellSpec): string | null {
  const rate = clip.tracks.facts.frameRate;
  if (spec.driveHz === undefined || !(spec.driveHz > 0) || rate === null) return null;
  const alias = judgeAlias(spec.driveHz, rate, clip.tracks.facts.durationS);
  if (alias.kind === 'refused' && alias.warning) return alias.warning.sentence;
  const { timesS, displacementMm } = spec.window ? inWindow(clip.response, spec.window) : clip.response;
  const free = fitSine(timesS, displacementMm);
  if (!free || free.frequencyHz <= 0 || free.amplitude < CLEAR_MOTION * free.amplitudeU) return null;
  return checkFrequency(free.frequencyHz, free.frequencyU ?? 0, spec.driveHz, rate).warning?.sentence ?? null;
}

/** A marker that smears over many pixels in one exposure. */
export function smearWarnings(clip: EvaluatedClip, judged: JudgedDwell, scale: number): string[] {
  const peakSpeedPxPerS = (2 * Math.PI * judged.frequencyHz * judged.amplitudeMm) / scale;
  const warning = smearWarning(peakSpeedPxPerS, clip.spec.exposure ?? null);
  return warning ? [warning.sentence] : [];
}

/** A motion smaller than what could be told from noise in this clip. */
export function floorWarnings(judged: JudgedDwell, floor: NoiseFloor | null): string[] {
  if (floor === null || judged.amplitudeMm >= floor.detectable) return [];
  const text = (mm: number): string => `${mm.toPrecision(2)} mm`;
  return [
    `The motion of ${text(judged.amplitudeMm)} is below what could be told from noise in this clip (${text(floor.detectable)}, from a part at rest); film closer or longer, or drive harder where that is safe.`,
  ];
}
