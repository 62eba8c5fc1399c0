import { spawn } from 'node:child_process';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { leaveNoOrphan, stopProcess } from '../clip/stop-process.ts';
import { CancelledError, InputError } from '../errors.ts';

/** How to print; everything is optional. */
export interface PrintOptions {
  readonly signal?: AbortSignal;
  /** Give up after this long, s; 120 where absent. */
  readonly limitS?: number;
}

const LIMIT_S = 120; // forty pages take a few seconds; a busy machine ten times that
const KEPT_CHARACTERS = 4000;

/** Arguments for printing a page once, without window, profile, sandbox trouble or any network. */
function printArguments(page: string, pdf: string, profile: string): string[] {
  return [
    '--headless',
    '--disable-gpu',
    '--no-first-run',
    '--no-default-browser-check',
    '--disable-extensions',
    '--disable-sync',
    '--disable-component-update',
    '--disable-background-networking',
    '--host-resolver-rules=MAP * ~NOTFOUND',
    '--no-pdf-header-footer',
    `--user-data-dir=${profile}`,
    `--print-to-pdf=${pdf}`,
    // the sandbox refuses to run as root; the page is our own and runs no script
    ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
    pathToFileURL(page).href,
  ];
}

type End = { readonly how: 'ended' | 'cancelled' | 'too-long' | 'not-started'; readonly said: string };

function runOnce(
  chromium: string,
  args: readonly string[],
  { signal, limitS = LIMIT_S }: PrintOptions,
): Promise<End> {
  return new Promise((resolve) => {
    const child = spawn(chromium, [...args], { stdio: ['ignore', 'ignore', 'pipe'] });
    leaveNoOrphan(child);
    let said = '';
    let how: End['how'] = 'ended';
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      said = (said + text).slice(-KEPT_CHARACTERS);
    });
    const stop = (reason: 'cancelled' | 'too-long') => {
      if (how === 'ended') how = reason;
      stopProcess(child);
    };
    const onAbort = () => stop('cancelled');
    const limit = setTimeout(() => stop('too-long'), limitS * 1000);
    signal?.addEventListener('abort', onAbort);
    if (signal?.aborted) onAbort();
    const end = (outcome: End) => {
      clearTimeout(limit);
      signal?.removeEventListener('abort', onAbort);
      resolve(outcome);
    };
    child.on('error', (error) => end({ how: 'not-started', said: error.message }));
    child.on('close', () => end({ how, said }));
  });
}

/**
 * Prints a page that needs nothing else to PDF, by a Chromium without a window.
 * @param html the whole page
 * @throws InputError where Chromium does not print; CancelledError when stopped
 */
export async function printPdf(
  html: string,
  chromium: string,
  options: PrintOptions = {},
): Promise<Uint8Array> {
  const folder = await mkdtemp(join(tmpdir(), 'dwellbook-print-'));
  const [page, pdf] = [join(folder, 'report.html'), join(folder, 'report.pdf')];
  try {
    await writeFile(page, html);
    const { how, said } = await runOnce(
      chromium,
      printArguments(page, pdf, join(folder, 'profile')),
      options,
    );
    if (how === 'cancelled') throw new CancelledError();
    const printed = how === 'ended' ? await readFile(pdf).catch(() => null) : null;
    if (printed?.subarray(0, 5).toString('latin1') === '%PDF-') return printed;
    const reason =
      how === 'too-long' ? 'it took too long' : (said.trim().split('\n').at(-1) ?? '') || 'it wrote no PDF';
    throw new InputError(
      `${chromium} did not print the report (${reason}); write FILE.html and print that from any browser, or set DWELLBOOK_CHROMIUM to another Chromium.`,
    );
  } finally {
    await rm(folder, { recursive: true, force: true, maxRetries: 3 });
  }
}
