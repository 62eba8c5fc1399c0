import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { dirname, join } from 'node:path';
import { CancelledError, InputError } from '../../src/errors.ts';
import type { Bench } from '../shared/bench.ts';
import { callOperation } from '../shared/call-operation.ts';
import { toFailure } from '../shared/engine-protocol.ts';
import { fileStem } from '../shared/new-test-file.ts';
import { pageFile } from '../shared/page-files.ts';
import { answer, answerJson, answerText } from './answer.ts';
import { streamEvents } from './event-stream.ts';
import { Presence } from './presence.ts';
import { BodyTooLarge, readBody } from './request-body.ts';
import { RateLimit, refuseForeign } from './request-guard.ts';
import { SessionKey } from './session-key.ts';
import { takeUpload } from './upload.ts';

const LARGEST_CALL_BYTES = 16 * 1024 * 1024;
const MOST_EVENT_STREAMS = 8;
const LONGEST_LEFT_UNREAD_BYTES = 256 * 1024 * 1024;

/** What the loopback host serves, and how it ends. */
export interface LoopbackParts {
  readonly bench: Bench;
  /** The built page. */
  readonly pageFolder: string;
  /** Where clips go that are dropped while no test is open. */
  readonly testsFolder: string;
  /** Called when the page has gone for good. */
  readonly onGone: () => void;
  /** How long a page may take to come back, ms. */
  readonly graceMs?: number;
  /** 0 takes any free port. */
  readonly port?: number;
  /** Told of the program's own faults. */
  readonly onFault?: (error: unknown) => void;
}

/** The bench served at 127.0.0.1 to one browser that knows the one-time token. */
export class LoopbackServer {
  readonly #parts: LoopbackParts;
  readonly #server: Server;
  readonly #key = new SessionKey();
  readonly #limit = new RateLimit();
  readonly #presence: Presence;
  #streams = 0;
  #host = '';

  constructor(parts: LoopbackParts) {
    this.#parts = parts;
    this.#presence = new Presence(parts.graceMs ?? 5000, parts.onGone);
    this.#server = createServer((request, response) => {
      this.#serve(request, response).catch((error: unknown) => {
        parts.onFault?.(error);
        answerText(response, 500, 'Dwellbook met a fault of its own.');
      });
    });
    this.#server.headersTimeout = 10_000;
    this.#server.requestTimeout = 0; // a large clip may take long to copy
    this.#server.maxHeadersCount = 60;
  }

  /** Starts to listen; gives the address to open, which works once. */
  async listen(): Promise<string> {
    await new Promise<void>((resolve, reject) => {
      this.#server.once('error', reject);
      this.#server.listen(this.#parts.port ?? 0, '127.0.0.1', resolve);
    });
    const address = this.#server.address();
    if (address === null || typeof address === 'string') throw new Error('the server has no port');
    this.#host = `127.0.0.1:${address.port}`;
    return `http://${this.#host}/open?token=${this.#key.token}`;
  }

  /** Stops to listen and ends every connection. */
  async close(): Promise<void> {
    this.#presence.stop();
    const closed = new Promise<void>((resolve) => this.#server.close(() => resolve()));
    this.#server.closeAllConnections();
    await closed;
  }

  async #serve(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const refusal = refuseForeign(request, this.#host);
    if (refusal) return answerText(response, refusal.status, refusal.reason);
    if (!this.#limit.take()) return answerText(response, 429, 'Too many requests at once.');
    const url = new URL(request.url ?? '/', `http://${this.#host}`);
    if (url.pathname === '/open') return this.#open(url, request, response);
    if (!this.#key.isHeld(request.headers.cookie))
      return answerText(response, 401, 'Open the address that Dwellbook printed when it was started.');
    if (request.method === 'POST' && url.pathname.startsWith('/op/'))
      return this.#call(url.pathname.slice('/op/'.length), request, response);
    if (request.method === 'POST' && url.pathname === '/upload') return this.#upload(url, request, response);
    if (request.method === 'POST') return answerText(response, 404, 'There is nothing to post to here.');
    if (url.pathname === '/events') return this.#events(response);
    const file = await pageFile(this.#parts.pageFolder, url.pathname);
    if (!file) return answerText(response, 404, 'There is no such page.');
    answer(response, 200, file.type, file.body);
  }

  #open(url: URL, request: IncomingMessage, response: ServerResponse): void {
    const isHeld = this.#key.isHeld(request.headers.cookie);
    const outcome = isHeld ? 'accepted' : this.#key.tryToken(url.searchParams.get('token') ?? '');
    const told = {
      accepted: '',
      used: 'This address was opened once already, which is all it is good for. Start Dwellbook again for a new one.',
      wrong: 'This is not the address that Dwellbook printed.',
      locked: 'Too many wrong addresses were tried. Start Dwellbook again for a new one.',
    };
    const cookie = isHeld ? {} : { 'Set-Cookie': this.#key.setCookie() };
    if (outcome === 'accepted') answer(response, 303, 'text/plain', '', { Location: '/', ...cookie });
    else answerText(response, 403, told[outcome]);
  }

  async #call(name: string, request: IncomingMessage, response: ServerResponse): Promise<void> {
    if (!request.headers['content-type']?.startsWith('application/json'))
      return answerText(response, 415, 'Calls are made in JSON.');
    let input: unknown;
    try {
      input = JSON.parse(await readBody(request, LARGEST_CALL_BYTES));
    } catch (error) {
      if (error instanceof BodyTooLarge) {
        answerText(response, 413, 'The call is too large.');
        request.destroy();
        return;
      }
      return answerText(response, 400, 'The call is no JSON.');
    }
    const { bench, onFault = () => undefined } = this.#parts;
    const outcome = await callOperation(bench.handlers, name, input, onFault);
    if (!outcome.ok && outcome.failure.name === 'CancelledError')
      return answer(response, 204, 'text/plain', '');
    if (!outcome.ok) {
      const status = { refused: 400, failed: 422, fault: 500 }[outcome.kind];
      return answerJson(response, status, outcome.failure);
    }
    if (outcome.output instanceof Uint8Array)
      return answer(response, 200, 'application/octet-stream', outcome.output);
    answerJson(response, 200, outcome.output);
  }

  async #upload(url: URL, request: IncomingMessage, response: ServerResponse): Promise<void> {
    const open = this.#parts.bench.session?.file.path;
    const folderName = fileStem(url.searchParams.get('folder') ?? 'New test');
    const folder = open ? dirname(open) : join(this.#parts.testsFolder, folderName);
    try {
      const path = await takeUpload(request, url.searchParams.get('name') ?? '', join(folder, 'clips'));
      answerJson(response, 200, { path });
    } catch (error) {
      if (!(error instanceof InputError) && !(error instanceof CancelledError)) throw error;
      answerJson(response, 422, toFailure(error));
      leaveUnread(request);
    }
  }

  #events(response: ServerResponse): void {
    if (this.#streams >= MOST_EVENT_STREAMS) {
      answerText(response, 429, 'Too many windows of this bench are open.');
      return;
    }
    this.#streams++;
    const leave = this.#presence.arrive();
    streamEvents(this.#parts.bench, response, () => {
      this.#streams--;
      leave();
    });
  }
}

/** Lets the rest of a refused body pass, so that its sender can read the answer; a very long one is cut off. */
function leaveUnread(request: IncomingMessage): void {
  let bytes = 0;
  request.on('data', (chunk: Buffer) => {
    bytes += chunk.length;
    if (bytes > LONGEST_LEFT_UNREAD_BYTES) request.destroy();
  });
  request.on('error', () => undefined);
  request.resume();
}
