import type { CameraKnowledge } from '../plan/camera-advice.ts';
import type { PlanInput } from '../plan/plan.ts';
import type { PlanFit, PlanPoint } from '../plan/plan-points.ts';
import type { DampingGuess, FrequencySource } from '../plan/starting-knowledge.ts';
import { fitResonance } from '../resonance/resonance-fit.ts';
import type { ResonanceFit } from '../resonance/resonance-fit-types.ts';
import type { Configuration, PlanningSpec, TestFile } from '../testfile/schema.ts';
import { fitOptions, fitPoints } from './fit-configuration.ts';
import type { DwellResult, RingDownResult } from './results.ts';

const FITTED = ['staticGain', 'naturalHz', 'damping'] as const;

/** The first guess of the natural frequency, from the best that is known: a ring-down, a timed period, k and m, a stated value. */
function start(
  configuration: Configuration,
  planning: PlanningSpec,
  ringdowns: readonly RingDownResult[],
): FrequencySource | null {
  const measured = ringdowns.find((each) => each.error === null && each.naturalHz.value !== null);
  if (measured)
    return { kind: 'ring-down', naturalHz: measured.naturalHz, dampingRatio: measured.dampingRatio };
  const { timed, stiffness, naturalHz, naturalHzU } = planning;
  if (timed) {
    return {
      kind: 'timed-period',
      cycles: timed.cycles,
      timeS: timed.seconds,
      ...(timed.secondsU === undefined ? {} : { uTimeS: timed.secondsU }),
    };
  }
  const { movingMass, movingMassU } = configuration;
  if (stiffness !== undefined && movingMass !== undefined) {
    return {
      kind: 'stiffness-mass',
      stiffnessNPerM: stiffness,
      massKg: movingMass,
      ...(movingMassU === undefined ? {} : { uMassKg: movingMassU }),
    };
  }
  return naturalHz === undefined
    ? null
    : { kind: 'stated', naturalHz, ...(naturalHzU === undefined ? {} : { uHz: naturalHzU }) };
}

function damping({ dampingRatio, dampingRatioRange: range }: PlanningSpec): DampingGuess | null {
  if (dampingRatio === undefined) return null;
  return range ? { ratio: dampingRatio, low: range[0], high: range[1] } : { ratio: dampingRatio };
}

function points(dwells: readonly DwellResult[]): PlanPoint[] {
  return dwells.flatMap((dwell): PlanPoint[] => {
    const driveHz = dwell.driveHz ?? dwell.frequency.value;
    const { value } = dwell.amplitude;
    if (driveHz === null || value === null || dwell.error !== null || dwell.excluded !== null) return [];
    return [
      {
        driveHz,
        amplitudeMm: value,
        uAmplitudeMm: dwell.independentU ?? dwell.amplitude.u,
        lagDeg: dwell.lag.value,
        uLagDeg: dwell.lag.u,
      },
    ];
  });
}

/** Mean drive amplitude of the dwells, mm: turns a gain into a swing. */
function driveMm(dwells: readonly DwellResult[]): number | null {
  const known = dwells.flatMap((dwell) => dwell.driveAmplitude.value ?? []);
  return known.length > 0 ? known.reduce((sum, each) => sum + each, 0) / known.length : null;
}

/** A fit in millimetres as planning needs it; null where there is none, or no way to millimetres. */
function planFit(fit: ResonanceFit, dwells: readonly DwellResult[]): PlanFit | null {
  const at = FITTED.map((name) => fit.parameterNames.indexOf(name));
  const { covariance } = fit;
  const toMm = fit.amplitudeUnit === 'mm' ? 1 : driveMm(dwells);
  const [gain, naturalHz, damping] = at.map((index) => fit.parameters[index]?.value ?? null);
  if (
    fit.missing !== null ||
    covariance === null ||
    toMm === null ||
    gain == null ||
    naturalHz == null ||
    damping == null
  )
    return null;
  const factors = [toMm, 1, fit.model.damping === 'structural' ? 0.5 : 1];
  const n = fit.parameterNames.length;
  return {
    gainMm: gain * toMm,
    naturalHz,
    dampingRatio: damping * (factors[2] ?? 1),
    covariance: at.flatMap((row, i) =>
      at.map((column, j) => (covariance[row * n + column] ?? 0) * (factors[i] ?? 1) * (factors[j] ?? 1)),
    ),
  };
}

function camera(test: TestFile, planning: PlanningSpec): CameraKnowledge {
  const scale = test.setups.find((setup) => setup.scale)?.scale;
  const pxPerMm =
    scale && scale.length > 0
      ? Math.hypot(scale.to[0] - scale.from[0], scale.to[1] - scale.from[1]) / scale.length
      : 0;
  return {
    ...(planning.frameRate === undefined ? {} : { frameRateHz: planning.frameRate }),
    ...(planning.frameWidth === undefined ? {} : { frameLengthPx: planning.frameWidth }),
    ...(planning.exposure === undefined ? {} : { exposureS: planning.exposure }),
    ...(pxPerMm > 0 ? { pxPerMm } : {}),
  };
}

/** Drive frequencies written into the run sheet by hand that are not measured yet; null where there are none. */
function plannedHz(configuration: Configuration, dwells: readonly DwellResult[]): number[] | null {
  const done = new Set(dwells.filter((dwell) => dwell.amplitude.value !== null).map((dwell) => dwell.id));
  const open = configuration.dwells.flatMap((dwell) =>
    done.has(dwell.id) || dwell.driveHz === undefined ? [] : dwell.driveHz,
  );
  return open.length > 0 ? open : null;
}

/** What the plan of a configuration is made from: the test file's planning section, and the dwells and ring-downs so far. */
export function planInput(
  test: TestFile,
  configuration: Configuration,
  dwells: readonly DwellResult[],
  ringdowns: readonly RingDownResult[],
): PlanInput {
  const planning: PlanningSpec = test.plan ?? {};
  const known = points(dwells);
  const given = fitPoints(configuration, dwells);
  const fit =
    known.length >= 3
      ? planFit(fitResonance(given.points, { ...fitOptions(configuration, given), intervals: false }), dwells)
      : null;
  return {
    model: { excitation: configuration.excitation, damping: configuration.damping ?? 'viscous' },
    start: start(configuration, planning, ringdowns),
    damping: damping(planning),
    gainMm: planning.staticDeflection === undefined ? null : { value: planning.staticDeflection, u: null },
    points: known,
    fit,
    plannedHz: plannedHz(configuration, dwells),
    travelLimitMm: configuration.travelLimit ?? null,
    resolutionHz: planning.resolutionHz ?? null,
    observed: known.some((point) => point.lagDeg != null) ? 'amplitude-and-lag' : 'amplitude',
    camera: camera(test, planning),
    situations: planning.situations ?? [],
    ...(planning.dwells === undefined ? {} : { dwells: planning.dwells }),
    ...(planning.leftover === undefined ? {} : { leftover: planning.leftover }),
    ...(planning.amplitudeRelativeU === undefined ? {} : { amplitudeRelativeU: planning.amplitudeRelativeU }),
  };
}
