import { describe, expect, it } from 'vitest';
import { importsOf, sourcesUnder } from './source-files.ts';

/** Which folders of src/ a folder may import from, beside itself and src/errors.ts. Data flows from left to right. */
const MAY_IMPORT: Record<string, readonly string[]> = {
  numeric: [],
  sine: ['numeric'],
  motion: ['numeric', 'sine'],
  ringdown: ['numeric', 'sine', 'motion'],
  resonance: ['numeric'],
  track: ['numeric'],
  scale: ['numeric', 'motion', 'sine'],
  camera: ['numeric', 'motion', 'sine', 'scale'],
  plan: ['numeric', 'resonance', 'camera'],
  testfile: ['numeric'],
  clip: ['track'],
  engine: [
    'numeric',
    'sine',
    'motion',
    'ringdown',
    'resonance',
    'track',
    'scale',
    'camera',
    'plan',
    'testfile',
    'clip',
  ],
  report: ['numeric', 'engine', 'resonance', 'plan', 'testfile', 'clip'],
  cli: ['numeric', 'engine', 'report', 'plan', 'testfile', 'clip', 'resonance'],
};

/** The one file that may touch a foreign library. */
const ADAPTER: Record<string, string> = {
  'ml-matrix': 'src/numeric/linear-algebra.ts',
  'fft.js': 'src/numeric/fft.ts',
  '@stdlib/stats-base-dists-t-quantile': 'src/numeric/quantiles.ts',
  '@stdlib/stats-base-dists-f-cdf': 'src/numeric/quantiles.ts',
  '@stdlib/stats-base-dists-f-quantile': 'src/numeric/quantiles.ts',
  '@stdlib/stats-base-dists-chisquare-cdf': 'src/numeric/quantiles.ts',
  'opencv-wasm': 'src/track/opencv.ts',
  'jsonc-parser': 'src/testfile/parse-json.ts',
  '@napi-rs/canvas': 'src/report/draw-chart.ts',
  'cli-progress': 'src/cli/progress-bar.ts',
};

const sources = sourcesUnder('src');
const folderOf = (path: string): string => path.split('/')[1] ?? '';

it('there is something to look at', () => {
  expect(sources.length).toBeGreaterThan(20);
});

describe('imports in src/ point one way', () => {
  it.each(sources.filter((path) => path.split('/').length > 2))('%s', (path) => {
    const allowed = MAY_IMPORT[folderOf(path)];
    expect(allowed, `folder ${folderOf(path)} has no place in the house plan`).toBeDefined();
    const wrong = importsOf(path).filter((name) => {
      if (
        !name.startsWith('src/') &&
        !name.startsWith('app/') &&
        !name.startsWith('test/') &&
        !name.startsWith('fixtures/')
      )
        return false;
      if (name === 'src/errors.ts') return false;
      return (
        !name.startsWith('src/') || (folderOf(name) !== folderOf(path) && !allowed?.includes(folderOf(name)))
      );
    });
    expect(wrong).toEqual([]);
  });
});

it('each foreign library is touched by its one adapter only', () => {
  const wrong = sources.flatMap((path) =>
    importsOf(path, true)
      .filter((name) => name in ADAPTER && ADAPTER[name] !== path)
      .map((name) => `${path} imports ${name}`),
  );
  expect(wrong).toEqual([]);
});

it('only app/main and app/preload import electron', () => {
  const wrong = [...sources, ...sourcesUnder('app')].filter(
    (path) => importsOf(path).includes('electron') && !/^app\/(main|preload)\//.test(path),
  );
  expect(wrong).toEqual([]);
});

it('the page reaches the engine through the operations only', () => {
  const wrong = sourcesUnder('app/page')
    .filter((path) => !path.endsWith('vite.config.ts'))
    .flatMap((path) =>
      importsOf(path)
        .filter(
          (name) =>
            name.startsWith('node:') ||
            /^src\/(clip|cli|testfile\/on-disk)/.test(name) ||
            name.startsWith('app/main'),
        )
        .map((name) => `${path} imports ${name}`),
    );
  expect(wrong).toEqual([]);
});
