import { describe, expect, it } from 'vitest';
import { readOptions } from './options.ts';
import { median, spread, table } from './print.ts';
import { registration } from './registration.ts';
import { runTimed } from './timed-process.ts';

describe('registration bench', () => {
  it.each([2, 8])(
    'Cramér-Rao bound (Robinson and Milanfar 2004): at %i DN of noise at most 1.15 times, and not below it',
    (noiseDn) => {
      const { rmsPx, boundPx, lost } = registration(noiseDn, 80);
      expect(lost).toBe(0);
      expect(rmsPx / boundPx).toBeLessThan(1.15);
      // 160 errors scatter their root mean square by 6 %.
      expect(rmsPx / boundPx).toBeGreaterThan(0.85);
    },
  );

  it('metamorphic: the bound grows in proportion to the noise', () => {
    const [two, eight] = [registration(2, 1).boundPx, registration(8, 1).boundPx];
    const rounding = 1 / 12;
    expect(eight / two).toBeCloseTo(Math.sqrt((64 + rounding) / (4 + rounding)), 9);
  });
});

describe('timed process', () => {
  const node = (script: string) => runTimed(process.execPath, ['-e', script]);

  it.runIf(process.platform === 'linux')('sees memory that a child of the program touched', async () => {
    const fill =
      'const b = Buffer.alloc(150e6, 1); setTimeout(() => process.stdout.write(String(b[9])), 300);';
    const parent = `require('child_process').execFileSync(process.execPath, ['-e', ${JSON.stringify(fill)}])`;
    const [plain, child] = [await node(''), await node(parent)];
    expect(child.peakMb! - plain.peakMb!).toBeGreaterThan(150);
  });

  it.runIf(process.platform === 'linux')('counts processor time of a child, not waiting', async () => {
    const busy = 'const end = process.cpuUsage().user + 6e5; while (process.cpuUsage().user < end);';
    const used = await node(`require('child_process').execFileSync(process.execPath, ['-e', '${busy}'])`);
    const idle = await node('setTimeout(() => {}, 600)');
    expect(used.processorS).toBeGreaterThan(0.5);
    expect(idle.processorS).toBeLessThan(used.processorS! - 0.4);
  });

  it('hands over the output and its last words on failure', async () => {
    expect((await node('console.log(6 * 7)')).stdout).toBe('42\n');
    await expect(node('console.error("no such rig"); process.exit(3)')).rejects.toThrow(
      /ended with 3: no such rig/,
    );
  });
});

describe('printing', () => {
  it('median of odd and even counts', () => {
    expect(median([5, 1, 3])).toBe(3);
    expect(median([4, 1, 3, 2])).toBe(2.5);
    expect(spread([0.913, 0.9, 0.95], 2)).toBe('0.91 (0.90-0.95)');
  });

  it('lines up columns', () => {
    expect(
      table([
        ['a', 'bb'],
        ['ccc', '1'],
      ]),
    ).toBe('a    bb\nccc   1');
  });
});

describe('arguments', () => {
  it('are refused when not known', () => {
    expect(readOptions(['--rounds', '3', '--seconds', '10'])).toMatchObject({
      rounds: 3,
      seconds: 10,
      short: false,
    });
    expect(readOptions(['--short']).rounds).toBe(1);
    expect(() => readOptions(['--fast'])).toThrow('--fast');
    expect(() => readOptions(['--rounds', 'many'])).toThrow('many');
  });
});
