import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type RenderedTest, renderTest } from '../helpers/rendered-test.ts';
import { runCli } from './built-cli.ts';

let folder = '';
let rendered: RenderedTest;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-cli-'));
  rendered = await renderTest(folder, [
    { id: 'low', driveHz: 2.9 },
    { id: 'mid', driveHz: 3.1 },
    { id: 'high', driveHz: 3.4 },
  ]);
});
afterAll(async () => {
  await rm(folder, { recursive: true, force: true });
});

describe('measure on clips drawn from the exact solution', () => {
  it('finds amplitude, lag and resonance, and writes every file of the contract', async () => {
    const out = join(folder, 'out');
    const { status, stdout, stderr } = await runCli(['measure', rendered.path, '--json', '--out', out]);
    expect(stderr).toBe('');
    expect(status).toBe(0);
    const results = JSON.parse(stdout);
    expect(results).toMatchObject({ format: 'dwellbook-results', version: 1, test: 'Rendered test' });
    for (const dwell of results.dwells) {
      const truth = rendered.truths.get(dwell.clip)?.steady;
      expect(Math.abs(dwell.amplitude.value - truth!.amplitudeMm)).toBeLessThan(dwell.amplitudeU95);
      expect(Math.abs(dwell.lag.value - truth!.lagDeg)).toBeLessThan(3 * dwell.lag.u);
      expect(dwell.error).toBeNull();
    }
    const [fit] = results.resonances;
    expect(fit).toMatchObject({ configuration: 'a', model: 'spring-end', points: 3, error: null });
    expect(Math.abs(fit.naturalHz.value - 3.1)).toBeLessThan(3 * fit.naturalHz.u);
    expect(Math.abs(fit.dampingRatio.value - 0.05)).toBeLessThan(3 * fit.dampingRatio.u);
    expect((await readdir(out)).sort()).toEqual(['dwells.csv', 'motion', 'report.html', 'results.json']);
    expect(JSON.parse(await readFile(join(out, 'results.json'), 'utf8'))).toEqual(results);
    const [head, first] = (await readFile(join(out, 'motion', 'low.csv'), 'utf8')).split('\r\n');
    expect(head).toBe(
      'frame,time_s,board_x_px,board_y_px,board_score,table_x_px,table_y_px,table_score,post_x_px,post_y_px,post_score,displacement_mm',
    );
    const seen = rendered.truths.get('low')!.tracks['response']!;
    const [, , x, y] = first!.split(',').map(Number);
    expect(Math.hypot(x! - seen.xPx[0]!, y! - seen.yPx[0]!)).toBeLessThan(0.3);
  });

  it('no number in the results is NaN or an uncertainty of 0 that is not one', async () => {
    const { stdout } = await runCli(['measure', rendered.path, '--json']);
    expect(stdout).not.toMatch(/NaN|Infinity/);
    const check = (value: unknown): void => {
      if (typeof value !== 'object' || value === null) return;
      if ('value' in value && 'u' in value) expect((value as { u: unknown }).u).not.toBe(0);
      for (const each of Object.values(value)) check(each);
    };
    check(JSON.parse(stdout));
  });

  it('the table is readable at 80 columns', async () => {
    const { status, stdout } = await runCli(['measure', rendered.path]);
    expect(status).toBe(0);
    expect(Math.max(...stdout.split('\n').map((line) => [...line].length))).toBeLessThanOrEqual(80);
    expect(stdout).toContain('as built (a)');
    expect(stdout).toMatch(/natural frequency\s+3\.\d+ ± 0\.\d+ Hz/);
  });

  it('--save keeps what was measured, and fit then gives the same resonance without the clips', async () => {
    const path = join(folder, 'saved.dwellbook');
    await writeFile(path, JSON.stringify({ ...rendered.test, operator: 'kept' }));
    const measuredRun = await runCli(['measure', path, '--json', '--save']);
    const saved = JSON.parse(await readFile(path, 'utf8'));
    expect(saved.operator).toBe('kept');
    saved.clips = saved.clips.map((clip: object) => ({ ...clip, file: 'gone.mp4' }));
    await writeFile(path, JSON.stringify(saved));
    const fitted = await runCli(['fit', path, '--json']);
    expect(fitted.status).toBe(0);
    const [before] = JSON.parse(measuredRun.stdout).resonances;
    const [after] = JSON.parse(fitted.stdout).resonances;
    expect(after.naturalHz.value).toBeCloseTo(before.naturalHz.value, 12);
    expect(after.dampingRatio.u).toBeCloseTo(before.dampingRatio.u, 12);
  });

  it('a marker clicked in another frame of another clip gives the same amplitudes', async () => {
    const truth = rendered.truths.get('mid')!;
    const seen = truth.tracks['response']!;
    const test = structuredClone(rendered.test);
    test['setups'][0].markers[0] = {
      id: 'board',
      role: 'response',
      at: [seen.xPx[37], seen.yPx[37]],
      frame: 37,
      clip: 'mid',
    };
    const path = join(folder, 'elsewhere.dwellbook');
    await writeFile(path, JSON.stringify(test));
    const { status, stdout } = await runCli(['measure', path, '--json']);
    expect(status).toBe(0);
    for (const dwell of JSON.parse(stdout).dwells) {
      const steady = rendered.truths.get(dwell.clip)?.steady;
      expect(Math.abs(dwell.amplitude.value - steady!.amplitudeMm)).toBeLessThan(dwell.amplitudeU95);
    }
  });
});
