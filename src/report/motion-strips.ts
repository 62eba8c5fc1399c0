import { inWindow, sineInWindow } from '../engine/dwell-at-frequency.ts';
import type { EvaluatedClips } from '../engine/evaluate-clips.ts';
import type { DwellResult } from '../engine/results.ts';
import type { CycleData } from './charts/cycle-chart.ts';
import type { MotionStripData } from './charts/motion-strip.ts';
import { inUnit, type LengthUnit } from './length-unit.ts';

/** The motion of one dwell: its record with the window, and one cycle with the fitted sine. */
export interface DwellMotion {
  readonly dwell: DwellResult;
  readonly strip: MotionStripData;
  /** null where no sine could be fitted in the window. */
  readonly cycle: CycleData | null;
}

const BESIDE_WINDOW = 0.6; // of the window's length, shown before and after it where the clip is longer

/**
 * The record of a dwell's clip with what was measured in it; null where the clip was not followed or nothing moves.
 * Of a clip with several dwells the part about the dwell's window is shown.
 */
export function dwellMotion(
  dwell: DwellResult,
  evaluated: EvaluatedClips,
  unit: LengthUnit,
): DwellMotion | null {
  const clip = dwell.clip === null ? undefined : evaluated.clips.get(dwell.clip);
  if (!clip) return null;
  const { response } = clip;
  const { window } = dwell;
  const beside = window ? BESIDE_WINDOW * (window[1] - window[0]) : 0;
  const shown = window ? inWindow(response, [window[0] - beside, window[1] + beside]) : response;
  return {
    dwell,
    strip: {
      timesS: shown.timesS,
      displacement: shown.displacementMm.map((mm) => mm * unit.perMm),
      window,
      amplitude: inUnit(dwell.amplitude.value, unit),
    },
    cycle: window ? oneCycle(dwell, inWindow(response, window), window, unit) : null,
  };
}

function oneCycle(
  dwell: DwellResult,
  part: ReturnType<typeof inWindow>,
  window: readonly [number, number],
  unit: LengthUnit,
): CycleData | null {
  const frequencyHz = dwell.driveHz ?? dwell.frequency.value;
  if (frequencyHz === null) return null;
  const sine = sineInWindow(part, window, frequencyHz);
  if (!sine) return null;
  const { timesS, displacementMm } = part;
  const cycle = timesS.map((timeS) => (timeS * frequencyHz) % 1);
  let sum = 0;
  let seen = 0;
  for (let i = 0; i < timesS.length; i++) {
    const mm = displacementMm[i] ?? Number.NaN;
    if (!Number.isFinite(mm)) continue;
    sum += mm - sine.amplitude * Math.cos(2 * Math.PI * (cycle[i] ?? 0) + sine.phaseRad);
    seen += 1;
  }
  return {
    cycle,
    displacement: displacementMm.map((mm) => mm * unit.perMm),
    offset: seen > 0 ? (sum / seen) * unit.perMm : 0,
    amplitude: sine.amplitude * unit.perMm,
    phaseRad: sine.phaseRad,
  };
}
