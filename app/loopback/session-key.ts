import { randomBytes, timingSafeEqual } from 'node:crypto';

const COOKIE = 'dwellbook_session';
const MOST_WRONG_TOKENS = 20;

/** How trying a token ended. */
export type TokenOutcome = 'accepted' | 'used' | 'wrong' | 'locked';

/** The one-time token of the printed address, and the session cookie it is exchanged for. */
export class SessionKey {
  /** For the address printed; worth something once. */
  readonly token = randomBytes(24).toString('base64url');
  readonly #secret = randomBytes(32).toString('base64url');
  #used = false;
  #wrong = 0;

  /** Tries a token; after many wrong ones none is taken any more. */
  tryToken(token: string): TokenOutcome {
    if (this.#wrong >= MOST_WRONG_TOKENS) return 'locked';
    if (!same(token, this.token)) {
      this.#wrong++;
      return 'wrong';
    }
    if (this.#used) return 'used';
    this.#used = true;
    return 'accepted';
  }

  /** The header that gives the cookie: this site only, out of reach of scripts, gone with the browser. */
  setCookie(): string {
    return `${COOKIE}=${this.#secret}; HttpOnly; SameSite=Strict; Path=/`;
  }

  /** Whether a Cookie header holds the session. */
  isHeld(cookieHeader: string | undefined): boolean {
    for (const part of (cookieHeader ?? '').split(';')) {
      const at = part.indexOf('=');
      if (at > 0 && part.slice(0, at).trim() === COOKIE && same(part.slice(at + 1).trim(), this.#secret))
        return true;
    }
    return false;
  }
}

function same(a: string, b: string): boolean {
  const [left, right] = [Buffer.from(a), Buffer.from(b)];
  return left.length === right.length && timingSafeEqual(left, right);
}
