import type { IncomingMessage } from 'node:http';

/** The body of a request is larger than is taken. */
export class BodyTooLarge extends Error {
  override readonly name = 'BodyTooLarge';
}

/**
 * The body of a request as text.
 * @throws BodyTooLarge beyond the limit, without reading on
 */
export async function readBody(request: IncomingMessage, limitBytes: number): Promise<string> {
  const chunks: Buffer[] = [];
  let bytes = 0;
  for await (const chunk of request as AsyncIterable<Buffer>) {
    bytes += chunk.length;
    if (bytes > limitBytes) throw new BodyTooLarge(`more than ${limitBytes} bytes`);
    chunks.push(chunk);
  }
  return Buffer.concat(chunks).toString('utf8');
}
