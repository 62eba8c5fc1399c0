import { describe, expect, it } from 'vitest';
import { measured } from '../../src/numeric/measured.ts';
import { dampedHz, dampingFromDecay } from '../../src/plan/damping-from-decay.ts';
import {
  type DampingGuess,
  type FrequencySource,
  type StartingKnowledge,
  startingKnowledge,
} from '../../src/plan/starting-knowledge.ts';

function knowledgeOf(
  source: FrequencySource,
  guess: DampingGuess | null = { ratio: 0.02 },
): StartingKnowledge {
  const { knowledge, reason } = startingKnowledge(source, guess);
  if (knowledge === null) throw new Error(reason);
  return knowledge;
}

describe('damping from a decay that was watched', () => {
  it('amplitude falls 3.0 % a cycle: energy 5.91 %, damping ratio 0.0048476765 (OpenStax College Physics problem)', () => {
    expect(1 - 0.97 ** 2).toBeCloseTo(0.0591, 6);
    expect(dampingFromDecay(0.97, 1)).toBeCloseTo(0.0048476765, 9);
  });

  it('1/e after 159 cycles: Q = 159 pi = 499.5 (published solution)', () => {
    const q = 1 / (2 * dampingFromDecay(Math.exp(-1), 159));
    expect(q).toBeCloseTo(159 * Math.PI, 2);
    expect(q).toBeCloseTo(499.5, 1);
  });

  it('a quarter every half cycle: ratio 0.4037 (Rao, motor-cycle absorber, from memory)', () => {
    expect(dampingFromDecay(0.25, 0.5)).toBeCloseTo(0.403713, 6);
  });

  it('refuses what is no decay as a mistake of the caller', () => {
    expect(() => dampingFromDecay(1, 10)).toThrow(/remaining/);
    expect(() => dampingFromDecay(0.5, 0)).toThrow(/cycles/);
  });
});

describe('first natural frequency', () => {
  it('is the reciprocal of the timed free period, with the timing uncertainty (20 cycles in 10 s by stopwatch)', () => {
    const { naturalHz, notes } = knowledgeOf({ kind: 'timed-period', cycles: 20, timeS: 10, uTimeS: 0.2 });
    expect(naturalHz.value).toBeCloseTo(2 / Math.sqrt(1 - 0.02 ** 2), 9);
    expect(naturalHz.u / naturalHz.value).toBeCloseTo(0.02, 12);
    expect(notes.join(' ')).not.toMatch(/by hand/);
    expect(knowledgeOf({ kind: 'timed-period', cycles: 20, timeS: 10 }).notes.join(' ')).toMatch(
      /by hand.* 0\.15 s/,
    );
  });

  it('with heavy damping the free period is corrected to the undamped frequency', () => {
    const { naturalHz } = knowledgeOf({ kind: 'timed-period', cycles: 10, timeS: 10 }, { ratio: 0.4 });
    expect(dampedHz(naturalHz.value, 0.4)).toBeCloseTo(1, 12);
  });

  it('1200 kg on 400 kN/m: 18.25742 rad/s (Rao, rough road)', () => {
    const { naturalHz } = knowledgeOf({ kind: 'stiffness-mass', stiffnessNPerM: 400e3, massKg: 1200 });
    expect(2 * Math.PI * naturalHz.value).toBeCloseTo(18.25742, 5);
    expect(naturalHz.u / naturalHz.value).toBeCloseTo(0.025, 12); // half of the 5 % assumed of the stiffness
  });

  it('takes frequency and damping of a ring-down with their uncertainties', () => {
    const { naturalHz, dampingRatio } = knowledgeOf(
      { kind: 'ring-down', naturalHz: measured(3.217, 0.001), dampingRatio: measured(0.0187, 0.003) },
      null,
    );
    expect(naturalHz).toEqual({ value: 3.217, u: 0.001 });
    expect(dampingRatio.high / 0.0187).toBeCloseTo(1 + (1.645 * 0.003) / 0.0187, 9);
  });

  it('says what it assumed where nothing was said', () => {
    const { naturalHz, dampingRatio, notes } = knowledgeOf({ kind: 'stated', naturalHz: 4 }, null);
    expect(naturalHz.u).toBeCloseTo(0.2, 12);
    expect(dampingRatio).toEqual({ value: 0.02, low: 0.004, high: 0.1 });
    expect(notes).toHaveLength(2);
  });

  it.each<[string, FrequencySource | null, DampingGuess | null, RegExp]>([
    ['nothing', null, null, /ring-down, time some free cycles, or give stiffness/],
    [
      'an empty ring-down',
      { kind: 'ring-down', naturalHz: measured(null), dampingRatio: measured(null) },
      null,
      /gave no natural/,
    ],
    ['no time', { kind: 'timed-period', cycles: 10, timeS: 0 }, null, /above 0/],
    ['no mass', { kind: 'stiffness-mass', stiffnessNPerM: 100, massKg: 0 }, null, /above 0/],
    ['damping above critical', { kind: 'stated', naturalHz: 2 }, { ratio: 1.2 }, /between 0 and 1/],
    [
      'a range without the guess',
      { kind: 'stated', naturalHz: 2 },
      { ratio: 0.02, low: 0.03 },
      /hold the guess/,
    ],
    ['no decay', { kind: 'stated', naturalHz: 2 }, { remaining: 1.2, cycles: 3 }, /remaining fraction/],
  ])('%s: says what is missing', (_, source, guess, sentence) => {
    const { knowledge, reason } = startingKnowledge(source, guess);
    expect(knowledge).toBeNull();
    expect(reason).toMatch(sentence);
  });
});
