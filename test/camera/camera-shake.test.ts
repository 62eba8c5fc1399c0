import { describe, expect, test } from 'vitest';
import { acrossAxis, commonMotion, judgeShake, stillRmsPx } from '../../src/camera/camera-shake.ts';
import { seededNormal } from '../plan/seeded-random.ts';

const N = 400;

function noisy(seed: number, sd: number, common: (i: number) => number = () => 0): Float64Array {
  const normal = seededNormal(seed);
  return Float64Array.from({ length: N }, (_, i) => common(i) + sd * normal());
}

describe('motion common to two markers', () => {
  const shake = (i: number): number => 1.5 * Math.sin(0.21 * i) + 0.02 * i;

  test('shake of 1.5 px amplitude is found as 1.06 px root mean square, its drift left out (closed form, 3 %)', () => {
    const common = commonMotion(noisy(1, 0.03, shake), noisy(2, 0.03, shake));
    expect((common?.rmsPx ?? 0) / (1.5 / Math.SQRT2)).toBeGreaterThan(0.97);
    expect((common?.rmsPx ?? 0) / (1.5 / Math.SQRT2)).toBeLessThan(1.03);
    expect(common?.correlation).toBeGreaterThan(0.99);
  });

  test('tracking noise of two markers is not common', () => {
    const common = commonMotion(noisy(1, 0.3), noisy(2, 0.3));
    expect(common?.rmsPx).toBeLessThan(0.1);
    expect(Math.abs(common?.correlation ?? 1)).toBeLessThan(0.15);
  });

  test('frames in which either is lost do not count, and too few give no answer', () => {
    const a = noisy(1, 0.03, shake);
    const b = noisy(2, 0.03, shake);
    for (let i = 100; i < 200; i++) a[i] = Number.NaN;
    b[3] = Number.NaN;
    expect(commonMotion(a, b)?.correlation).toBeGreaterThan(0.99);
    expect(commonMotion(a.slice(0, 15), b.slice(0, 15))).toBeNull();
  });

  test('one still marker alone: its root mean square about its drift', () => {
    expect(stillRmsPx(Float64Array.from({ length: N }, (_, i) => 3 + 0.01 * i))).toBeCloseTo(0, 9);
    expect(stillRmsPx(noisy(4, 0.25))).toBeCloseTo(0.25, 1);
  });
});

test('across a motion axis only what is square to it counts', () => {
  const along = Float64Array.of(0, 10, -10);
  const angle = (30 * Math.PI) / 180;
  const x = along.map((s) => s * Math.cos(angle) - 2 * Math.sin(angle));
  const y = along.map((s) => s * Math.sin(angle) + 2 * Math.cos(angle));
  for (const across of acrossAxis(x, y, 30)) expect(across).toBeCloseTo(2, 12);
});

test('shake is told only where no ground marker takes it out', () => {
  expect(judgeShake(1.06, false)?.code).toBe('shake-not-removed');
  expect(judgeShake(1.06, false)?.sentence).toContain('ground marker');
  expect(judgeShake(1.06, true)).toBeNull();
  expect(judgeShake(0.05, false)).toBeNull();
});
