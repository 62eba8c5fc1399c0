import { chmodSync, readdirSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { findChromium } from '../../src/cli/find-chromium.ts';
import { printPdf } from '../../src/cli/print-pdf.ts';
import { CancelledError, InputError } from '../../src/errors.ts';
import { tempFolder } from '../helpers/temp-folder.ts';

const folder = tempFolder();

/** An executable that stands in for Chromium and does what the script says. */
function fake(name: string, script: string): string {
  const path = join(folder, name);
  writeFileSync(path, `#!/bin/sh\n${script}\n`);
  chmodSync(path, 0o755);
  return path;
}

function chromiumHere(): string | null {
  try {
    return findChromium();
  } catch {
    return null;
  }
}
const chromium = chromiumHere();
const leftBehind = () => readdirSync(tmpdir()).filter((name) => name.startsWith('dwellbook-print-'));

describe('findChromium', () => {
  it('takes what DWELLBOOK_CHROMIUM names, and never passes it over', () => {
    const named = fake('my-chromium', 'exit 0');
    expect(findChromium({ DWELLBOOK_CHROMIUM: named, PATH: '' })).toBe(named);
    expect(() => findChromium({ DWELLBOOK_CHROMIUM: join(folder, 'nothing'), PATH: folder })).toThrow(
      /DWELLBOOK_CHROMIUM names/,
    );
  });

  it('else looks on PATH, and where there is none says what to do', () => {
    const found = fake('google-chrome', 'exit 0');
    expect(findChromium({ PATH: `/nowhere:${folder}` })).toBe(found);
    expect(() => findChromium({ PATH: '/nowhere' })).toThrow(InputError);
    expect(() => findChromium({})).toThrow(/install one, set DWELLBOOK_CHROMIUM .*or write FILE\.html/);
  });
});

describe('printPdf', () => {
  it.each([
    ['ends without a PDF', 'echo no display >&2; exit 1', /did not print the report \(no display\)/],
    [
      'writes something else',
      'for a in "$@"; do case $a in --print-to-pdf=*) echo hello > "$(echo "$a" | cut -d= -f2)";; esac; done',
      /it wrote no PDF/,
    ],
  ])('a Chromium that %s is a sentence, and leaves no files', async (_, script, sentence) => {
    const before = leftBehind().length;
    await expect(printPdf('<p>x</p>', fake('bad', script))).rejects.toThrow(sentence);
    expect(leftBehind().length).toBe(before);
  });

  it('a Chromium that cannot be started is a sentence', async () => {
    await expect(printPdf('<p>x</p>', join(folder, 'nothing'))).rejects.toThrow(InputError);
  });

  it('a Chromium that hangs is stopped: by the caller, or by the time limit', async () => {
    const hangs = fake('hangs', 'exec sleep 60');
    await expect(printPdf('<p>x</p>', hangs, { signal: AbortSignal.abort() })).rejects.toThrow(
      CancelledError,
    );
    await expect(printPdf('<p>x</p>', hangs, { limitS: 0.05 })).rejects.toThrow(/it took too long/);
  });

  it.skipIf(chromium === null)(
    'prints A4 pages (ISO 216: 210 mm x 297 mm) with a Chromium that is here',
    async () => {
      const html =
        '<!doctype html><style>@page{size:A4}h2{break-before:page}</style><h1>one</h1><h2>two</h2>';
      const pdf = Buffer.from(await printPdf(html, chromium ?? '')).toString('latin1');
      expect(pdf.slice(0, 5)).toBe('%PDF-');
      expect(pdf.match(/\/Type\s*\/Page\b/g)).toHaveLength(2);
      const [, width, height] = /\/MediaBox\s*\[\s*0\s+0\s+([\d.]+)\s+([\d.]+)/.exec(pdf) ?? [];
      expect(Math.abs(Number(width) - (210 / 25.4) * 72)).toBeLessThan(1);
      expect(Math.abs(Number(height) - (297 / 25.4) * 72)).toBeLessThan(1);
    },
  );
});
