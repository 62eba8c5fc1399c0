import { describe, expect, it } from 'vitest';
import { centreAngle, dampingFromAngles } from '../../src/resonance/circle-angles.ts';
import { algebraicCircle } from '../../src/resonance/circle-fit.ts';
import { geometricCircle } from '../../src/resonance/circle-geometric.ts';
import { circlePlane } from '../../src/resonance/circle-plane.ts';
import { circleOpinion } from '../../src/resonance/circle-resonance.ts';
import { DAMPINGS, EXCITATIONS, type ResonanceModel } from '../../src/resonance/models.ts';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import type { ResonancePoint } from '../../src/resonance/resonance-points.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const unit = (model: ResonanceModel, damping: number) => ({ model, staticGain: 1, naturalHz: 1, damping });
const wide = evenly(0.7, 1.4, 41);

/** The same dwells seen with a constant complex crosstalk added, in the amplitude's unit. */
function withCrosstalk(points: readonly ResonancePoint[], re: number, im: number): ResonancePoint[] {
  return points.map((point) => {
    const angle = (-point.lagDeg!.value! * Math.PI) / 180;
    const x = point.amplitude.value! * Math.cos(angle) + re;
    const y = point.amplitude.value! * Math.sin(angle) + im;
    return {
      ...point,
      amplitude: { value: Math.hypot(x, y), u: point.amplitude.u },
      lagDeg: { value: (-Math.atan2(y, x) * 180) / Math.PI, u: point.lagDeg!.u },
    };
  });
}

describe('exact circles (Kennedy and Pancu 1947, Ewins; from memory)', () => {
  it.each([
    [{ excitation: 'force', damping: 'viscous' }, 0.03, [1 / 0.12, 0, 1 / 0.12]],
    [{ excitation: 'base-relative', damping: 'viscous' }, 0.03, [-1 / 0.12, 0, 1 / 0.12]],
    [{ excitation: 'base', damping: 'viscous' }, 0.03, [-1 / 0.12, 0, 1 / 0.12]],
    [{ excitation: 'force', damping: 'structural' }, 0.06, [0, -1 / 0.12, 1 / 0.12]],
  ] as const)('%o', (model, damping, expected) => {
    const points = simulatedDwells(unit(model, damping), wide, { withLag: true });
    const { x, y } = circlePlane(points, model);
    const found = geometricCircle(x, y)!;
    [found.centreX, found.centreY, found.radius].forEach((value, i) => {
      expect(Math.abs(value - expected[i]!)).toBeLessThan(1e-9);
    });
    expect(found.residualSumOfSquares).toBeLessThan(1e-18);
  });

  it('displacement with viscous damping is no circle: Kasa radius 1.000901696 times 1/(4 zeta) over nine dwells', () => {
    const model = { excitation: 'force', damping: 'viscous' } as const;
    const frequencies = [4.6, 4.8, 4.9, 4.95, 5, 5.05, 5.1, 5.2, 5.4];
    const points = simulatedDwells({ ...unit(model, 0.03), naturalHz: 5 }, frequencies, { withLag: true });
    // in the plane that is right for structural damping: displacement as it is
    const { x, y } = circlePlane(points, { excitation: 'force', damping: 'structural' });
    expect(Math.abs(algebraicCircle(x, y, 'kasa')!.radius * 0.12 - 1.000901696)).toBeLessThan(1e-8);
  });
});

describe('damping from two angles (Ewins, from memory), 1e-12', () => {
  it('viscous: tan(theta/2) = (1 - r^2)/(2 zeta r) gives back zeta 0.03', () => {
    const angle = (f: number) => Math.abs(centreAngle('viscous', f, 5, 0.03));
    expect(Math.tan(angle(4.9) / 2)).toBeCloseTo((1 - 0.98 ** 2) / (0.06 * 0.98), 12);
    expect(dampingFromAngles('viscous', 5, 5.13, angle(5.13), 4.9, angle(4.9))).toBeCloseTo(0.03, 12);
  });

  it('structural: gives back eta 0.06', () => {
    const angle = (f: number) => Math.abs(centreAngle('structural', f, 5, 0.06));
    expect(dampingFromAngles('structural', 5, 5.13, angle(5.13), 4.9, angle(4.9))).toBeCloseTo(0.06, 12);
  });
});

describe('second opinion', () => {
  const models = EXCITATIONS.flatMap((excitation) => DAMPINGS.map((damping) => ({ excitation, damping })));
  it.each(models)('exact dwells: truth, no turn, agreement ($excitation, $damping)', (model) => {
    const truth = { model, staticGain: 1, naturalHz: 6, damping: 0.04 };
    const points = simulatedDwells(truth, evenly(5.4, 6.7, 11), { withLag: true });
    const opinion = circleOpinion(points, fitResonance(points, { ...model, amplitudeUnit: 'gain' }));
    expect(opinion.naturalHz.value).toBeCloseTo(6, 7);
    expect(opinion.damping.value).toBeCloseTo(0.04, 7);
    expect(opinion.turnDeg.value).toBeCloseTo(0, 5);
    expect(opinion.disagrees).toBe(false);
  });

  it('chance disagreement stays rare: at most 8 in 100 noisy tests', () => {
    const noise = seededNormal(17);
    const model = { excitation: 'force', damping: 'viscous' } as const;
    const truth = { model, staticGain: 0.5, naturalHz: 6, damping: 0.04 };
    let disagreements = 0;
    for (let run = 0; run < 100; run++) {
      const points = simulatedDwells(truth, evenly(5.4, 6.6, 11), { withLag: true, noise });
      if (circleOpinion(points, fitResonance(points, model)).disagrees !== false) disagreements++;
    }
    expect(disagreements).toBeLessThanOrEqual(8);
  });

  it('crosstalk: the circle keeps to the truth, the plain fit does not, and the difference is said', () => {
    const noise = seededNormal(18);
    const model = { excitation: 'force', damping: 'structural' } as const;
    const truth = { model, staticGain: 0.5, naturalHz: 6, damping: 0.08 };
    const clean = simulatedDwells(truth, evenly(5.3, 6.7, 15), { withLag: true, uLagDeg: 0.2, noise });
    const points = withCrosstalk(clean, 0.9, 0.6);
    const fit = fitResonance(points, model);
    const opinion = circleOpinion(points, fit);
    expect(Math.abs(opinion.naturalHz.value! - 6)).toBeLessThan(3 * opinion.naturalHz.u!);
    expect(Math.abs(opinion.damping.value! - 0.08)).toBeLessThan(3 * opinion.damping.u!);
    expect(opinion.disagrees).toBe(true);
    expect(opinion.sentence).toContain('the damping by');
    expect(opinion.sentence).toContain('crosstalk');
  });

  it('without lags, or with too few, it says what it needs', () => {
    const model = { excitation: 'force', damping: 'viscous' } as const;
    const points = simulatedDwells({ model, staticGain: 1, naturalHz: 6, damping: 0.04 }, evenly(5, 7, 9));
    const opinion = circleOpinion(points, fitResonance(points, model));
    expect(opinion).toMatchObject({ circle: null, disagrees: null, naturalHz: { value: null, u: null } });
    expect(opinion.sentence).toBe('The circle plot needs 4 dwells with amplitude and lag; there are 0.');
  });
});
