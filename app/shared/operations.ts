import * as z from 'zod';
import { editSchema } from '../../src/testfile/edit-schema.ts';
import type { SpotJudgement } from '../../src/track/template.ts';
import type { ComparisonAnswer, FolderListing, Intake } from './answers.ts';
import type { ClipView } from './clip-view.ts';
import { preferencesSchema } from './preferences.ts';

/**
 * The one table of what the page can ask of its host. Electron serves it over IPC, the loopback host over HTTP; both
 * check the arguments against the schema here, and refuse what is not in the table.
 */
interface Operation<Input extends z.ZodType, Output> {
  readonly input: Input;
  /** Carries the type of the answer; never set. */
  readonly output?: Output;
}

function operation<Output>() {
  return <Input extends z.ZodType>(input: Input): Operation<Input, Output> => ({ input });
}

const nothing = z.strictObject({});
const path = z.string().min(1).max(4096);
const id = z.string().min(1).max(200);
const pointPx = z.tuple([z.number().finite(), z.number().finite()]);

export const operations = {
  /** Asks for the whole state, which comes through the push channel, patches after it. */
  hello: operation<void>()(nothing),

  newTest: operation<void>()(z.strictObject({ title: z.string().min(1).max(200), folder: path.optional() })),
  openTest: operation<void>()(z.strictObject({ path })),
  openDemo: operation<void>()(nothing),
  closeTest: operation<void>()(nothing),
  saveAs: operation<void>()(z.strictObject({ path })),

  edit: operation<void>()(z.strictObject({ edit: editSchema })),
  undo: operation<void>()(nothing),
  redo: operation<void>()(nothing),

  /** Takes files and folders as they were dropped: a test file is opened, clips are added to the run sheet. */
  takeIn: operation<Intake>()(
    z.strictObject({
      paths: z.array(path).min(1).max(10_000),
      configuration: id.optional(),
      setup: id.optional(),
    }),
  ),
  findClips: operation<{ found: number; left: number }>()(z.strictObject({ folder: path })),

  clip: operation<ClipView>()(z.strictObject({ clip: id })),
  /** One displayed frame, no wider than asked, packed by `frame-bytes.ts`; where `near`, the nearest one at hand. */
  frame: operation<Uint8Array>()(
    z.strictObject({
      clip: id,
      frame: z.int().min(0),
      widthPx: z.int().min(16).max(16384),
      near: z.boolean(),
    }),
  ),
  judgeSpot: operation<SpotJudgement>()(
    z.strictObject({
      clip: id,
      frame: z.int().min(0),
      at: pointPx,
      sizePx: z.number().min(3).max(1024).optional(),
    }),
  ),

  /** Measures what is named, or everything not measured yet; answers when done, cancelled or failed. */
  measure: operation<{ outcome: 'done' | 'cancelled' | 'nothing-to-do' }>()(
    z.strictObject({ clips: z.array(id).max(10_000).optional() }),
  ),
  cancelMeasuring: operation<void>()(nothing),
  /** The motion record of a measured clip, packed by `tracks-bytes.ts`. */
  tracks: operation<Uint8Array>()(z.strictObject({ clip: id })),

  /** The configurations side by side; null before there are results. */
  compare: operation<ComparisonAnswer | null>()(nothing),
  /** The report as one HTML file. */
  report: operation<string>()(nothing),

  /** Folders and openable files of one folder, for the page's own chooser. */
  listFolder: operation<FolderListing>()(z.strictObject({ path: path.optional() })),
  /** Shows the system's dialog; null when it was cancelled. */
  choosePaths: operation<string[] | null>()(
    z.strictObject({ kind: z.enum(['test', 'clips', 'folder', 'save-test']), suggested: path.optional() }),
  ),
  setPreferences: operation<void>()(preferencesSchema.partial().strict()),
  forgetRecent: operation<void>()(z.strictObject({ path })),
} as const;

export type OperationName = keyof typeof operations;
export type InputOf<N extends OperationName> = z.input<(typeof operations)[N]['input']>;
export type ParsedInputOf<N extends OperationName> = z.output<(typeof operations)[N]['input']>;
export type OutputOf<N extends OperationName> =
  (typeof operations)[N] extends Operation<z.ZodType, infer Output> ? Output : never;

/** What a host implements: one function for each entry of the table. */
export type OperationHandlers = {
  readonly [N in OperationName]: (input: ParsedInputOf<N>) => Promise<OutputOf<N>>;
};

/** Whether a text names an operation of the table. */
export function isOperationName(name: string): name is OperationName {
  return Object.hasOwn(operations, name);
}
