import { dwellFromRest, type Rig, type RigMotion, steadyDwell } from '../../fixtures/render/rig-motion.ts';
import {
  type ClipOutcome,
  type MarkerTrack,
  TRACK_STATE,
  type TrackRole,
} from '../../src/engine/clip-tracks.ts';
import { evaluateTest } from '../../src/engine/evaluate-test.ts';
import type { Measurement } from '../../src/engine/measure-test.ts';
import { type SeededRandom, seededRandom } from '../../src/numeric/seeded-random.ts';
import { type TestFile, testSchema } from '../../src/testfile/schema.ts';

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

/**
 * A test with its measurement, evaluated by the engine from marker tracks that are made here from the exact solution
 * with seeded noise; no clip exists. Every seventh dwell starts from rest, so that something is settling.
 */
export function syntheticTest(
  configurations: readonly SyntheticConfiguration[],
  { drive = true, secondsPerClip = 10, overrides = {} }: SyntheticFilming = {},
): { test: TestFile; measurement: Measurement } {
  const outcomes = new Map<string, ClipOutcome>();
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
  return { test, measurement: { ...evaluateTest(test, outcomes), outcomes } };
}

/** Drive frequencies about a resonance, closer together near it, rounded to the step of a generator. */
export function frequenciesAbout(naturalHz: number, dampingRatio: number, count: number): number[] {
  return Array.from({ length: count }, (_, k) => {
    const place = (2 * k) / (count - 1) - 1;
    return Number((naturalHz * (1 + 9 * dampingRatio * place * Math.abs(place))).toFixed(3));
  });
}

/** Forty dwells in three configurations that differ in the setting. */
export function fortyDwells(overrides: Record<string, unknown> = {}) {
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
    { overrides },
  );
}
