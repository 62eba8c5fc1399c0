/** Raised when a value continues beyond the bytes at hand; the reader waits for more and begins the item anew. */
export class NeedMoreBytes extends Error {
  override readonly name = 'NeedMoreBytes';
}
const NEED_MORE = new NeedMoreBytes(); // one for all: it carries no news, and a stack trace a chunk would cost time

/** Reads the numbers of the NUT container (its public specification, "Syntax elements") from a piece of bytes. */
export class NutCursor {
  readonly bytes: Uint8Array;
  at: number;

  constructor(bytes: Uint8Array, at = 0) {
    this.bytes = bytes;
    this.at = at;
  }

  /** One byte. */
  byte(): number {
    const value = this.bytes[this.at];
    if (value === undefined) throw NEED_MORE;
    this.at++;
    return value;
  }

  /** `v`: unsigned, seven bits a byte, most significant first, exact up to 2^53. */
  unsigned(): number {
    let value = 0;
    for (;;) {
      const byte = this.byte();
      value = value * 128 + (byte & 127);
      if (byte < 128) return value;
    }
  }

  /** `s`: signed, folded into an unsigned one as 0, 1, -1, 2, -2 ... */
  signed(): number {
    const folded = this.unsigned() + 1;
    return folded % 2 === 1 ? -(folded - 1) / 2 : folded / 2;
  }

  /** Moves on over bytes of no interest. */
  skip(count: number): void {
    if (this.at + count > this.bytes.length) throw NEED_MORE;
    this.at += count;
  }

  /** The next bytes, as a copy. */
  take(count: number): Uint8Array {
    const start = this.at;
    this.skip(count);
    return this.bytes.slice(start, this.at);
  }
}
