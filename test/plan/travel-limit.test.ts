import { describe, expect, it } from 'vitest';
import { CAUTIONS, cautionsFor } from '../../src/plan/cautions.ts';
import { checkTravel } from '../../src/plan/travel-limit.ts';

const predicted = { lowMm: 30, medianMm: 40, upperMm: 50 };

describe('travel limit', () => {
  it('refuses a step whose upper 95 % bound passes the limit, though its likely swing does not', () => {
    const check = checkTravel(4.85, predicted, 45, 1);
    expect(check.verdict).toBe('refused');
    expect(check.driveFraction).toBeCloseTo(0.9, 12);
    expect(check.sentence).toBe(
      'At 4.85 Hz the part may swing 50 mm (95 %; most likely 40 mm), past its travel limit of 45 mm: do not run this step. Lower the drive to 90 % of its present level, or measure nearer steps first.',
    );
  });

  it('asks for a slow rise where only the way to steady motion passes it', () => {
    const check = checkTravel(4.2, predicted, 60, 1.5);
    expect(check.verdict).toBe('ramp');
    expect(check.sentence).toMatch(/may reach 75 mm: raise the drive slowly/);
  });

  it('is silent below the limit and where none is stated, and says what it cannot watch', () => {
    expect(checkTravel(4.2, predicted, 60, 1.1)).toEqual({
      verdict: 'below',
      driveFraction: null,
      sentence: null,
    });
    expect(checkTravel(4.2, predicted, null, 1.1).verdict).toBe('unknown');
    expect(checkTravel(4.2, null, 60, 1.1).sentence).toMatch(/cannot be watched yet/);
  });
});

describe('cautions', () => {
  it('those of any test are always there, the others where something calls for them', () => {
    const ids = (situations: Parameters<typeof cautionsFor>[0]) => cautionsFor(situations).map((c) => c.id);
    expect(ids([])).toEqual(['clear', 'guard', 'rules']);
    expect(ids(['toward-peak', 'magnets'])).toEqual([
      'peak',
      'clear',
      'guard',
      'magnets',
      'strike',
      'eyes',
      'rules',
    ]);
  });

  it('speak of every hazard of the bench: moving parts, guard, travel, masses, magnets, striking, eyes, rules', () => {
    const text = CAUTIONS.map((caution) => caution.text).join(' ');
    for (const word of [
      /hands/,
      /guard/,
      /travel limit/,
      /masses/,
      /pacemakers/,
      /cards/,
      /strike/,
      /eye protection/,
      /qualified person/,
    ])
      expect(text).toMatch(word);
    expect(new Set(CAUTIONS.map((caution) => caution.id)).size).toBe(CAUTIONS.length);
  });
});
