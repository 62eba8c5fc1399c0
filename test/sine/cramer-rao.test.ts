import { describe, expect, test } from 'vitest';
import {
  autoregressiveOffsetFactor,
  autoregressiveVarianceFactor,
  sineBounds,
} from '../../src/sine/cramer-rao.ts';
import { fitSine } from '../../src/sine/four-parameter.ts';
import { phaseAtZeroRad } from '../../src/sine/sine-fit.ts';
import { gaussian } from './seeded-noise.ts';

const sine = { frameCount: 240, frameRateHz: 60, amplitude: 10, noiseSd: 0.1 };

describe('Cramér-Rao bounds of a real sinusoid', () => {
  test('Rife and Boorstyn 1974, Kay 1993 (from memory): 240 frames at 60/s, amplitude 10, noise 0.1', () => {
    const bounds = sineBounds(sine);
    expect(bounds.amplitude / 9.12871e-3).toBeCloseTo(1, 6);
    expect(bounds.frequencyHz / 1.258241e-4).toBeCloseTo(1, 6);
    expect(bounds.phaseAtFirstRad / 1.820051e-3).toBeCloseTo(1, 6);
    expect(bounds.offset / 6.454972e-3).toBeCloseTo(1, 6);
  });

  test('identity: short form of the frequency bound, sqrt(6) s/(pi T A sqrt N)', () => {
    const short = (Math.sqrt(6) * 0.1) / (Math.PI * 4 * 10 * Math.sqrt(240));
    expect(sineBounds(sine).frequencyHz / short).toBeCloseTo(1, 4);
  });

  test('the four-parameter fit reaches the bounds and states them (1000 seeded runs, 3 standard errors)', () => {
    const normal = gaussian(1974);
    const runs = 1000;
    const bounds = sineBounds(sine);
    const times = new Float64Array(240).map((_, i) => i / 60);
    const sums = { amplitude: 0, frequency: 0, phase: 0, offset: 0, cross: 0 };
    const stated = { amplitude: 0, frequency: 0, phase: 0, offset: 0 };
    for (let run = 0; run < runs; run++) {
      const values = times.map((t) => 10 * Math.cos(2 * Math.PI * 5.3 * t + 0.4) + 0.1 * normal());
      const fit = fitSine(times, values, { startHz: 5.3, noise: 'white' })!;
      const phaseError = Math.sin(phaseAtZeroRad(fit) - 0.4);
      sums.amplitude += (fit.amplitude - 10) ** 2 / runs;
      sums.frequency += (fit.frequencyHz - 5.3) ** 2 / runs;
      sums.phase += phaseError ** 2 / runs;
      sums.offset += fit.offset ** 2 / runs;
      sums.cross += ((fit.frequencyHz - 5.3) * phaseError) / runs;
      stated.amplitude += fit.amplitudeU / runs;
      stated.frequency += fit.frequencyU! / runs;
      stated.phase += fit.phaseU / runs;
      stated.offset += fit.offsetU / runs;
    }
    const within = 3 / Math.sqrt(2 * runs);
    const near = (ratio: number, tolerance: number) => expect(Math.abs(ratio - 1)).toBeLessThan(tolerance);
    near(Math.sqrt(sums.amplitude) / bounds.amplitude, within);
    near(Math.sqrt(sums.frequency) / bounds.frequencyHz, within);
    near(Math.sqrt(sums.phase) / bounds.phaseAtFirstRad, within);
    near(Math.sqrt(sums.offset) / bounds.offset, within);
    near(stated.amplitude / bounds.amplitude, 0.01);
    near(stated.frequency / bounds.frequencyHz, 0.01);
    near(stated.phase / bounds.phaseAtMiddleRad, 0.01);
    near(stated.offset / bounds.offset, 0.01);
    // correlation of frequency and phase at the first frame: -sqrt(3)/2
    expect(sums.cross / Math.sqrt(sums.frequency * sums.phase)).toBeCloseTo(-Math.sqrt(3) / 2, 1);
  });
});

describe('correlated noise', () => {
  test.each([
    [0.01, 2.976506],
    [0.05, 2.508835],
    [0.2, 0.797039],
  ])(
    'derived, spectrum at the signal: lag-1 correlation 0.5 at f/fs %d gives %d',
    (cyclesPerFrame, factor) => {
      expect(autoregressiveVarianceFactor(0.5, cyclesPerFrame)).toBeCloseTo(factor, 6);
    },
  );

  test('the offset has (1 + rho)/(1 - rho), which is not the factor of the amplitude', () => {
    expect(autoregressiveOffsetFactor(0.5)).toBeCloseTo(3, 12);
    expect(autoregressiveVarianceFactor(0.5, 0)).toBeCloseTo(3, 12);
  });
});
