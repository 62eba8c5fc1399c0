import { describe, expect, it } from 'vitest';
import { propagate } from '../../src/numeric/uncertainty-propagation.ts';
import { fitCurve } from '../../src/resonance/fit-curve.ts';
import { lagDeg, unitAmplitude, unitResponse } from '../../src/resonance/models.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const model = { excitation: 'base', damping: 'viscous' } as const;
const truth = { model, staticGain: 0.5, naturalHz: 5, damping: 0.06 };
const points = simulatedDwells(truth, evenly(4, 6.2, 11), { withLag: true, noise: seededNormal(70) });

describe('fitted curve', () => {
  const fit = fitResonance(points, model);
  const at = [3, 4.7, 5, 5.4, 8];
  const curve = fitCurve(fit, at)!;

  it('is the model at the fitted parameters', () => {
    const [gain, hz, damping] = fit.parameters.map(({ value }) => value!) as [number, number, number];
    at.forEach((f, i) => {
      const unit = unitResponse(model, f, hz, damping);
      expect(curve.amplitude![i]).toBeCloseTo(gain * unitAmplitude(unit), 12);
      expect(curve.lagDeg[i]).toBeCloseTo(lagDeg(unit), 10);
    });
  });

  it('has the band that propagating the covariance by differences gives (JCGM 100, 5.2.2)', () => {
    const values = Float64Array.from(fit.parameters, ({ value }) => value!);
    at.forEach((f, i) => {
      const { u } = propagate(
        (p) => {
          const unit = unitResponse(model, f, p[1]!, p[2]!);
          return Float64Array.of(p[0]! * unitAmplitude(unit), lagDeg(unit));
        },
        values,
        fit.covariance!,
      );
      expect(Math.abs(curve.amplitudeU![i]! / u[0]! - 1)).toBeLessThan(1e-5);
      expect(Math.abs(curve.lagUDeg![i]! / u[1]! - 1)).toBeLessThan(1e-5);
    });
  });

  it('lag-only: no amplitude; refused: no curve; no uncertainty: no band', () => {
    const lagOnly = fitCurve(fitResonance(points, { ...model, mode: 'lag' }), at)!;
    expect(lagOnly.amplitude).toBeNull();
    expect(lagOnly.lagUDeg![2]!).toBeGreaterThan(0);
    expect(fitCurve(fitResonance([], model), at)).toBeNull();
    const three = simulatedDwells({ ...truth, model: { ...model, excitation: 'force' } }, [4.6, 5, 5.3], {
      uAmplitude: () => null,
    });
    expect(fitCurve(fitResonance(three, { excitation: 'force' }), at)!.amplitudeU).toBeNull();
  });
});
