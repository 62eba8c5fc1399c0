import { stat } from 'node:fs/promises';
import type { ClipInfo } from '../../src/clip/clip-info.ts';
import { type Ffmpeg, findFfmpeg } from '../../src/clip/find-ffmpeg.ts';
import { probeClip } from '../../src/clip/probe.ts';
import type { ClipView } from './clip-view.ts';

const MOST_CLIPS = 200;

/** Clips looked into once each, as long as their files stay what they are. */
export class ClipReader {
  readonly #known = new Map<string, { stamp: string; info: ClipInfo }>();
  #ffmpeg: Promise<Ffmpeg> | null = null;

  /** The ffmpeg in use, looked for once. */
  ffmpeg(): Promise<Ffmpeg> {
    this.#ffmpeg ??= findFfmpeg().catch((error: unknown) => {
      this.#ffmpeg = null; // it may be installed meanwhile
      throw error;
    });
    return this.#ffmpeg;
  }

  /** What a clip is. Throws InputError where it is none. */
  async info(path: string, signal: AbortSignal): Promise<ClipInfo> {
    const facts = await stat(path).catch(() => null);
    const stamp = `${facts?.size} ${facts?.mtimeMs}`;
    const known = this.#known.get(path);
    if (known?.stamp === stamp) return known.info;
    const info = await probeClip(path, { ffmpeg: await this.ffmpeg(), signal });
    this.#known.delete(path);
    this.#known.set(path, { stamp, info });
    const [oldest] = this.#known.keys();
    if (this.#known.size > MOST_CLIPS && oldest !== undefined) this.#known.delete(oldest);
    return info;
  }
}

/** What the page needs to know of a clip. */
export function clipView(info: ClipInfo): Omit<ClipView, 'id'> {
  return {
    frameCount: info.frameCount,
    timesS: Array.from(info.timesS),
    width: info.displayedWidth,
    height: info.displayedHeight,
    codec: info.codec,
    frameRate: info.measuredFps,
    captureFps: info.captureFps,
    warnings: info.warnings,
  };
}
