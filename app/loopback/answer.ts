import type { ServerResponse } from 'node:http';
import { PAGE_HEADERS } from '../shared/content-policy.ts';

/** Sends an answer with the headers every answer has. */
export function answer(
  response: ServerResponse,
  status: number,
  type: string,
  body: string | Uint8Array,
  more: Readonly<Record<string, string>> = {},
): void {
  if (response.headersSent || response.destroyed) return;
  response.writeHead(status, { ...PAGE_HEADERS, 'Content-Type': type, ...more });
  response.end(body);
}

/** Sends one sentence. */
export function answerText(response: ServerResponse, status: number, text: string): void {
  answer(response, status, 'text/plain; charset=utf-8', text);
}

/** Sends data as JSON. */
export function answerJson(response: ServerResponse, status: number, data: unknown): void {
  answer(response, status, 'application/json; charset=utf-8', JSON.stringify(data ?? null));
}
