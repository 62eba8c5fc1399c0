/** Longest line kept, characters: a flood without line ends must not fill the memory. */
const MAX_LINE_LENGTH = 2000;

/** Splits a stream of text into lines as it comes and keeps only the last few. */
export class LineTail {
  readonly #kept: string[] = [];
  readonly #maxLines: number;
  readonly #onLine: (line: string) => void;
  readonly #decoder = new TextDecoder();
  #unfinished = '';

  /** Keeps at most `maxLines` lines; `onLine` sees every line that is not blank. */
  constructor(maxLines: number, onLine: (line: string) => void = () => {}) {
    this.#maxLines = maxLines;
    this.#onLine = onLine;
  }

  /** Takes the next piece of the stream, as bytes in UTF-8. */
  push(chunk: Uint8Array): void {
    const lines = (this.#unfinished + this.#decoder.decode(chunk, { stream: true })).split(/\r\n|\n|\r/);
    this.#unfinished = (lines.pop() ?? '').slice(0, MAX_LINE_LENGTH);
    for (const line of lines) this.#take(line);
  }

  /** The last lines, oldest first, the unfinished one included once the stream has ended. */
  end(): readonly string[] {
    this.#take(this.#unfinished);
    this.#unfinished = '';
    return this.#kept;
  }

  #take(line: string): void {
    const text = line.slice(0, MAX_LINE_LENGTH).trimEnd();
    if (text === '') return;
    this.#kept.push(text);
    if (this.#kept.length > this.#maxLines) this.#kept.shift();
    this.#onLine(text);
  }
}
