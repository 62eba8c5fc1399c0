import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numeric/seeded-random.ts';
import { fitDecay } from '../../src/ringdown/decay-fit.ts';
import { pencilPole, predictionPole } from '../../src/ringdown/matrix-pencil.ts';
import { measureRingDown } from '../../src/ringdown/ring-down.ts';
import { top } from '../house/source-files.ts';

const data = JSON.parse(readFileSync(join(top, 'test/data/ringdown.json'), 'utf8'));

function decayAt(naturalHz: number, zeta: number, amplitude: number, phase = 0.6) {
  const wn = 2 * Math.PI * naturalHz;
  return (t: number): number =>
    amplitude * Math.exp(-zeta * wn * t) * Math.cos(wn * Math.sqrt(1 - zeta * zeta) * t + phase);
}

function times(n: number, rate: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => i / rate);
}

describe('start values by linear prediction', () => {
  const values = times(300, 60).map(decayAt(3.217, 0.0187, 12.5));
  const wn = 2 * Math.PI * 3.217;

  it.each([
    ['matrix pencil (Hua and Sarkar 1990)', pencilPole],
    ['two-pole prediction (Prony)', predictionPole],
  ])('%s is exact without noise', (_name, pole) => {
    const found = pole(values, 1 / 60);
    expect((found?.decayRatePerS ?? 0) / (0.0187 * wn)).toBeCloseTo(1, 8);
    expect((found?.omegaRadPerS ?? 0) / (wn * Math.sqrt(1 - 0.0187 ** 2))).toBeCloseTo(1, 9);
  });

  it('a straight line has no pole', () => {
    expect(predictionPole(times(50, 60), 1 / 60)).toBeNull();
    expect(pencilPole(new Float64Array(50), 1 / 60)).toBeNull();
  });
});

describe('decay fit', () => {
  it('reference fit of a simulated ring-down by Gauss-Newton in numpy: values and white-noise uncertainties', () => {
    const x = Float64Array.from(data.x as number[]);
    const fit = fitDecay({ timesS: times(x.length, data.fps), values: x });
    expect((fit?.naturalHz.value ?? 0) / 3.21694152).toBeCloseTo(1, 7);
    expect((fit?.dampingRatio.value ?? 0) / 0.01867213).toBeCloseTo(1, 6);
    // 9.6e-5 Hz and 3.0e-5 hold for white noise; ours reads the level near the frequency, good to some tens of per cent
    expect((fit?.naturalHz.u ?? 0) / 9.6e-5).toBeGreaterThan(0.6);
    expect((fit?.naturalHz.u ?? 0) / 9.6e-5).toBeLessThan(1.6);
    expect((fit?.dampingRatio.u ?? 0) / 3.0e-5).toBeGreaterThan(0.6);
    expect((fit?.dampingRatio.u ?? 0) / 3.0e-5).toBeLessThan(1.6);
  });

  it('long ring-down: sd of decay rate and frequency is 4 a^1.5 sqrt(dt) s / A (derived from the Fisher matrix), 40 seeded runs', () => {
    const [rate, naturalHz, zeta, amplitude, sigma] = [60, 3, 0.02, 10, 0.1];
    const a = zeta * 2 * Math.PI * naturalHz;
    const n = Math.round((20 / a) * rate);
    const bound = (4 * a ** 1.5 * Math.sqrt(1 / rate) * sigma) / amplitude;
    const { normal } = seededRandom(3);
    let sum = 0;
    let stated = 0;
    const runs = 40;
    for (let run = 0; run < runs; run++) {
      const t = times(n, rate);
      const clean = t.map(decayAt(naturalHz, zeta, amplitude, run));
      const fit = fitDecay({ timesS: t, values: clean.map((v) => v + sigma * normal()) });
      sum += ((fit?.decayRatePerS.value ?? 0) - a) ** 2;
      stated += (fit?.decayRatePerS.u ?? 0) / runs;
    }
    expect(Math.sqrt(sum / runs) / bound).toBeGreaterThan(0.75);
    expect(Math.sqrt(sum / runs) / bound).toBeLessThan(1.25);
    expect(stated / bound).toBeGreaterThan(0.8);
    expect(stated / bound).toBeLessThan(1.2);
  });
});

describe('ring-down in a record', () => {
  const { normal } = seededRandom(11);
  const record = (of: (t: number) => number, seconds: number, sigma = 0.02) => {
    const timesS = times(seconds * 60, 60);
    return { timesS, displacementMm: timesS.map((t) => of(t) + sigma * normal()) };
  };

  it.each([
    [1.8, 0.02],
    [3.2, 0.06],
    [6.5, 0.004],
  ])('held, then released: %d Hz and damping ratio %d are found with the window', (naturalHz, zeta) => {
    const free = decayAt(naturalHz, zeta, 30, 0);
    const found = measureRingDown(record((t) => (t < 0.4 ? 30 : free(t - 0.4)), 9));
    expect(found.found).toBe(true);
    expect(found.windowS?.[0]).toBeGreaterThan(0.38);
    expect(found.windowS?.[0]).toBeLessThan(0.4 + 2 / naturalHz);
    expect(Math.abs((found.naturalHz.value ?? 0) - naturalHz)).toBeLessThan(4 * (found.naturalHz.u ?? 0));
    expect(Math.abs((found.dampingRatio.value ?? 0) - zeta)).toBeLessThan(4 * (found.dampingRatio.u ?? 0));
    expect(found.envelope).toBe('viscous');
  });

  it('driven, then the drive stops: only the free part counts', () => {
    const free = decayAt(3.2, 0.03, 12, -Math.PI / 2);
    const found = measureRingDown(
      record((t) => (t < 3 ? 12 * Math.sin(2 * Math.PI * 2.9 * t) : free(t - 3)), 9),
    );
    expect(found.windowS?.[0]).toBeGreaterThan(2.8);
    expect((found.naturalHz.value ?? 0) / 3.2).toBeCloseTo(1, 3);
    expect((found.dampingRatio.value ?? 0) / 0.03).toBeCloseTo(1, 1);
  });

  it('dry friction: a swing that falls by equal steps is noticed and said', () => {
    // Coulomb damping: the amplitude falls linearly, frequency unchanged (any textbook on vibration)
    const found = measureRingDown(
      record((t) => Math.max(0, 20 - 2.2 * t) * Math.cos(2 * Math.PI * 3 * t), 9),
    );
    expect(found.envelope).toBe('friction');
    expect(found.exponent.value).toBeLessThan(0.5);
    expect(found.warnings.join(' ')).toMatch(/dry friction/);
  });

  it('damping that grows with the swing is noticed and said', () => {
    // dA/dt = -a A^2 gives A = A0 / (1 + a A0 t)
    const found = measureRingDown(record((t) => (20 / (1 + 0.5 * t)) * Math.cos(2 * Math.PI * 3 * t), 9));
    expect(found.envelope).toBe('growing-with-amplitude');
    expect(found.exponent.value).toBeGreaterThan(1.5);
  });

  it.each([
    ['standstill', (_t: number) => 0],
    ['a steady motion', (t: number) => 5 * Math.cos(2 * Math.PI * 3 * t)],
  ])('%s is no ring-down: a sentence and nulls', (_name, of) => {
    const found = measureRingDown(record(of, 5));
    expect(found).toMatchObject({ found: false, naturalHz: { value: null, u: null }, windowS: null });
    expect(found.sentence).toMatch(/No free decay was found/);
  });

  it('a window outside the record is refused in one sentence', () => {
    expect(() => measureRingDown(record(decayAt(3, 0.03, 10), 5), [7, 9])).toThrow(
      /does not lie in the record, which ends at 4\.98 s/,
    );
  });
});
