import type { IncomingMessage } from 'node:http';

const CALLS_PER_S = 400; // a hand scrubbing asks for some 60 frames a second
const BURST = 800;

/** Why a request is turned away. */
export interface Refusal {
  readonly status: number;
  readonly reason: string;
}

/**
 * Whether a request comes from our own page at our own address. A name that resolves to this machine (rebinding), a
 * request sent by another site's page, and one without an origin where browsers send it, are turned away.
 * @param host what the Host header must be, `127.0.0.1:PORT`
 */
export function refuseForeign(request: IncomingMessage, host: string): Refusal | null {
  const { headers, method } = request;
  if (headers.host !== host) return { status: 421, reason: 'This address is not served here.' };
  if (method !== 'GET' && method !== 'POST') return { status: 405, reason: 'Only GET and POST.' };
  const { origin } = headers;
  if (origin !== undefined && origin !== `http://${host}`)
    return { status: 403, reason: 'Requests of other sites are not answered.' };
  if (method === 'POST' && origin === undefined)
    return { status: 403, reason: 'A request that changes something must say where it comes from.' };
  const site = headers['sec-fetch-site'];
  if (site !== undefined && site !== 'same-origin' && site !== 'none')
    return { status: 403, reason: 'Requests of other sites are not answered.' };
  return null;
}

/** Lets so many calls a second pass, with a burst above it. */
export class RateLimit {
  readonly #now: () => number;
  #left = BURST;
  #at: number;

  constructor(now: () => number = performance.now.bind(performance)) {
    this.#now = now;
    this.#at = now();
  }

  /** Whether one more call may pass now. */
  take(): boolean {
    const now = this.#now();
    this.#left = Math.min(BURST, this.#left + ((now - this.#at) / 1000) * CALLS_PER_S);
    this.#at = now;
    if (this.#left < 1) return false;
    this.#left -= 1;
    return true;
  }
}
