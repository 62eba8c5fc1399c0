import { describe, expect, it } from 'vitest';
import { viewConfiguration } from '../../src/report/configuration-view.ts';
import { lengthUnit } from '../../src/report/length-unit.ts';
import { circleData, curveFrequencies, responseData } from '../../src/report/response-curves.ts';
import { type SyntheticFilming, syntheticTest } from './synthetic-test.ts';

const RIG = { naturalHz: 3, dampingRatio: 0.05, staticGain: 1 };

function viewOf(filming: SyntheticFilming = {}) {
  const made = syntheticTest([{ id: 'a', rig: RIG, driveHz: [2.5, 2.8, 2.9, 3, 3.1, 3.2, 3.6] }], {
    secondsPerClip: 1,
    ...filming,
  });
  const [configuration] = made.test.configurations;
  if (!configuration) throw new Error('the test has a configuration');
  return viewConfiguration(configuration, made.measurement.results);
}

describe('responseData', () => {
  it('spring end driven in view: gains, whose curve peaks at 1/(2 zeta sqrt(1 - zeta^2)) (Rao, Mechanical Vibrations, 3.4)', () => {
    const data = responseData(viewOf(), lengthUnit(false));
    expect(data.amplitudeTitle).toBe('response over drive');
    const peak = 1 / (2 * RIG.dampingRatio * Math.sqrt(1 - RIG.dampingRatio ** 2));
    expect(Math.max(...(data.curve?.amplitude ?? []))).toBeCloseTo(peak, 1);
    expect(data.halfPower?.amplitude).toBeCloseTo(peak / Math.SQRT2, 1);
    expect(data.dwells).toHaveLength(7);
  });

  it('inches change lengths, not gains', () => {
    const noDrive = viewOf({ drive: false });
    const [mm, inches] = [responseData(noDrive, lengthUnit(false)), responseData(noDrive, lengthUnit(true))];
    expect((mm.dwells[0]?.amplitude ?? 0) / (inches.dwells[0]?.amplitude ?? 1)).toBeCloseTo(25.4, 9);
    expect((mm.curve?.amplitude?.[5] ?? 0) / (inches.curve?.amplitude?.[5] ?? 1)).toBeCloseTo(25.4, 9);
    const gain = viewOf();
    expect(responseData(gain, lengthUnit(true)).dwells[0]?.amplitude).toBe(
      responseData(gain, lengthUnit(false)).dwells[0]?.amplitude,
    );
  });
});

it('curveFrequencies rise strictly, end with the dwells, and are denser at the peak', () => {
  const { fit } = viewOf();
  if (!fit) throw new Error('the dwells have a fit');
  const f = curveFrequencies(fit, [2.5, 3.6]);
  expect([f[0], f.at(-1)]).toEqual([2.5, 3.6]);
  for (let i = 1; i < f.length; i++) expect(f[i]).toBeGreaterThan(f[i - 1] ?? Number.NaN);
  const within = (low: number, high: number) => f.filter((each) => each > low && each < high).length;
  expect(within(2.9, 3.1)).toBeGreaterThan(2 * within(3.3, 3.5));
});

describe('circleData', () => {
  it('velocity i f X of a viscous oscillator runs on a circle through the origin of diameter f/(2 zeta) (Ewins, Modal Testing)', () => {
    const data = circleData(viewOf(), lengthUnit(false));
    expect(data?.quantity).toBe('i f X, Hz');
    expect(2 * (data?.circle?.radius ?? 0)).toBeCloseTo(RIG.naturalHz / (2 * RIG.dampingRatio), 0);
    expect(data?.curve.length).toBeGreaterThan(50);
  });

  it('is nothing without lags', () => {
    expect(circleData(viewOf({ drive: false }), lengthUnit(false))).toBeNull();
  });
});
