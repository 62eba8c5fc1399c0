import { describe, expect, it } from 'vitest';
import { akaikeCorrected } from '../../src/resonance/akaike.ts';
import { compareModels, type ModelCandidate, usualCandidates } from '../../src/resonance/model-comparison.ts';
import { DAMPINGS, EXCITATIONS } from '../../src/resonance/models.ts';
import { evenly, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const everything: ModelCandidate[] = EXCITATIONS.flatMap((excitation) =>
  DAMPINGS.map((damping) => ({ excitation, damping })),
);
const truthOf = (candidate: ModelCandidate, damping: number) => ({
  model: candidate,
  staticGain: 1,
  naturalHz: 5,
  damping,
});

describe('AICc (Burnham and Anderson 2002, from memory)', () => {
  it('chi2 + 2k + 2k(k+1)/(n-k-1); n ln(S/n) with the variance as one more parameter', () => {
    expect(akaikeCorrected(7.5, 12, 3, 'known')).toBeCloseTo(7.5 + 6 + 24 / 8, 12);
    expect(akaikeCorrected(7.5, 12, 3, 'scatter')).toBeCloseTo(12 * Math.log(7.5 / 12) + 8 + 40 / 7, 12);
  });

  it('says nothing where the correction would divide by nothing', () => {
    expect(akaikeCorrected(1, 4, 3, 'known')).toBeNull();
    expect(akaikeCorrected(0, 12, 3, 'scatter')).toBeNull();
  });
});

describe('finds the model that made the dwells', () => {
  it.each(everything)('$excitation, $damping, with lag', (candidate) => {
    const noise = seededNormal(50);
    const points = simulatedDwells(truthOf(candidate, 0.12), evenly(3.5, 6.8, 15), { withLag: true, noise });
    const { models, best, sentence } = compareModels(points, everything);
    const found = models[best!]!.candidate;
    const twin = models.find((model) => model.candidate === candidate)!;
    expect(found === candidate || models[twin.sameAs ?? -1]?.candidate === found).toBe(true);
    expect(sentence).toContain('speak clearly for');
    const weights = models
      .filter((model) => model.sameAs === null)
      .reduce((sum, model) => sum + (model.weight ?? 0), 0);
    expect(weights).toBeCloseTo(1, 12);
  });

  it('an offset that is there is asked for, one that is not is not', () => {
    const noise = seededNormal(51);
    const clean = simulatedDwells(
      truthOf({ excitation: 'force', damping: 'viscous' }, 0.04),
      evenly(4, 6, 15),
      {
        withLag: true,
        noise,
      },
    );
    const shifted = clean.map((point) => {
      const angle = (-point.lagDeg!.value! * Math.PI) / 180;
      const re = point.amplitude.value! * Math.cos(angle) + 0.5;
      const im = point.amplitude.value! * Math.sin(angle);
      return {
        ...point,
        amplitude: { value: Math.hypot(re, im), u: point.amplitude.u },
        lagDeg: { value: (-Math.atan2(im, re) * 180) / Math.PI, u: point.lagDeg!.u },
      };
    });
    const best = (points: typeof clean) => {
      const { models, best: index } = compareModels(points, usualCandidates('force'));
      return models[index!]!.candidate;
    };
    expect(best(shifted)).toMatchObject({ damping: 'viscous', rigidOffset: true });
    expect(best(clean)).toMatchObject({ damping: 'viscous', rigidOffset: false });
  });
});

describe('what it cannot tell it says', () => {
  it('viscous and structural damping near a light resonance', () => {
    const noise = seededNormal(52);
    const points = simulatedDwells(
      truthOf({ excitation: 'force', damping: 'viscous' }, 0.01),
      evenly(4.85, 5.15, 9),
      {
        noise,
      },
    );
    const candidates = DAMPINGS.map((damping) => ({ excitation: 'force', damping }) as const);
    const { sentence } = compareModels(points, candidates);
    expect(sentence).toContain('cannot tell');
    expect(sentence).toContain('choose by what the rig is');
  });

  it('force and a moved spring end are one curve', () => {
    const points = simulatedDwells(
      truthOf({ excitation: 'force', damping: 'viscous' }, 0.05),
      evenly(4, 6, 12),
      {
        noise: seededNormal(53),
      },
    );
    const candidates = (['force', 'spring-end', 'unbalance'] as const).map(
      (excitation) => ({ excitation, damping: 'viscous' }) as const,
    );
    const { models, sentence } = compareModels(points, candidates);
    expect(models.map((model) => model.sameAs)).toEqual([null, 0, null]);
    expect(models[1]!.weight).toBe(models[0]!.weight);
    expect(sentence).toContain('only the rig can tell');
  });

  it('too few dwells for the criterion', () => {
    const points = simulatedDwells(truthOf({ excitation: 'force', damping: 'viscous' }, 0.05), [4.8, 5, 5.2]);
    const { best, sentence } = compareModels(points, usualCandidates('force'));
    expect(best).toBeNull();
    expect(sentence).toContain('too few dwells');
  });

  it('a scatter that nothing explains does not decide for the richest model', () => {
    const noise = seededNormal(54);
    let richest = 0;
    for (let run = 0; run < 40; run++) {
      const points = simulatedDwells(
        truthOf({ excitation: 'force', damping: 'viscous' }, 0.04),
        evenly(4, 6, 15),
        {
          withLag: true,
          noise: () => 5 * noise(),
        },
      );
      const { models, best } = compareModels(points, usualCandidates('force'));
      if (models[best!]!.candidate.rigidOffset === true) richest++;
    }
    expect(richest).toBeLessThan(12);
  });
});
