import { SingleBar } from 'cli-progress';

/** Shows how far the measuring is. */
export interface ProgressView {
  /** A clip is at `frame` of `frameCount` (null where not known). */
  show(clip: string, clipIndex: number, clipCount: number, frame: number, frameCount: number | null): void;
  /** Clears what is shown, so that other lines can follow. */
  end(): void;
}

/** A bar on standard error where that is a terminal; nothing otherwise. */
export function progressBar(stream: NodeJS.WriteStream = process.stderr): ProgressView {
  if (!stream.isTTY) return { show: () => undefined, end: () => undefined };
  const bar = new SingleBar({
    format: '{clip} ({clipNumber}/{clipCount}) {bar} {value}/{total} frames, {eta_formatted} left',
    stream,
    hideCursor: true,
    clearOnComplete: true,
    barsize: 24,
    gracefulExit: false,
  });
  let current = '';
  return {
    show(clip, clipIndex, clipCount, frame, frameCount) {
      const payload = { clip, clipNumber: clipIndex + 1, clipCount };
      if (clip !== current) {
        if (current !== '') bar.stop();
        current = clip;
        bar.start(frameCount ?? 0, frame, payload);
      }
      bar.update(Math.min(frame, frameCount ?? frame), payload);
    },
    end() {
      if (current !== '') bar.stop();
      current = '';
    },
  };
}
