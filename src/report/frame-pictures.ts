import type { ClipInfo } from '../clip/clip-info.ts';
import { frameImage } from '../clip/frame-image.ts';
import { probeClip } from '../clip/probe.ts';
import { InputError } from '../errors.ts';
import { clipPath } from '../testfile/on-disk.ts';
import type { ClipSpec, Setup, TestFile } from '../testfile/schema.ts';

/** One frame of a camera setup, for the report. */
export interface SetupPicture {
  readonly setup: string;
  readonly clip: string;
  /** Index of the frame in the clip. */
  readonly frame: number;
  readonly jpeg: Uint8Array;
  /** Size as displayed, px: what marker and scale coordinates refer to. */
  readonly displayedWidth: number;
  readonly displayedHeight: number;
}

/** The picture of a setup, or one sentence why there is none. */
export type PictureOutcome = SetupPicture | { readonly setup: string; readonly reason: string };

const WIDEST_PX = 1100; // 160 dots per inch at the width of the page

/** The clip and frame in which the response marker was marked, else the first frame of the setup's first clip. */
function markedFrame(test: TestFile, setup: Setup): { clip: ClipSpec; frame: number } | null {
  const marker = setup.markers.find((each) => each.role === 'response') ?? setup.markers[0];
  const named = test.clips.find((clip) => clip.id === marker?.clip);
  const clip = named ?? test.clips.find((each) => each.setup === setup.id);
  return clip ? { clip, frame: marker?.frame ?? 0 } : null;
}

async function setupPicture(
  test: TestFile,
  setup: Setup,
  testPath: string,
  signal: AbortSignal | undefined,
): Promise<PictureOutcome> {
  const marked = markedFrame(test, setup);
  if (!marked)
    return { setup: setup.id, reason: `Camera setup ${setup.id} has no clip, so there is no picture of it.` };
  const options = signal ? { signal } : {};
  try {
    const info: ClipInfo = await probeClip(clipPath(testPath, marked.clip), options);
    const frame = Math.min(marked.frame, Math.max(0, info.frameCount - 1));
    const image = await frameImage(info, { index: frame }, { ...options, maxWidth: WIDEST_PX });
    return {
      setup: setup.id,
      clip: marked.clip.id,
      frame: image.index,
      jpeg: image.bytes,
      displayedWidth: info.displayedWidth,
      displayedHeight: info.displayedHeight,
    };
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    return { setup: setup.id, reason: `There is no picture of camera setup ${setup.id}: ${error.message}` };
  }
}

/**
 * One frame of each camera setup. A clip that is gone costs its own picture only.
 * @throws CancelledError when stopped
 */
export async function setupPictures(
  test: TestFile,
  testPath: string,
  signal?: AbortSignal,
): Promise<PictureOutcome[]> {
  const pictures: PictureOutcome[] = [];
  for (const setup of test.setups) pictures.push(await setupPicture(test, setup, testPath, signal));
  return pictures;
}
