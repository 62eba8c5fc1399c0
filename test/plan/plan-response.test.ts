import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { planResponse } from '../../src/plan/plan-response.ts';
import { DAMPINGS, EXCITATIONS } from '../../src/resonance/models.ts';

describe('response with its relative sensitivities', () => {
  it('Rao, rough road (1200 kg, 400 kN/m, ratio 0.5, 20 km/h over 6 m waves): X/Y 1.100963', () => {
    const driveHz = 20 / 3.6 / 6;
    const naturalHz = Math.sqrt(400e3 / 1200) / (2 * Math.PI);
    const { amplitude } = planResponse({ excitation: 'base', damping: 'viscous' }, driveHz, naturalHz, 0.5);
    expect(amplitude).toBeCloseTo(1.100963, 6);
  });

  it('agrees with central differences for every model', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...EXCITATIONS),
        fc.constantFrom(...DAMPINGS),
        fc.double({ min: 0.5, max: 1.8, noNaN: true }),
        fc.double({ min: 0.01, max: 0.4, noNaN: true }),
        (excitation, damping, r, zeta) => {
          const model = { excitation, damping };
          const at = (fn: number, z: number) => planResponse(model, 3 * r, 3 * fn, z);
          const e = 1e-5;
          const h = at(1, zeta);
          const natural = [at(Math.exp(e), zeta), at(Math.exp(-e), zeta)] as const;
          const damped = [at(1, zeta * Math.exp(e)), at(1, zeta * Math.exp(-e))] as const;
          const slope = ([a, b]: readonly [
            { amplitude: number; lagRad: number },
            { amplitude: number; lagRad: number },
          ]) => [Math.log(a.amplitude / b.amplitude) / (2 * e), (a.lagRad - b.lagRad) / (2 * e)];
          const [a1, l1] = slope(natural);
          const [a2, l2] = slope(damped);
          expect(h.logByLogNatural).toBeCloseTo(a1!, 4);
          expect(h.lagByLogNatural).toBeCloseTo(l1!, 4);
          expect(h.logByLogDamping).toBeCloseTo(a2!, 4);
          expect(h.lagByLogDamping).toBeCloseTo(l2!, 4);
        },
      ),
      { numRuns: 200, seed: 4 },
    );
  });
});
