import { describe, expect, it } from 'vitest';
import { withMeasured } from '../../src/engine/keep-measured.ts';
import { checkReproduction } from '../../src/report/reproduction.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import { syntheticTest } from './synthetic-test.ts';

const { test, measurement } = syntheticTest([
  { id: 'a', rig: { naturalHz: 3, dampingRatio: 0.05, staticGain: 1 }, driveHz: [2.8, 3, 3.2, 3.5] },
]);
const { results } = measurement;
const saved = withMeasured(test, results);

/** The saved test with something of its first dwell's kept measurement changed. */
function tampered(change: Record<string, unknown>): TestFile {
  const [configuration, ...others] = saved.configurations;
  if (!configuration) throw new Error('the test has a configuration');
  const [first, ...rest] = configuration.dwells;
  if (!first?.measured) throw new Error('the first dwell is kept');
  return {
    ...saved,
    configurations: [
      { ...configuration, dwells: [{ ...first, measured: { ...first.measured, ...change } }, ...rest] },
      ...others,
    ],
  };
}

describe('checkReproduction', () => {
  it('a saved test measured again gives the same numbers, and nothing is to be said', () => {
    expect(checkReproduction(saved, results)).toEqual({
      differences: [],
      keptAmplitudes: 4,
      sameAmplitudes: 4,
    });
  });

  it('says nothing of a test that kept nothing', () => {
    expect(checkReproduction(test, results)).toEqual({
      differences: [],
      keptAmplitudes: 0,
      sameAmplitudes: 0,
    });
  });

  it('names the clip whose content is not what it was', () => {
    const clips = saved.clips.map((clip) => (clip.id === 'c2' ? { ...clip, sha256: 'ab'.repeat(32) } : clip));
    const { differences } = checkReproduction({ ...saved, clips }, results);
    expect(differences).toHaveLength(1);
    expect(differences[0]).toMatch(/^Clip c2 is another file .* instead of abababababab…\.$/);
  });

  it('names the dwell that comes out otherwise, and by how many standard uncertainties', () => {
    const { value, u } = results.dwells[0]?.amplitude ?? { value: 0, u: 0 };
    const { differences, sameAmplitudes } = checkReproduction(
      tampered({ amplitude: (value ?? 0) + 3 * (u ?? 0) }),
      results,
    );
    expect(sameAmplitudes).toBe(3);
    expect(differences).toHaveLength(1);
    expect(differences[0]).toMatch(/^Dwell d1 comes out as .*, 3\.0 times its standard uncertainty\./);
  });

  it('says which program measured before, where it was another one', () => {
    const { differences } = checkReproduction(tampered({ program: 'Dwellbook 0.0.9' }), results);
    expect(differences).toEqual([
      `The test file was measured before by Dwellbook 0.0.9; this report by ${results.program}.`,
    ]);
  });
});
