import { circlePlane } from '../resonance/circle-plane.ts';
import { fitCurve } from '../resonance/fit-curve.ts';
import type { ResonanceFit } from '../resonance/resonance-fit-types.ts';
import type { ResonancePoint } from '../resonance/resonance-points.ts';
import type { CircleData } from './charts/circle-chart.ts';
import type { ResponseCurve, ResponseData, ResponseDwell } from './charts/response-data.ts';
import type { ConfigurationView } from './configuration-view.ts';
import type { LengthUnit } from './length-unit.ts';

const EVEN_STEPS = 80;
const PEAK_STEPS = 72;
const PEAK_REACH_RAD = 1.42; // six half-power bandwidths in all, where the curve bends most
const NORMAL_K = 2;

/** Frequencies at which a fitted curve is drawn: evenly over the dwells, and denser about the peak, in rising order. */
export function curveFrequencies(fit: ResonanceFit, driveHz: readonly number[]): Float64Array {
  const { naturalHz, bandwidthHz } = fit.quantities;
  const marks = [fit.quantities.lowerHalfPowerHz.value, fit.quantities.upperHalfPowerHz.value];
  const all = [...driveHz, ...marks.filter((mark) => mark !== null)];
  const [low, high] = [Math.min(...all), Math.max(...all)];
  const even = Array.from({ length: EVEN_STEPS }, (_, k) => low + ((high - low) * k) / (EVEN_STEPS - 1));
  const centre = naturalHz.value ?? 0;
  const halfBandwidth = (bandwidthHz.value ?? 0) / 2;
  // even steps of the angle about the centre of the circle plot, which the bandwidth turns by a right angle
  const dense = Array.from({ length: PEAK_STEPS }, (_, k) => {
    const angle = PEAK_REACH_RAD * ((2 * k) / (PEAK_STEPS - 1) - 1);
    return centre + halfBandwidth * Math.tan(angle);
  }).filter((f) => f > low && f < high);
  return Float64Array.from(new Set([...even, ...dense].filter((f) => f > 0))).sort();
}

function times(values: Float64Array | null, factor: number): Float64Array | null {
  return values?.map((value) => value * factor) ?? null;
}

function responseDwell(view: ConfigurationView, point: ResonancePoint, factor: number): ResponseDwell[] {
  const { amplitude, lagDeg } = point;
  if (amplitude.value === null) return [];
  const dwell = view.dwells.find((each) => each.id === point.id);
  const k = dwell?.coverageFactor ?? NORMAL_K;
  return [
    {
      name: point.id ?? '',
      driveHz: point.driveHz,
      amplitude: amplitude.value * factor,
      amplitudeBar: amplitude.u === null ? null : k * amplitude.u * factor,
      lagDeg: lagDeg?.value ?? null,
      lagBarDeg: dwell?.lagU95 ?? null,
      excluded: Boolean(point.excluded),
    },
  ];
}

function responseCurve(fit: ResonanceFit, driveHz: Float64Array, factor: number): ResponseCurve | null {
  const curve = fitCurve(fit, driveHz);
  const k = fit.coverageFactor ?? NORMAL_K;
  return (
    curve && {
      driveHz,
      amplitude: times(curve.amplitude, factor),
      amplitudeBar: times(curve.amplitudeU, k * factor),
      lagDeg: curve.lagDeg,
      lagBarDeg: times(curve.lagUDeg, k),
    }
  );
}

/** What the response plots of a configuration are drawn from, lengths in the unit shown, gains as they are. */
export function responseData(view: ConfigurationView, unit: LengthUnit): ResponseData {
  const { fit, points } = view;
  const inGain = points.unit === 'gain';
  const factor = inGain ? 1 : unit.perMm;
  const drives = points.points.map((point) => point.driveHz);
  const q = fit?.quantities;
  const [lower, upper, peak] = [q?.lowerHalfPowerHz.value, q?.upperHalfPowerHz.value, q?.peakAmplitude.value];
  return {
    amplitudeTitle: inGain ? 'response over drive' : `amplitude, ${unit.name} (zero to peak)`,
    dwells: points.points.flatMap((point) => responseDwell(view, point, factor)),
    curve: fit ? responseCurve(fit, curveFrequencies(fit, drives), factor) : null,
    naturalHz: q?.naturalHz.value ?? null,
    halfPower:
      lower != null && upper != null && peak != null
        ? { lowerHz: lower, upperHz: upper, amplitude: (peak * factor) / Math.SQRT2 }
        : null,
  };
}

/** Unit of the plane of the circle plot, by what is plotted; `unit` is that of the response, empty for gains. */
const PLANE_UNIT: Readonly<Record<string, (unit: string) => string>> = {
  X: (unit) => unit || '1',
  'i f X': (unit) => `Hz ${unit}`.trim(),
  '−i X / f': (unit) => `${unit || '1'}/Hz`,
  '−i (X − base) / f': (unit) => `${unit || '1'}/Hz`,
  'X / f²': (unit) => `${unit || '1'}/Hz²`,
};

function planeUnit(quantity: string, unit: string): string {
  const of = PLANE_UNIT[quantity];
  if (!of) throw new Error(`no unit for a circle plot of ${quantity}`);
  return of(unit);
}

/** What the circle plot of a configuration is drawn from; null where too few dwells have a lag. */
export function circleData(view: ConfigurationView, unit: LengthUnit): CircleData | null {
  const { fit, circle, points } = view;
  if (!fit || !circle || circle.circle === null) return null;
  const inGain = fit.amplitudeUnit === 'gain';
  const factor = inGain ? 1 : unit.perMm;
  const frequencies = curveFrequencies(
    fit,
    points.points.map((point) => point.driveHz),
  );
  const curve = fitCurve(fit, frequencies);
  const along = [...frequencies].map((driveHz, i) => ({
    driveHz,
    amplitude: { value: curve?.amplitude?.[i] ?? null, u: null },
    lagDeg: { value: curve?.lagDeg[i] ?? null, u: null },
  }));
  const base = inGain ? 1 : (fit.quantities.staticGain.value ?? 1);
  const line = circlePlane(along, fit.model, base);
  const pointsOf = (x: Float64Array, y: Float64Array) =>
    [...x].map((value, i) => ({ x: value * factor, y: (y[i] ?? Number.NaN) * factor }));
  return {
    quantity: `${circle.plane.quantity}, ${planeUnit(circle.plane.quantity, inGain ? '' : unit.name)}`,
    dwells: pointsOf(circle.plane.x, circle.plane.y),
    curve: pointsOf(line.x, line.y),
    circle: {
      x: circle.circle.centreX * factor,
      y: circle.circle.centreY * factor,
      radius: circle.circle.radius * factor,
    },
  };
}
