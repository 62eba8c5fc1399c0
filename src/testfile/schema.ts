import * as z from 'zod';

/**
 * The test file (`NAME.dwellbook`): one sine-dwell test of one assembly. Lengths in mm, times in s, frequencies
 * in Hz, masses in kg, angles in degrees, pixels as displayed (after rotation metadata; centres at integers).
 * Unknown keys are kept, so that a file written by a newer minor version survives a save by this one.
 * Only shapes and types are checked here; whether ids refer to something is checked by `check-references.ts`,
 * and values that concern one dwell alone (a scale length of 0, a drive frequency of 0) fail that dwell when measured.
 */

/** The format name in a test file. */
export const TEST_FORMAT = 'dwellbook-test';
/** The newest version of the format that this program writes and reads. */
export const TEST_VERSION = 1;

const pointPx = z.tuple([z.number(), z.number()]);
const id = z.string().min(1);

const planePoint = z.looseObject({
  /** Where the point is seen, px. */
  at: pointPx,
  /** Where it is in the plane of motion, mm. */
  mm: z.tuple([z.number(), z.number()]),
});

const scale = z.looseObject({
  from: pointPx,
  to: pointPx,
  /** True distance between the two scale points, mm. */
  length: z.number(),
  /** Standard uncertainty of the length, mm. */
  lengthU: z.number().min(0).optional(),
  /** Standard uncertainty of one click, px. */
  clickU: z.number().min(0).optional(),
  /** Distance from the camera to the rule, mm. */
  cameraToScale: z.number().positive().optional(),
  /** Distance from the camera to the plane of motion, mm. */
  cameraToMotion: z.number().positive().optional(),
  plane: z.array(planePoint).optional(),
});

const marker = z.looseObject({
  id,
  role: z.enum(['response', 'drive', 'ground']),
  at: pointPx,
  /** Frame in which the marker was clicked, counted from 0; 0 where absent. */
  frame: z.int().min(0).optional(),
  /** Clip in which it was clicked; the first clip of the setup where absent. */
  clip: id.optional(),
  /** Width and height of the patch, px; chosen from the picture where absent. */
  size: z.tuple([z.number().positive(), z.number().positive()]).optional(),
});

const setup = z.looseObject({
  id,
  scale: scale.optional(),
  motionAxis: z.union([z.literal('auto'), z.looseObject({ from: pointPx, to: pointPx })]).optional(),
  markers: z.array(marker).default([]),
});

const clip = z.looseObject({
  id,
  file: z.string().min(1),
  setup: id,
  /** True capture rate of a slow-motion clip, frames/s. */
  captureFps: z.number().positive().optional(),
  /** Exposure time of a frame, s. */
  exposure: z.number().min(0).optional(),
  /** Time from reading the first row of the sensor to its last, s. */
  rowReadout: z.number().min(0).optional(),
  /** SHA-256 of the file's content, hexadecimal; finds a moved clip and tells a replaced one. */
  sha256: z.string().optional(),
});

const typed = z.looseObject({
  /** mm, zero-to-peak. */
  amplitude: z.number(),
  u: z.number().min(0).optional(),
  /** degrees. */
  lag: z.number().optional(),
  lagU: z.number().min(0).optional(),
  driveAmplitude: z.number().optional(),
  driveAmplitudeU: z.number().min(0).optional(),
});

/** What an earlier measurement found; written by `measure --save` and by the window, read by `fit` and `plan`. */
const measuredBefore = z.looseObject({
  amplitude: z.number(),
  u: z.number().min(0).nullable(),
  lag: z.number().nullable().optional(),
  lagU: z.number().min(0).nullable().optional(),
  frequency: z.number().nullable().optional(),
  gain: z.number().nullable().optional(),
  gainU: z.number().min(0).nullable().optional(),
  commonRelativeU: z.number().min(0).optional(),
  verdict: z.string().optional(),
  /** Name and version of the program that measured. */
  program: z.string().optional(),
  clipSha256: z.string().optional(),
});

const window = z.tuple([z.number(), z.number()]);

const dwell = z.looseObject({
  id,
  driveHz: z.number().optional(),
  clip: id.optional(),
  window: window.optional(),
  /** Why the dwell is left out of the fit; it is measured and shown all the same. */
  excluded: z.string().optional(),
  /** Whether the dwell was reached by stepping the frequency up or down; tells a bent resonance from a straight one. */
  direction: z.enum(['up', 'down']).optional(),
  typed: typed.optional(),
  measured: measuredBefore.optional(),
});

const sweep = z.looseObject({
  clip: id,
  driveHz: z.array(z.number()).optional(),
});

const ringdown = z.looseObject({
  id,
  clip: id,
  window: window.optional(),
  excluded: z.string().optional(),
  /** What an earlier measurement found. */
  measured: z
    .looseObject({
      naturalHz: z.number().positive(),
      naturalHzU: z.number().min(0).nullable(),
      dampingRatio: z.number(),
      dampingRatioU: z.number().min(0).nullable(),
      clipSha256: z.string().optional(),
    })
    .optional(),
});

/** How a part can be driven. */
export const EXCITATIONS = ['force', 'spring-end', 'base', 'base-relative', 'unbalance'] as const;

const configuration = z.looseObject({
  id,
  label: z.string().optional(),
  excitation: z.enum(EXCITATIONS).default('force'),
  damping: z.enum(['viscous', 'structural']).optional(),
  /** Moving mass, kg. */
  movingMass: z.number().positive().optional(),
  /** Standard uncertainty of the moving mass, kg. */
  movingMassU: z.number().min(0).optional(),
  /** Displacement from rest that must not be passed, mm. */
  travelLimit: z.number().positive().optional(),
  /** The number varied across configurations. */
  setting: z.number().optional(),
  /** How the resonance is fitted; what is absent is chosen from the data. */
  fit: z
    .looseObject({
      quantity: z.enum(['amplitude', 'lag', 'amplitude and lag']).optional(),
      /** Crosstalk: a rigid motion seen with the part's own. */
      rigidOffset: z.boolean().optional(),
      /** What other modes leave in the band. */
      slowResidual: z.boolean().optional(),
      /** Play down outlying dwells (Huber). */
      robust: z.boolean().optional(),
    })
    .optional(),
  dwells: z.array(dwell).default([]),
  sweeps: z.array(sweep).default([]),
  ringdowns: z.array(ringdown).default([]),
});

/** Starting knowledge and wishes for the run sheet; one of the three ways to a natural frequency suffices. */
const planning = z.looseObject({
  naturalHz: z.number().positive().optional(),
  naturalHzU: z.number().min(0).optional(),
  /** A timed free oscillation: so many cycles took so many seconds. */
  timed: z
    .looseObject({
      cycles: z.number().positive(),
      seconds: z.number().positive(),
      secondsU: z.number().min(0).optional(),
    })
    .optional(),
  /** Stiffness, N/m; with the configuration's moving mass it gives the natural frequency. */
  stiffness: z.number().positive().optional(),
  dampingRatio: z.number().positive().optional(),
  /** Range that the damping ratio very likely lies in; a factor of two either way where absent. */
  dampingRatioRange: z.tuple([z.number().positive(), z.number().positive()]).optional(),
  /** What about the rig calls for a caution of its own. */
  situations: z.array(z.enum(['magnets', 'added-masses'])).optional(),
  /** The smallest step of the generator, Hz. */
  resolutionHz: z.number().positive().optional(),
  /** Static deflection, mm: the amplitude well below resonance. */
  staticDeflection: z.number().positive().optional(),
  /** Leftover wanted at the start of filming, as a fraction of the amplitude. */
  leftover: z.number().positive().max(0.5).optional(),
  /** Relative standard uncertainty wanted of the amplitude. */
  amplitudeRelativeU: z.number().positive().optional(),
  frameRate: z.number().positive().optional(),
  frameWidth: z.number().positive().optional(),
  exposure: z.number().positive().optional(),
  dwells: z.int().min(3).max(1000).optional(),
});

/** What stands in the report beside the measurement, in the user's own words; printed as typed, never read as markup. */
const reporting = z.looseObject({
  /** Name at the head of the report, and under it address or other lines; lines are kept. */
  company: z.string().optional(),
  header: z.string().optional(),
  assembly: z.string().optional(),
  operator: z.string().optional(),
  customer: z.string().optional(),
  /** Printed after the results; an empty line begins a new paragraph. */
  remarks: z.string().optional(),
  /** Date of the test as it shall be printed. */
  date: z.string().optional(),
  /** Lengths in inches; file and results stay in mm. */
  inches: z.boolean().optional(),
  /** Paper to print on; A4 where absent. */
  paper: z.enum(['A4', 'Letter']).optional(),
});

/** Shape of a test file. */
export const testSchema = z.looseObject({
  format: z.literal(TEST_FORMAT),
  version: z.literal(TEST_VERSION),
  title: z.string().default('Untitled test'),
  setups: z.array(setup).default([]),
  clips: z.array(clip).default([]),
  configurations: z.array(configuration).default([]),
  plan: planning.optional(),
  report: reporting.optional(),
});

/** A point of the frame as displayed, px. */
export type PointPx = z.infer<typeof pointPx>;
/** A whole test file. */
export type TestFile = z.infer<typeof testSchema>;
/** A fixed camera position. */
export type Setup = TestFile['setups'][number];
/** Scale points and what belongs to them. */
export type Scale = NonNullable<Setup['scale']>;
/** A marked feature. */
export type MarkerSpec = Setup['markers'][number];
/** A video file of the test. */
export type ClipSpec = TestFile['clips'][number];
/** One state of the assembly. */
export type Configuration = TestFile['configurations'][number];
/** A stay at one drive frequency. */
export type DwellSpec = Configuration['dwells'][number];
/** A clip that holds several dwells. */
export type SweepSpec = Configuration['sweeps'][number];
/** A clip of a free decay. */
export type RingDownSpec = Configuration['ringdowns'][number];
/** One of EXCITATIONS. */
export type Excitation = (typeof EXCITATIONS)[number];
/** What stands in the report in the user's own words. */
export type ReportSpec = NonNullable<TestFile['report']>;
/** Starting knowledge and wishes for the run sheet. */
export type PlanningSpec = NonNullable<TestFile['plan']>;
