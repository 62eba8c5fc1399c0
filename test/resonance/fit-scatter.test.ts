import { describe, expect, it } from 'vitest';
import { fitResonance } from '../../src/resonance/resonance-fit.ts';
import { evenly, type SimulatedTruth, seededNormal, simulatedDwells } from './simulated-dwells.ts';

const truth: SimulatedTruth = {
  model: { excitation: 'force', damping: 'viscous' },
  staticGain: 0.5,
  naturalHz: 5,
  damping: 0.03,
};
const frequencies = evenly(4.5, 5.5, 12);

describe('whether the own uncertainties explain the scatter', () => {
  it('they do: they hold, chi2 with its probability', () => {
    const points = simulatedDwells(truth, frequencies, { noise: seededNormal(1) });
    const fit = fitResonance(points, { excitation: 'force' });
    expect(fit.scatter).toMatchObject({ basis: 'own', varianceFactor: 1 });
    expect(fit.scatter!.pValue!).toBeGreaterThan(0.05);
    expect(fit.coverageFactor).toBeCloseTo(1.959964, 5); // normal, 95 %
  });

  it('they are four times too small: widened by what the scatter shows, and said', () => {
    const noise = seededNormal(2);
    const points = simulatedDwells(truth, frequencies, { noise: () => 4 * noise() });
    const auto = fitResonance(points, { excitation: 'force' });
    const absolute = fitResonance(points, { excitation: 'force', weighting: 'absolute' });
    expect(auto.scatter!.basis).toBe('widened');
    const factor = Math.sqrt(auto.chi2! / auto.dof!);
    expect(factor).toBeGreaterThan(2);
    expect(auto.quantities.naturalHz.u! / absolute.quantities.naturalHz.u!).toBeCloseTo(factor, 6);
    expect(auto.coverageFactor).toBeCloseTo(2.262157, 5); // t, 9 degrees of freedom (GUM table G.2)
    expect(auto.warnings.join(' ')).toContain('times as much as their own uncertainties explain');
    expect(absolute.scatter!.basis).toBe('own');
  });

  it('they are too large: said, not made smaller', () => {
    const noise = seededNormal(3);
    const points = simulatedDwells(truth, frequencies, { noise: () => 0.2 * noise() });
    const fit = fitResonance(points, { excitation: 'force' });
    expect(fit.scatter!.varianceFactor).toBe(1);
    expect(fit.warnings.join(' ')).toContain('may be too large');
  });

  it('there are none: equal weights, uncertainty from the scatter, chi2 null, size of the noise irrelevant', () => {
    const noise = seededNormal(4);
    const withU = simulatedDwells(truth, frequencies, { noise, uAmplitude: () => 0.05 });
    const without = withU.map((point) => ({
      ...point,
      amplitude: { value: point.amplitude.value, u: null },
    }));
    const fit = fitResonance(without, { excitation: 'force' });
    const same = fitResonance(withU, { excitation: 'force', weighting: 'scatter' });
    expect(fit.chi2).toBeNull();
    expect(fit.scatter!.basis).toBe('scatter');
    expect(fit.warnings.join(' ')).toContain('all dwells weigh alike');
    expect(fit.quantities.naturalHz.u! / same.quantities.naturalHz.u!).toBeCloseTo(1, 8);
    expect(fit.coverageFactor).toBeCloseTo(2.262157, 5);
  });

  it('there are none and no degrees of freedom: values without uncertainty', () => {
    const three = simulatedDwells(truth, [4.8, 5, 5.2], { uAmplitude: () => null });
    const fit = fitResonance(three, { excitation: 'force' });
    expect(fit.quantities.naturalHz.value).toBeCloseTo(5, 8);
    expect(fit.quantities.naturalHz.u).toBeNull();
    expect(fit.covariance).toBeNull();
    expect(fit.intervals.naturalHz).toBeNull();
    expect(fit.warnings.join(' ')).toContain('uncertainty cannot be known');
  });

  it('some have none: they get the largest of the others, and it is said', () => {
    const points = simulatedDwells(truth, frequencies, {
      noise: seededNormal(5),
      uAmplitude: (a) => 0.01 * a,
    });
    const largest = Math.max(...points.map((point) => point.amplitude.u!));
    const strip = (i: number, u: number | null) =>
      points.map((point, k) =>
        k === i ? { ...point, amplitude: { value: point.amplitude.value, u } } : point,
      );
    const filled = fitResonance(strip(0, null), { excitation: 'force' });
    expect(filled.warnings.join(' ')).toContain('given the largest of the others');
    expect(filled.parameters).toEqual(fitResonance(strip(0, largest), { excitation: 'force' }).parameters);
  });
});

describe('robust option', () => {
  const noise = seededNormal(21);
  const clean = simulatedDwells(truth, frequencies, { noise }).map((point, i) => ({
    ...point,
    id: `d${i + 1}`,
  }));
  const spoiled = clean.map((point, i) =>
    i === 7 ? { ...point, amplitude: { value: 0.7 * point.amplitude.value!, u: point.amplitude.u } } : point,
  );

  it('names the spoiled dwell and keeps to the truth where the plain fit is led away', () => {
    const robust = fitResonance(spoiled, { excitation: 'force', robust: true });
    const plain = fitResonance(spoiled, { excitation: 'force' });
    expect(robust.playedDown[0]!.name).toBe('dwell d8');
    expect(robust.playedDown[0]!.weight).toBeLessThan(0.1);
    expect(robust.warnings.join(' ')).toContain('Dwell d8 lies off the curve');
    const error = (fit: typeof robust) => Math.abs(fit.quantities.dampingRatio.value! - 0.03);
    expect(error(robust)).toBeLessThan(4 * robust.quantities.dampingRatio.u!);
    expect(error(robust)).toBeLessThan(0.3 * error(plain));
  });

  it('with no outlier it is the plain fit', () => {
    const exact = simulatedDwells(truth, frequencies);
    const robust = fitResonance(exact, { excitation: 'force', robust: true });
    const plain = fitResonance(exact, { excitation: 'force' });
    expect(robust.playedDown).toEqual([]);
    expect(robust.quantities.dampingRatio.u).toBeCloseTo(plain.quantities.dampingRatio.u!, 10);
  });

  it('intervals follow the covariance of the robust fit', () => {
    const { intervals, quantities, coverageFactor } = fitResonance(spoiled, {
      excitation: 'force',
      robust: true,
    });
    const half = (intervals.naturalHz!.upper! - intervals.naturalHz!.lower!) / 2;
    expect(half / (coverageFactor! * quantities.naturalHz.u!)).toBeCloseTo(1, 1);
  });
});

describe('lack of fit', () => {
  it('by own uncertainties: a second mode is noticed', () => {
    const points = simulatedDwells(truth, frequencies, { noise: seededNormal(6) });
    const other = simulatedDwells({ ...truth, naturalHz: 5.3, staticGain: 0.12 }, frequencies);
    const two = points.map((point, i) => ({
      ...point,
      amplitude: { value: point.amplitude.value! + other[i]!.amplitude.value!, u: point.amplitude.u },
    }));
    const bad = fitResonance(two, { excitation: 'force' }).lackOfFit!;
    expect(bad).toMatchObject({ kind: 'chi-square', dof: 9, pureDof: null });
    expect(bad.pValue).toBeLessThan(0.001);
    expect(bad.sentence).toContain('p < 0.001');
  });

  it('by own uncertainties: the right model is doubted near 5 times in 100', () => {
    const noise = seededNormal(6);
    let alarms = 0;
    for (let run = 0; run < 200; run++) {
      const points = simulatedDwells(truth, frequencies, { noise });
      const { lackOfFit } = fitResonance(points, { excitation: 'force', intervals: false });
      if (lackOfFit!.pValue < 0.05) alarms++;
    }
    expect(alarms).toBeGreaterThan(2);
    expect(alarms).toBeLessThan(20);
  });

  it('by repeats: F test, which needs no uncertainties; false alarms near 5 in 100', () => {
    const noise = seededNormal(7);
    let alarms = 0;
    for (let run = 0; run < 200; run++) {
      const twice = [...frequencies, ...frequencies];
      const points = simulatedDwells(truth, twice, { noise, uAmplitude: () => 0.05 }).map((point) => ({
        ...point,
        amplitude: { value: point.amplitude.value, u: null },
      }));
      const { lackOfFit } = fitResonance(points, { excitation: 'force', intervals: false });
      expect(lackOfFit).toMatchObject({ kind: 'replicates', dof: 9, pureDof: 12 });
      if (lackOfFit!.pValue < 0.05) alarms++;
    }
    expect(alarms).toBeGreaterThan(2);
    expect(alarms).toBeLessThan(20);
  });
});

describe('things a reader should know', () => {
  it('a constant error of all lags is noticed', () => {
    const points = simulatedDwells(truth, frequencies, { withLag: true, noise: seededNormal(31) }).map(
      (point) => ({
        ...point,
        lagDeg: { value: point.lagDeg!.value! + 6, u: point.lagDeg!.u },
      }),
    );
    expect(fitResonance(points, { excitation: 'force' }).warnings.join(' ')).toMatch(
      /on average .* degrees larger/,
    );
  });

  it('a response with the opposite sign is noticed', () => {
    const points = simulatedDwells(truth, frequencies, { withLag: true }).map((point) => ({
      ...point,
      lagDeg: { value: point.lagDeg!.value! + 180, u: point.lagDeg!.u },
    }));
    const fit = fitResonance(points, { excitation: 'force' });
    expect(fit.quantities.staticGain.value).toBeCloseTo(-0.5, 8);
    expect(fit.quantities.peakAmplitude.value!).toBeGreaterThan(0);
    expect(fit.warnings.join(' ')).toContain('180 degrees off');
  });

  it('a moved base whose gain is not 1 is noticed', () => {
    const model = { excitation: 'base', damping: 'viscous' } as const;
    const points = simulatedDwells({ ...truth, model, staticGain: 1.1 }, frequencies, { withLag: true });
    const fit = fitResonance(points, { excitation: 'base', amplitudeUnit: 'gain' });
    expect(fit.warnings.join(' ')).toContain('gain of 1 and comes out with 1.1');
  });

  it('a mass without uncertainty is mentioned where stiffness is given', () => {
    const fit = fitResonance(simulatedDwells(truth, frequencies), {
      excitation: 'force',
      movingMassKg: { value: 0.4, u: null },
    });
    expect(fit.warnings.join(' ')).toContain('moving mass has no uncertainty');
  });
});
