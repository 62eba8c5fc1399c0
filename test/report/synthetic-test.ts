import { dwellFromRest, type Rig, type RigMotion, steadyDwell } from '../../fixtures/render/rig-motion.ts';
import {
  type ClipOutcome,
  type MarkerTrack,
  TRACK_STATE,
  type TrackRole,
} from '../../src/engine/clip-tracks.ts';
import { emptyDwell } from '../../src/engine/dwell-without-clip.ts';
import { fitConfiguration } from '../../src/engine/fit-configuration.ts';
import type { Measurement } from '../../src/engine/measure-test.ts';
import { PROGRAM } from '../../src/engine/program.ts';
import {
  type BudgetLine,
  type DwellResult,
  RESULTS_FORMAT,
  RESULTS_VERSION,
} from '../../src/engine/results.ts';
import { type SeededRandom, seededRandom } from '../../src/numeric/seeded-random.ts';
import { type Configuration, type DwellSpec, type TestFile, testSchema } from '../../src/testfile/schema.ts';

/** One configuration of a made-up test. */
export interface SyntheticConfiguration {
  readonly id: string;
  readonly label?: string;
  readonly rig: Rig;
  readonly driveHz: readonly number[];
  readonly movingMass?: number;
  readonly setting?: number;
}

/** How the made-up test is filmed. */
export interface SyntheticFilming {
  readonly drive?: boolean;
  readonly secondsPerClip?: number;
  /** Anything of the test file to put in the place of what is made here. */
  readonly overrides?: Record<string, unknown>;
}

const FPS = 60;
const MM_PER_PX = 0.35;
const DRIVE_MM = 1.2;
const NOISE_PX = 0.03;
const PLACE: Readonly<Record<string, readonly [number, number]>> = {
  response: [640, 400],
  drive: [300, 420],
  ground: [1100, 200],
};

function track(
  role: TrackRole,
  alongMm: (timeS: number) => number,
  timesS: Float64Array,
  random: SeededRandom,
): MarkerTrack {
  const [x, y] = PLACE[role] ?? [0, 0];
  const n = timesS.length;
  return {
    id: role,
    role,
    xPx: timesS.map((timeS) => x + alongMm(timeS) / MM_PER_PX + NOISE_PX * random.normal()),
    yPx: timesS.map(() => y + NOISE_PX * random.normal()),
    score: new Float64Array(n).fill(0.98),
    state: new Uint8Array(n).fill(TRACK_STATE.ok),
    medianUPx: NOISE_PX,
    patchPx: 40,
    saturatedFraction: 0,
    error: null,
  };
}

function tracked(
  clip: string,
  motion: RigMotion,
  seconds: number,
  withDrive: boolean,
  seed: number,
): ClipOutcome {
  const random = seededRandom(seed);
  const n = Math.round(seconds * FPS);
  const timesS = Float64Array.from({ length: n }, (_, i) => i / FPS);
  return {
    clip,
    frameIndex: Int32Array.from({ length: n }, (_, i) => i),
    timesS,
    markers: [
      track('response', motion.response, timesS, random),
      ...(withDrive ? [track('drive', motion.drive, timesS, random)] : []),
      track('ground', () => 0, timesS, random),
    ],
    facts: {
      frameCount: n,
      durationS: seconds,
      codec: 'h264',
      displayedWidth: 1280,
      displayedHeight: 720,
      rotationDeg: 0,
      pixelAspect: 1,
      frameRate: FPS,
      fileFrameRate: FPS,
      captureFps: null,
      tickS: 1 / 90_000,
      jitterRmsS: 1e-5,
      undecodedFrames: 0,
      sha256: seed.toString(16).padStart(64, '0'),
      fileBytes: 4_000_000,
    },
    warnings: [],
  };
}

const RELATIVE_U = {
  'scale length': 0.0007,
  'scale clicks': 0.0005,
  codec: 0.001,
  fit: 0.0005,
  'time stamps': 1e-9,
};
const LAG_U_DEG = 0.3;
const K95 = 1.96;

/** What the engine would have found: the exact amplitude and lag with seeded errors of the stated uncertainties. */
function found(
  configuration: Configuration,
  spec: DwellSpec,
  motion: RigMotion,
  seconds: number,
  withDrive: boolean,
  random: SeededRandom,
): DwellResult {
  const { amplitudeMm, lagDeg } = motion.steady ?? { amplitudeMm: 0, lagDeg: 0 };
  const budget = Object.entries(RELATIVE_U).map(
    ([source, share]): BudgetLine => ({ source, u: share * amplitudeMm, common: source.startsWith('scale') }),
  );
  const together = (of: readonly BudgetLine[]) => Math.hypot(...of.map((line) => line.u));
  const own = together(budget.filter((line) => !line.common));
  const amplitude = amplitudeMm + own * random.normal();
  const u = together(budget);
  return {
    ...emptyDwell(configuration, spec),
    frequency: { value: spec.driveHz ?? null, u: 1e-5 },
    amplitude: { value: amplitude, u },
    ...(withDrive
      ? {
          lag: { value: lagDeg + LAG_U_DEG * random.normal(), u: LAG_U_DEG },
          lagU95: K95 * LAG_U_DEG,
          driveAmplitude: { value: DRIVE_MM, u: 0.001 },
          gain: { value: amplitude / DRIVE_MM, u: own / DRIVE_MM },
        }
      : {}),
    amplitudeU95: K95 * u,
    coverageFactor: K95,
    independentU: own,
    window: [0.2, seconds - 0.3],
    frames: Math.round((seconds - 0.5) * FPS),
    verdict: 'steady',
    sentence: 'Steady.',
    budget,
  };
}

/**
 * A test with its measurement: marker tracks made from the exact solution with seeded noise, and results as the engine
 * would give them, without judging any motion; no clip exists. Every seventh record starts from rest.
 */
export function syntheticTest(
  configurations: readonly SyntheticConfiguration[],
  { drive = true, secondsPerClip = 10, overrides = {} }: SyntheticFilming = {},
): { test: TestFile; measurement: Measurement } {
  const outcomes = new Map<string, ClipOutcome>();
  const motions = new Map<string, RigMotion>();
  const clips: unknown[] = [];
  const specs = configurations.map(({ rig, driveHz, ...rest }) => ({
    ...rest,
    excitation: 'spring-end',
    dwells: driveHz.map((hz) => {
      const number = clips.length + 1;
      const id = `c${number}`;
      clips.push({ id, file: `clips/${rest.id}_${hz}Hz.mp4`, setup: 'tripod', exposure: 0.004 });
      const motion =
        number % 7 === 0 ? dwellFromRest(rig, hz, DRIVE_MM, 0, 0.3) : steadyDwell(rig, hz, DRIVE_MM, number);
      motions.set(id, motion);
      outcomes.set(id, tracked(id, motion, secondsPerClip, drive, number));
      return { id: `d${number}`, driveHz: hz, clip: id };
    }),
  }));
  const marker = (role: string) => ({ id: role, role, at: PLACE[role] });
  const test = testSchema.parse({
    format: 'dwellbook-test',
    version: 1,
    title: 'Synthetic test',
    setups: [
      {
        id: 'tripod',
        scale: { from: [200, 640], to: [200 + 300 / MM_PER_PX, 640], length: 300, lengthU: 0.2, clickU: 0.3 },
        motionAxis: 'auto',
        markers: [marker('response'), ...(drive ? [marker('drive')] : []), marker('ground')],
      },
    ],
    clips,
    configurations: specs,
    ...overrides,
  });
  const random = seededRandom(1);
  const dwells: DwellResult[] = [];
  const resonances = test.configurations.map((configuration) => {
    const own = configuration.dwells.flatMap((spec) => {
      const motion = motions.get(spec.clip ?? '');
      return motion ? [found(configuration, spec, motion, secondsPerClip, drive, random)] : [];
    });
    dwells.push(...own);
    return fitConfiguration(configuration, own);
  });
  const results: Measurement['results'] = {
    format: RESULTS_FORMAT,
    version: RESULTS_VERSION,
    program: PROGRAM,
    test: test.title,
    clips: test.clips.map((clip, k) => ({
      id: clip.id,
      file: clip.file,
      frames: Math.round(secondsPerClip * FPS),
      duration: secondsPerClip,
      codec: 'h264',
      width: 1280,
      height: 720,
      frameRate: FPS,
      sha256: (k + 1).toString(16).padStart(64, '0'),
      markers: [],
      warnings: [],
      error: null,
    })),
    dwells,
    ringdowns: [],
    resonances,
  };
  return { test, measurement: { results, outcomes, displacements: new Map() } };
}

/** Drive frequencies about a resonance, closer together near it, rounded to the step of a generator. */
export function frequenciesAbout(naturalHz: number, dampingRatio: number, count: number): number[] {
  return Array.from({ length: count }, (_, k) => {
    const place = (2 * k) / (count - 1) - 1;
    return Number((naturalHz * (1 + 9 * dampingRatio * place * Math.abs(place))).toFixed(3));
  });
}

/** Forty dwells in three configurations that differ in the setting. */
export function fortyDwells(overrides: Record<string, unknown> = {}, secondsPerClip = 10) {
  const rig = (naturalHz: number, dampingRatio: number): Rig => ({ naturalHz, dampingRatio, staticGain: 1 });
  return syntheticTest(
    [
      {
        id: 'gap-3',
        label: 'damper gap 3 mm',
        rig: rig(2.847, 0.0652),
        driveHz: frequenciesAbout(2.847, 0.0652, 14),
        movingMass: 1.84,
        setting: 3,
      },
      {
        id: 'gap-4',
        label: 'damper gap 4 mm',
        rig: rig(2.845, 0.05),
        driveHz: frequenciesAbout(2.845, 0.05, 13),
        movingMass: 1.84,
        setting: 4,
      },
      {
        id: 'gap-6',
        label: 'damper gap 6 mm',
        rig: rig(2.841, 0.0381),
        driveHz: frequenciesAbout(2.841, 0.0381, 13),
        movingMass: 1.84,
        setting: 6,
      },
    ],
    { overrides, secondsPerClip },
  );
}
