import { describe, expect, it } from 'vitest';
import type { ClipTracks } from '../../src/engine/clip-tracks.ts';
import { evaluateTest } from '../../src/engine/evaluate-test.ts';
import type { DwellResult } from '../../src/engine/results.ts';
import { readTest } from '../../src/testfile/read-test.ts';
import { type Path, syntheticTracks } from '../helpers/synthetic-tracks.ts';

const PX_PER_MM = 4;

const sine = (
  amplitudePx: number,
  frequencyHz: number,
  lagDeg: number,
  x: number,
  y: number,
  angleDeg = 0,
): Path => {
  const angle = (angleDeg * Math.PI) / 180;
  return (t) => {
    const s = amplitudePx * Math.cos(2 * Math.PI * frequencyHz * t - (lagDeg * Math.PI) / 180);
    return [x + s * Math.cos(angle), y + s * Math.sin(angle)];
  };
};

const still =
  (x: number, y: number): Path =>
  () => [x, y];

/** A test of one clip with a scale of 4 px/mm; parts of it may be replaced. */
function testOf(
  driveHz: number | undefined,
  change: { setup?: object; clip?: object; dwell?: object; configuration?: object } = {},
) {
  return readTest(
    JSON.stringify({
      format: 'dwellbook-test',
      version: 1,
      setups: [
        {
          id: 's',
          scale: { from: [100, 900], to: [1300, 900], length: 1200 / PX_PER_MM, lengthU: 0.1, clickU: 0.2 },
          ...change.setup,
        },
      ],
      clips: [{ id: 'c', file: 'c.mp4', setup: 's', exposure: 0, rowReadout: 0, ...change.clip }],
      configurations: [
        {
          id: 'k',
          excitation: 'spring-end',
          dwells: [{ id: 'd', ...(driveHz === undefined ? {} : { driveHz }), clip: 'c', ...change.dwell }],
          ...change.configuration,
        },
      ],
    }),
    'synthetic',
  );
}

function onlyDwell(test: ReturnType<typeof testOf>, tracks: ClipTracks): DwellResult {
  const [dwell] = evaluateTest(test, new Map([['c', tracks]])).results.dwells;
  if (!dwell) throw new Error('no dwell');
  return dwell;
}

const base = { id: 'c', frames: 600, frameRate: 60, noisePx: 0.02 };

describe('from tracks to a dwell (truth from the simulation)', () => {
  const paths = {
    response: sine(40, 2.4, 70, 900, 400),
    drive: sine(8, 2.4, 0, 300, 400),
    ground: still(1700, 200),
  };

  it('amplitude, lag, gain and frequency come out within their uncertainty', () => {
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths }));
    expect(dwell.verdict).toBe('steady');
    expect(Math.abs((dwell.amplitude.value ?? 0) - 10)).toBeLessThan(dwell.amplitudeU95 ?? 0);
    expect(Math.abs((dwell.lag.value ?? 0) - 70)).toBeLessThan(3 * (dwell.lag.u ?? 0));
    expect(Math.abs((dwell.gain.value ?? 0) - 5)).toBeLessThan(3 * (dwell.gain.u ?? 0));
    expect(dwell.frequency.value).toBeCloseTo(2.4, 4);
  });

  it('scale uncertainty is common, the fit is not: u^2 = own^2 + common^2 (JCGM 100, 5.1.2)', () => {
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths }));
    const part = (common: boolean): number =>
      Math.hypot(...dwell.budget.filter((line) => line.common === common).map((line) => line.u));
    expect(Math.hypot(part(true), part(false))).toBeCloseTo(dwell.amplitude.u ?? 0, 9);
    expect(part(false)).toBeCloseTo(dwell.independentU ?? 0, 9);
    expect(dwell.budget.find((line) => line.source === 'scale length')).toMatchObject({ common: true });
    expect(dwell.budget.find((line) => line.source === 'scale length')?.u).toBeCloseTo((10 * 0.1) / 300, 5);
    expect(dwell.budget.find((line) => line.source === 'scale clicks')?.u).toBeCloseTo(
      (10 * Math.SQRT2 * 0.2) / 1200,
      5,
    );
  });

  it('twice the scale length doubles amplitude and its u, and leaves lag and gain alone', () => {
    const tracks = syntheticTracks({ ...base, paths });
    const one = onlyDwell(testOf(2.4), tracks);
    const two = onlyDwell(
      testOf(2.4, {
        setup: { scale: { from: [100, 900], to: [1300, 900], length: 600, lengthU: 0.2, clickU: 0.2 } },
      }),
      tracks,
    );
    expect(two.amplitude.value).toBeCloseTo(2 * (one.amplitude.value ?? 0), 9);
    expect(two.amplitude.u).toBeCloseTo(2 * (one.amplitude.u ?? 0), 9);
    expect(two.lag.value).toBeCloseTo(one.lag.value ?? 0, 9);
    expect(two.gain.value).toBeCloseTo(one.gain.value ?? 0, 9);
  });

  it('parallax: a part 15 mm in front of a rule 1 m away looks 1.0152 times as large (pinhole geometry)', () => {
    const tracks = syntheticTracks({ ...base, paths });
    const flat = onlyDwell(testOf(2.4), tracks);
    const scale = {
      from: [100, 900],
      to: [1300, 900],
      length: 300,
      lengthU: 0.1,
      clickU: 0.2,
      cameraToScale: 1000,
      cameraToMotion: 985,
    };
    const nearer = onlyDwell(testOf(2.4, { setup: { scale } }), tracks);
    expect((flat.amplitude.value ?? 0) / (nearer.amplitude.value ?? 1)).toBeCloseTo(1.015228426, 8);
    expect(nearer.budget.some((line) => line.source === 'parallax')).toBe(true);
  });

  it('a motion 30 degrees out of level is measured along its own axis', () => {
    const tilted = {
      response: sine(40, 2.4, 70, 900, 400, 30),
      drive: sine(8, 2.4, 0, 300, 400, 30),
      ground: still(1700, 200),
    };
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths: tilted }));
    expect(Math.abs((dwell.amplitude.value ?? 0) - 10)).toBeLessThan(dwell.amplitudeU95 ?? 0);
  });

  it('camera shake is taken out by the ground marker, and warned of where there is none', () => {
    const shake = (t: number): [number, number] => [
      6 * Math.sin(9 * t) + 3 * Math.sin(31 * t),
      4 * Math.cos(7 * t),
    ];
    const shaken =
      (path: Path): Path =>
      (t) => {
        const [x, y] = path(t);
        const [dx, dy] = shake(t);
        return [x + dx, y + dy];
      };
    const all = {
      response: shaken(paths.response),
      drive: shaken(paths.drive),
      ground: shaken(paths.ground),
    };
    const held = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths: all }));
    expect(Math.abs((held.amplitude.value ?? 0) - 10)).toBeLessThan(held.amplitudeU95 ?? 0);
    const loose = onlyDwell(
      testOf(2.4),
      syntheticTracks({ ...base, paths: { response: all.response, drive: all.drive, still: all.ground } }),
    );
    expect(loose.warnings.join(' ')).toMatch(/shak|ground marker/i);
  });

  it('covered frames are a gap and are counted; the amplitude stays right', () => {
    const covered = Array.from({ length: 60 }, (_, k) => 200 + k);
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths, covered }));
    expect(dwell.lostFrames).toBeGreaterThan(0);
    expect(Math.abs((dwell.amplitude.value ?? 0) - 10)).toBeLessThan(dwell.amplitudeU95 ?? 0);
  });

  it('a marker lost throughout is a sentence and nulls', () => {
    const covered = Array.from({ length: 600 }, (_, k) => k);
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, paths, covered }));
    expect(dwell).toMatchObject({
      verdict: 'failed',
      amplitude: { value: null, u: null },
      frequency: { value: null, u: null },
    });
    expect(dwell.error).toMatch(/response marker/);
  });

  it('exposure: a clip of 8 Hz at 1/30 s shows sinc(f Te) of the amplitude, which is given back', () => {
    const attenuation = Math.sin(Math.PI * 8 * (1 / 30)) / (Math.PI * 8 * (1 / 30));
    const blurred = {
      ...paths,
      response: sine(40 * attenuation, 8, 70, 900, 400),
      drive: sine(8 * attenuation, 8, 0, 300, 400),
    };
    const dwell = onlyDwell(
      testOf(8, { clip: { exposure: 1 / 30 } }),
      syntheticTracks({ ...base, paths: blurred }),
    );
    expect(Math.abs((dwell.amplitude.value ?? 0) - 10)).toBeLessThan(dwell.amplitudeU95 ?? 0);
    expect(dwell.budget.some((line) => line.source === 'exposure')).toBe(true);
  });

  it('35 Hz filmed at 60 frames/s is measured at its alias of 25 Hz and given at 35 Hz', () => {
    const fast = {
      response: sine(40, 35, 70, 900, 400),
      drive: sine(8, 35, 0, 300, 400),
      ground: still(1700, 200),
    };
    const dwell = onlyDwell(testOf(35), syntheticTracks({ ...base, paths: fast }));
    expect(Math.abs((dwell.amplitude.value ?? 0) - 10)).toBeLessThan(dwell.amplitudeU95 ?? 0);
    expect(Math.abs((dwell.lag.value ?? 0) - 70)).toBeLessThan(1);
    expect(dwell.warnings.join(' ')).toMatch(/25 Hz|frames\/s/);
  });

  it('60 Hz filmed at 60 frames/s stands still: refused, with the frame rate to use instead', () => {
    const fast = {
      response: sine(40, 60, 70, 900, 400),
      drive: sine(8, 60, 0, 300, 400),
      ground: still(1700, 200),
    };
    const dwell = onlyDwell(testOf(60), syntheticTracks({ ...base, paths: fast }));
    expect(dwell.amplitude.value).toBeNull();
    expect(dwell.error).toMatch(/frames\/s/);
  });

  it('slow motion that nobody declared is named by its likely factor', () => {
    // captured at 240, stored at 30: 2.4 Hz looks like 0.3 Hz
    const slow = {
      response: sine(40, 0.3, 70, 900, 400),
      drive: sine(8, 0.3, 0, 300, 400),
      ground: still(1700, 200),
    };
    const dwell = onlyDwell(
      testOf(2.4),
      syntheticTracks({ ...base, frames: 900, frameRate: 30, paths: slow }),
    );
    expect([dwell.error, ...dwell.warnings].join(' ')).toMatch(/240/);
  });

  it('a dwell without a set frequency is measured, with the caution that it may be an alias', () => {
    const dwell = onlyDwell(testOf(undefined), syntheticTracks({ ...base, paths }));
    expect(dwell.frequency.value).toBeCloseTo(2.4, 4);
    expect(dwell.warnings.join(' ')).toMatch(/alias/);
  });

  it('a motion of 0.1 px in an H.264 clip is marked codec-limited, in an uncompressed one not', () => {
    const small = {
      response: sine(0.1, 2.4, 70, 900, 400),
      drive: sine(8, 2.4, 0, 300, 400),
      ground: still(1700, 200),
    };
    const tracks = (codec: string) => syntheticTracks({ ...base, noisePx: 0.005, paths: small, codec });
    const compressed = onlyDwell(testOf(2.4), tracks('h264'));
    const plain = onlyDwell(testOf(2.4), tracks('ffv1'));
    expect(compressed.codecLimited).toBe(true);
    expect((compressed.amplitude.u ?? 0) / (compressed.amplitude.value ?? 1)).toBeGreaterThan(0.2);
    expect(plain.codecLimited).toBe(false);
    expect((plain.amplitude.u ?? 1) / (plain.amplitude.value ?? 1)).toBeLessThan(0.1);
  });

  it('the noise floor of a clip is told, and a motion below it is said to be (detection limit as in ISO 11843, from memory)', () => {
    const tiny = {
      response: sine(0.002, 2.4, 70, 900, 400),
      drive: sine(8, 2.4, 0, 300, 400),
      ground: still(1700, 200),
    };
    const dwell = onlyDwell(testOf(2.4), syntheticTracks({ ...base, noisePx: 0.05, paths: tiny }));
    const clear = onlyDwell(testOf(2.4), syntheticTracks({ ...base, noisePx: 0.05, paths }));
    // u of an amplitude is sigma sqrt(2/N) = 0.05 sqrt(2/600) px = 0.0007 mm; the floor is some four times that
    expect(clear.noiseFloor).toBeGreaterThan(0.0014);
    expect(clear.noiseFloor).toBeLessThan(0.006);
    expect([dwell.error, dwell.sentence, ...dwell.warnings].join(' ')).toMatch(/noise/);
    expect(clear.warnings.join(' ')).not.toMatch(/below what could be told/);
  });

  it('drive and response along lines 40 degrees apart are told', () => {
    const crossed = {
      response: sine(40, 2.4, 70, 900, 400),
      drive: sine(8, 2.4, 0, 300, 400, 40),
      ground: still(1700, 200),
    };
    const { results } = evaluateTest(
      testOf(2.4),
      new Map([['c', syntheticTracks({ ...base, paths: crossed })]]),
    );
    expect(results.clips[0]?.warnings.join(' ')).toMatch(/lines 40\.\d degrees apart/);
  });
});

describe('several dwells in one clip', () => {
  const frequencies = [2.0, 2.3, 2.7];
  const amplitudes = [20, 44, 30];
  const at = (t: number): number => Math.min(2, Math.floor(t / 12));
  // each change of frequency brings a transient at 2.35 Hz that dies with a time constant of 1 s
  const path: Path = (t) => {
    const k = at(t);
    const own = amplitudes[k]! * Math.cos(2 * Math.PI * frequencies[k]! * t);
    return [900 + own + 15 * Math.exp(-(t - 12 * k)) * Math.cos(2 * Math.PI * 2.35 * t), 400];
  };
  const drive: Path = (t) => [300 + 8 * Math.cos(2 * Math.PI * frequencies[at(t)]! * t + 0.5), 400];
  const tracks = syntheticTracks({
    id: 'c',
    frames: 36 * 30,
    frameRate: 30,
    noisePx: 0.02,
    paths: { response: path, drive, ground: still(1700, 200) },
  });

  it.each([
    ['with the list of drive frequencies', { clip: 'c', driveHz: frequencies }],
    ['without a list: frequencies are measured', { clip: 'c' }],
  ])('%s', (_name, sweep) => {
    const test = testOf(2, { configuration: { dwells: [], sweeps: [sweep] } });
    const { results } = evaluateTest(test, new Map([['c', tracks]]));
    expect(results.dwells.map((dwell) => dwell.id)).toEqual(['c-1', 'c-2', 'c-3']);
    for (const [k, dwell] of results.dwells.entries()) {
      expect(dwell.frequency.value).toBeCloseTo(frequencies[k]!, 2);
      expect((dwell.amplitude.value ?? 0) / (amplitudes[k]! / PX_PER_MM)).toBeCloseTo(1, 2);
    }
    expect(results.resonances[0]?.points).toBe(3);
  });

  it('a listed frequency of 0 fails the sweep by name', () => {
    const test = testOf(2, { configuration: { dwells: [], sweeps: [{ clip: 'c', driveHz: [2, 0, 2.7] }] } });
    const { results } = evaluateTest(test, new Map([['c', tracks]]));
    expect(results.dwells).toHaveLength(3);
    expect(results.dwells[0]?.error).toMatch(/drive frequency of 0 Hz/);
  });
});
