import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formulaText } from '../../src/resonance/model-text.ts';
import {
  DAMPINGS,
  EXCITATIONS,
  lagDeg,
  type ResonanceModel,
  unitAmplitude,
  unitResponse,
  unitValue,
} from '../../src/resonance/models.ts';

const FORCE: ResonanceModel = { excitation: 'force', damping: 'viscous' };
const BASE: ResonanceModel = { excitation: 'base', damping: 'viscous' };
const MODELS = EXCITATIONS.flatMap((excitation) => DAMPINGS.map((damping) => ({ excitation, damping })));
const RATIOS = [0.5, 0.8, 0.9, 1, 1.1, 1.2, 1.5, 2];

describe('handbook response curve of the damped oscillator (Den Hartog, Thomson, Rao; from memory)', () => {
  it.each([
    [0.05, [1.33038, 2.711631, 4.756515, 10, 4.218245, 2.192645, 0.794301, 0.332595]],
    [0.1, [1.321637, 2.538365, 3.820804, 5, 3.28798, 1.995217, 0.77791, 0.330409]],
    [0.2, [1.288313, 2.076137, 2.456624, 2.5, 2.051093, 1.535738, 0.721218, 0.322078]],
  ])('magnification at zeta %d, six decimals', (zeta, expected) => {
    RATIOS.forEach((r, i) => {
      expect(Math.abs(unitAmplitude(unitResponse(FORCE, 3 * r, 3, zeta)) - expected[i]!)).toBeLessThan(1e-6);
    });
  });

  it.each([
    [0.05, [3.814075, 12.528808, 25.346176, 90, 152.354025, 164.744881, 173.157227, 176.185925]],
    [0.1, [7.594643, 23.962489, 43.451842, 90, 133.66778, 151.38954, 166.504267, 172.405357]],
  ])('lag in degrees at zeta %d, six decimals', (zeta, expected) => {
    RATIOS.forEach((r, i) => {
      expect(Math.abs(lagDeg(unitResponse(FORCE, 3 * r, 3, zeta)) - expected[i]!)).toBeLessThan(1e-6);
    });
  });

  it.each([0.05, 0.1, 0.2, 0.5])(
    'transmissibility is 1 at r = sqrt 2 and sqrt(1 + 4 zeta^2)/(2 zeta) at 1: zeta %d',
    (zeta) => {
      expect(unitAmplitude(unitResponse(BASE, Math.SQRT2, 1, zeta))).toBeCloseTo(1, 12);
      const atOne = Math.sqrt(1 + 4 * zeta ** 2) / (2 * zeta);
      expect(unitAmplitude(unitResponse(BASE, 1, 1, zeta))).toBeCloseTo(atOne, 12);
    },
  );

  it('reciprocity: r^2 |H(r)| of the relative motion is |H(1/r)| of the force curve', () => {
    for (const r of RATIOS) {
      const relative = unitAmplitude(
        unitResponse({ excitation: 'base-relative', damping: 'viscous' }, r, 1, 0.07),
      );
      expect(relative).toBeCloseTo(unitAmplitude(unitResponse(FORCE, 1 / r, 1, 0.07)), 12);
    }
  });

  it('structural damping: height 1/eta at r = 1, half power at r = sqrt(1 -+ eta) (Ewins, from memory)', () => {
    const model: ResonanceModel = { excitation: 'force', damping: 'structural' };
    for (const eta of [0.02, 0.1, 0.2]) {
      expect(unitAmplitude(unitResponse(model, 1, 1, eta))).toBeCloseTo(1 / eta, 10);
      for (const r of [Math.sqrt(1 - eta), Math.sqrt(1 + eta)]) {
        expect(unitAmplitude(unitResponse(model, r, 1, eta))).toBeCloseTo(Math.SQRT1_2 / eta, 9);
      }
    }
  });
});

describe('worked examples', () => {
  // vehicle over a wavy road: base excitation through spring and damper
  const road = (massKg: number, stiffnessNPerM: number, zeta: number, speedKmPerH: number, waveM: number) =>
    unitAmplitude(
      unitResponse(BASE, speedKmPerH / 3.6 / waveM, Math.sqrt(stiffnessNPerM / massKg) / (2 * Math.PI), zeta),
    );

  it('Rao, rough road: 1200 kg, 400 kN/m, zeta 0.5, 20 km/h over 6 m waves: X/Y 1.100963, 0.0550481 m; 0.0424660 m at 100 km/h', () => {
    expect(road(1200, 4e5, 0.5, 20, 6)).toBeCloseTo(1.100963, 5);
    expect(0.05 * road(1200, 4e5, 0.5, 20, 6)).toBeCloseTo(0.0550481, 6);
    expect(0.05 * road(1200, 4e5, 0.5, 100, 6)).toBeCloseTo(0.042466, 6);
  });

  it('Inman, same road (from memory): 1007 kg, 40 kN/m, 2000 N s/m, 0.01 m gives 0.0319133 m', () => {
    const zeta = 2000 / (2 * Math.sqrt(4e4 * 1007));
    expect(zeta).toBeCloseTo(0.15756, 5);
    expect(Math.abs(0.01 * road(1007, 4e4, zeta, 20, 6) - 0.0319133)).toBeLessThan(1e-6);
  });

  it('Rao, forced response: 10 kg, 20 N s/m, 4000 N/m, 100 N at 10 rad/s: 33.2595 mm, lag 3.814075 deg', () => {
    const response = unitResponse(FORCE, 10 / (2 * Math.PI), 20 / (2 * Math.PI), 0.05);
    expect(Math.abs((100 / 4000) * 1000 * unitAmplitude(response) - 33.2595)).toBeLessThan(1e-4);
    expect(Math.abs(lagDeg(response) - 3.814075)).toBeLessThan(1e-6);
  });
});

describe('derivatives', () => {
  it.each(MODELS)('$excitation, $damping: analytic derivatives agree with central differences', (model) => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.2, max: 3, noNaN: true }),
        fc.double({ min: 0.5, max: 40, noNaN: true }),
        fc.double({ min: 0.005, max: 0.6, noNaN: true }),
        (r, naturalHz, damping) => {
          const at = (n: number, d: number) => unitResponse(model, r * naturalHz, n, d);
          const found = at(naturalHz, damping);
          const value = unitValue(model, r * naturalHz, naturalHz, damping);
          expect(value.re).toBeCloseTo(found.re, 11);
          expect(value.im).toBeCloseTo(found.im, 11);
          const h = 1e-6;
          const size = unitAmplitude(found) * (1 + 1 / damping + 1 / (Math.abs(1 - r * r) + damping));
          const byN = [at(naturalHz * (1 + h), damping), at(naturalHz * (1 - h), damping)] as const;
          const byD = [at(naturalHz, damping * (1 + h)), at(naturalHz, damping * (1 - h))] as const;
          for (const part of ['re', 'im'] as const) {
            const n = (byN[0][part] - byN[1][part]) / (2 * h);
            const d = (byD[0][part] - byD[1][part]) / (2 * h);
            expect(Math.abs(n - found[`${part}ByNaturalHz`] * naturalHz)).toBeLessThan(1e-7 * size);
            expect(Math.abs(d - found[`${part}ByDamping`] * damping)).toBeLessThan(1e-7 * size);
          }
        },
      ),
      { seed: 11, numRuns: 60 },
    );
  });
});

it('every model states its own formula, alike only where the curve is alike', () => {
  expect(formulaText(BASE)).toBe('X = G · (1 + 2iζr) / (1 − r² + 2iζr), r = f/fn');
  expect(new Set(MODELS.map((model) => formulaText(model))).size).toBe(6);
});
