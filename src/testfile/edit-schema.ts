import * as z from 'zod';
import { EXCITATIONS, testSchema } from './schema.ts';

/**
 * Edits of a test file, as data: what the window sends, the undo list names and the journal keeps. `null` in a change
 * takes the key away, an absent key leaves it as it is. Units are those of the test file.
 */

const id = z.string().min(1).max(200);
const text = z.string().max(2000);
const finite = z.number().finite();
const pointPx = z.tuple([finite, finite]);
const ids = z.array(id).max(100_000);

const typed = z.object({
  amplitude: finite,
  u: finite.min(0).optional(),
  lag: finite.optional(),
  lagU: finite.min(0).optional(),
  driveAmplitude: finite.optional(),
  driveAmplitudeU: finite.min(0).optional(),
});

const window = z.tuple([finite, finite]);

const newDwell = z.object({
  id,
  driveHz: finite.optional(),
  clip: id.optional(),
  excluded: text.optional(),
  typed: typed.optional(),
});

const newClip = z.object({
  id,
  file: z.string().min(1).max(4096),
  sha256: z.string().max(64).optional(),
  driveHz: finite.optional(),
});

const marker = z.object({
  id,
  role: z.enum(['response', 'drive', 'ground']),
  at: pointPx,
  frame: z.int().min(0).optional(),
  clip: id.optional(),
  size: z.tuple([finite.positive(), finite.positive()]).optional(),
});

const configurationChanges = z.object({
  label: text.nullable().optional(),
  excitation: z.enum(EXCITATIONS).optional(),
  damping: z.enum(['viscous', 'structural']).nullable().optional(),
  movingMass: finite.positive().nullable().optional(),
  movingMassU: finite.min(0).nullable().optional(),
  travelLimit: finite.positive().nullable().optional(),
  setting: finite.nullable().optional(),
});

const scaleChanges = z.object({
  from: pointPx.optional(),
  to: pointPx.optional(),
  length: finite.optional(),
  lengthU: finite.min(0).nullable().optional(),
  clickU: finite.min(0).nullable().optional(),
  cameraToScale: finite.positive().nullable().optional(),
  cameraToMotion: finite.positive().nullable().optional(),
});

/** Shape of an edit: one small change of the test file, as data that can be journalled and undone. */
export const editSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('title'), title: text }),
  z.object({ kind: z.literal('add-configuration'), id, label: text, like: id.optional() }),
  z.object({ kind: z.literal('change-configuration'), id, changes: configurationChanges }),
  z.object({ kind: z.literal('remove-configuration'), id }),
  z.object({
    kind: z.literal('add-dwells'),
    configuration: id,
    dwells: z.array(newDwell).min(1).max(10_000),
    after: id.optional(),
  }),
  z.object({
    kind: z.literal('change-dwells'),
    configuration: id,
    dwells: z
      .array(
        z.object({
          id,
          driveHz: finite.nullable().optional(),
          clip: id.nullable().optional(),
          window: window.nullable().optional(),
          excluded: text.nullable().optional(),
          typed: typed.nullable().optional(),
        }),
      )
      .min(1)
      .max(10_000),
  }),
  z.object({ kind: z.literal('remove-dwells'), configuration: id, ids }),
  z.object({ kind: z.literal('order-dwells'), configuration: id, ids }),
  z.object({
    kind: z.literal('add-clips'),
    configuration: id,
    setup: id,
    clips: z.array(newClip).min(1).max(10_000),
  }),
  z.object({
    kind: z.literal('change-clip'),
    id,
    changes: z.object({
      file: z.string().min(1).max(4096).optional(),
      setup: id.optional(),
      captureFps: finite.positive().nullable().optional(),
      exposure: finite.min(0).nullable().optional(),
      rowReadout: finite.min(0).nullable().optional(),
      sha256: z.string().max(64).nullable().optional(),
    }),
  }),
  z.object({ kind: z.literal('relink-clips'), files: z.array(z.object({ id, file: z.string().min(1) })) }),
  z.object({ kind: z.literal('add-setup'), id }),
  z.object({ kind: z.literal('scale'), setup: id, scale: scaleChanges.nullable() }),
  z.object({
    kind: z.literal('motion-axis'),
    setup: id,
    axis: z.union([z.literal('auto'), z.object({ from: pointPx, to: pointPx })]),
  }),
  z.object({ kind: z.literal('place-marker'), setup: id, marker }),
  z.object({ kind: z.literal('remove-marker'), setup: id, id }),
  z.object({ kind: z.literal('dwell-to-ringdown'), configuration: id, id }),
  z.object({ kind: z.literal('ringdown-to-dwell'), configuration: id, id }),
  z.object({ kind: z.literal('plan'), changes: z.record(z.string().max(60), z.unknown()) }),
  z.object({ kind: z.literal('replace'), label: text, test: testSchema }),
]);

/** One edit of a test file. */
export type Edit = z.infer<typeof editSchema>;
/** The edit of one kind. */
export type EditOf<K extends Edit['kind']> = Extract<Edit, { kind: K }>;
