const MOST_BYTES = 384 * 1024 * 1024;

/** Pictures of one clip at one size, by frame. */
export class Pictures {
  readonly byFrame = new Map<number, Uint8Array>();
}

/** JPEG pictures kept for a while, the clips looked at last longest. */
export class PictureShelf {
  readonly #clips = new Map<string, Pictures>();
  #bytes = 0;

  /** The pictures of a clip at a size, which becomes the one used last. */
  of(key: string): Pictures {
    const pictures = this.#clips.get(key) ?? new Pictures();
    this.#clips.delete(key);
    this.#clips.set(key, pictures);
    return pictures;
  }

  /** Keeps a picture; makes room by the oldest of the clips used longest ago. */
  keep(pictures: Pictures, frame: number, jpeg: Uint8Array): void {
    this.#bytes += jpeg.length - (pictures.byFrame.get(frame)?.length ?? 0);
    pictures.byFrame.set(frame, jpeg);
    for (const [key, oldest] of this.#clips) {
      for (const [at, bytes] of oldest.byFrame) {
        if (this.#bytes <= MOST_BYTES) return;
        oldest.byFrame.delete(at);
        this.#bytes -= bytes.length;
      }
      if (oldest !== pictures) this.#clips.delete(key);
    }
  }

  clear(): void {
    this.#clips.clear();
    this.#bytes = 0;
  }
}
