import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { electronBinary } from '../../../app/loopback/electron-binary.ts';
import { browserCommand } from '../../../app/loopback/open-in-browser.ts';
import { Presence } from '../../../app/loopback/presence.ts';
import { RateLimit } from '../../../app/loopback/request-guard.ts';
import { SessionKey } from '../../../app/loopback/session-key.ts';

afterEach(() => void vi.useRealTimers());

describe('presence', () => {
  it('the host ends a while after the last page has gone, and not while one is there or comes back', () => {
    vi.useFakeTimers();
    let gone = 0;
    const presence = new Presence(5000, () => gone++);
    vi.advanceTimersByTime(60_000);
    expect(gone).toBe(0); // nobody has come yet
    const [first, second] = [presence.arrive(), presence.arrive()];
    first();
    first();
    vi.advanceTimersByTime(60_000);
    expect(gone).toBe(0);
    second();
    vi.advanceTimersByTime(4000);
    const back = presence.arrive();
    vi.advanceTimersByTime(60_000);
    expect(gone).toBe(0);
    back();
    vi.advanceTimersByTime(5000);
    expect(gone).toBe(1);
  });
});

describe('session key', () => {
  it('two keys share neither token nor cookie, and a token has at least 128 bits', () => {
    const [a, b] = [new SessionKey(), new SessionKey()];
    expect(a.token).not.toBe(b.token);
    expect(Buffer.from(a.token, 'base64url').length * 8).toBeGreaterThanOrEqual(128);
    expect(b.isHeld(a.setCookie().split(';')[0])).toBe(false);
  });
  it('after many wrong tokens the right one is not taken either', () => {
    const key = new SessionKey();
    for (let k = 0; k < 20; k++) expect(key.tryToken('x')).toBe('wrong');
    expect(key.tryToken(key.token)).toBe('locked');
  });
});

it('rate limit: a burst passes, then so many a second', () => {
  let now = 0;
  const limit = new RateLimit(() => now);
  let passed = 0;
  for (let k = 0; k < 5000; k++) if (limit.take()) passed++;
  expect(passed).toBe(800);
  now = 500;
  passed = 0;
  for (let k = 0; k < 5000; k++) if (limit.take()) passed++;
  expect(passed).toBe(200);
});

describe('start', () => {
  it('Electron counts as installed only where its binary lies', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'dwellbook-electron-'));
    expect(electronBinary({}, folder)).toBeNull();
    await writeFile(join(folder, 'path.txt'), 'electron\n');
    expect(electronBinary({}, folder)).toBeNull();
    await mkdir(join(folder, 'dist'));
    await writeFile(join(folder, 'dist/electron'), '');
    expect(electronBinary({}, folder)).toBe(join(folder, 'dist/electron'));
    expect(electronBinary({}, null)).toBeNull();
    await rm(folder, { recursive: true, force: true });
  });
  it('a browser is opened only where there is a display', () => {
    expect(browserCommand('http://x', {}, 'linux')).toBeNull();
    expect(browserCommand('http://x', { DISPLAY: ':0' }, 'linux')).toEqual({
      command: 'xdg-open',
      args: ['http://x'],
    });
    expect(browserCommand('http://x', {}, 'darwin')?.command).toBe('open');
    expect(browserCommand('http://x', {}, 'win32')?.args).toContain('http://x');
  });
});
