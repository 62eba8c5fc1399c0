import { beforeAll, describe, expect, it } from 'vitest';
import { fitTest } from '../../src/engine/fit-test.ts';
import type { Measurement } from '../../src/engine/measure-test.ts';
import { type ChartPainter, chartPainter } from '../../src/report/draw-chart.ts';
import { reportHtml } from '../../src/report/report-html.ts';
import { type TestFile, testSchema } from '../../src/testfile/schema.ts';
import { fortyDwells, syntheticTest } from './synthetic-test.ts';

const RIG = { naturalHz: 3, dampingRatio: 0.05, staticGain: 1 };
const DRIVES = [2.5, 2.8, 2.9, 3, 3.1, 3.2, 3.6];
const HOSTILE = `"><script>alert(1)</script><img src=x onerror=alert(2)>'</style></title>`;

let painter: ChartPainter;
beforeAll(async () => {
  painter = await chartPainter();
});

function unmeasured(test: TestFile): Measurement {
  return { results: fitTest(test), outcomes: new Map(), displacements: new Map() };
}

const parsed = (parts: Record<string, unknown>) =>
  testSchema.parse({ format: 'dwellbook-test', version: 1, title: 'Carriage 7', ...parts });

/** What a reader sees: text without tags, spaces as one. */
function seen(html: string): string {
  return html
    .replace(/<style>.*?<\/style>/s, '')
    .replace(/<[^>]+>/g, ' ')
    .replace(/\s+/g, ' ');
}

describe('a report of 40 dwells in three configurations', () => {
  let html = '';
  beforeAll(() => {
    const { test, measurement } = fortyDwells(
      {
        report: { company: 'Bench 4', operator: 'R. Ohm', remarks: 'One.\n\nTwo.' },
      },
      5,
    );
    html = reportHtml(test, measurement, { painter, madeOn: '2026-03-14' });
  });

  it('is one file below 3 MB that fetches nothing and runs nothing', () => {
    expect(html.length).toBeLessThan(3e6);
    expect(html).not.toMatch(/<script|<link|<iframe|@import|\son\w+=/i);
    const addresses = [...html.matchAll(/(?:src|href)="([^"]{0,12})/g)].map(([, address]) => address);
    expect(addresses.length).toBeGreaterThan(90);
    expect(addresses.every((address) => address?.startsWith('data:image/'))).toBe(true);
    expect(html).not.toMatch(/NaN|undefined|Infinity|\[object/);
  });

  it('says all that a customer checks', () => {
    const text = seen(html);
    for (const words of [
      'Bench 4',
      'R. Ohm',
      'Dwellbook',
      '2026-03-14',
      'One.',
      'JCGM 100:2008',
      'half-power bandwidth',
      'scale clicks',
      'common',
      'does not replace local codes',
      'qualified person',
      '25 degrees of freedom',
    ])
      expect(text).toContain(words);
    expect(html).toContain(`${'0'.repeat(30)}28`); // the end of the last clip's hash
    expect(html.match(/<img /g)).toHaveLength(3 * 4 + 1 + 3 + 2 * 40);
    expect(text).toContain('damper gap 6 mm − damper gap 3 mm');
  });

  it('gives the natural frequency of the first configuration within its stated U of the truth', () => {
    const [, value, u] = /damper gap 3 mm ([\d.]+) ± ([\d.]+)/.exec(seen(html)) ?? [];
    expect(Number(u)).toBeGreaterThan(0);
    expect(Math.abs(Number(value) - 2.847)).toBeLessThan(1.5 * Number(u));
  });
});

describe('text from files never becomes markup', () => {
  it('whatever stands in titles, labels, ids, reasons, remarks and file names', () => {
    const { test, measurement } = syntheticTest(
      [{ id: HOSTILE, label: HOSTILE, rig: RIG, driveHz: DRIVES }],
      {
        secondsPerClip: 2,
        overrides: {
          title: HOSTILE,
          report: { company: HOSTILE, header: HOSTILE, remarks: HOSTILE, operator: HOSTILE, date: HOSTILE },
        },
      },
    );
    const dwells = measurement.results.dwells.map((dwell, k) => ({
      ...dwell,
      id: `${HOSTILE}${k}`,
      excluded: k === 0 ? HOSTILE : null,
      warnings: [HOSTILE],
    }));
    const clips = measurement.results.clips.map((clip) => ({ ...clip, file: HOSTILE, warnings: [HOSTILE] }));
    const pictures = [{ setup: 'tripod', reason: HOSTILE }];
    const html = reportHtml(
      test,
      { ...measurement, results: { ...measurement.results, dwells, clips } },
      { painter, pictures },
    );
    expect(html).not.toMatch(/<script|<img src=x/i);
    expect(html.match(/<\/style>/g)).toHaveLength(1);
    expect(html.match(/<\/title>/g)).toHaveLength(1);
    expect(html.match(/&lt;script&gt;/g)?.length).toBeGreaterThan(15);
  });
});

describe('the report is made whatever is missing, and says so', () => {
  it('an empty test', () => {
    const test = parsed({});
    const text = seen(reportHtml(test, unmeasured(test), { painter }));
    expect(text).toContain('Nothing has been measured yet: the test has no dwells');
    expect(text).toContain('no configurations yet');
    expect(text).toContain('does not replace');
  });

  it('nothing measured yet', () => {
    const test = parsed({ configurations: [{ id: 'a', dwells: [{ id: 'd1', driveHz: 2 }] }] });
    const text = seen(reportHtml(test, unmeasured(test), { painter }));
    expect(text).toContain('Nothing has been measured yet: no dwell has an amplitude');
    expect(text).toContain('not measured');
    expect(text).toContain('No resonance fit:');
  });

  it('one configuration only, and no lag anywhere', () => {
    const { test, measurement } = syntheticTest([{ id: 'a', rig: RIG, driveHz: DRIVES }], {
      drive: false,
      secondsPerClip: 2,
    });
    const html = reportHtml(test, measurement, { painter });
    const text = seen(html);
    expect(text).toContain('one configuration only');
    expect(text).toContain('No lag was measured');
    expect(text).not.toContain('Circle plot');
    expect(text).toContain("Read from the dwells by hand's method");
  });

  it('a clip that is gone: its dwell is named, its picture is explained, the others are there', () => {
    const { test, measurement } = syntheticTest([{ id: 'a', rig: RIG, driveHz: DRIVES }], {
      secondsPerClip: 2,
    });
    const gone = 'clips/gone.mp4 cannot be opened: there is no such file or folder; restore it.';
    const dwells = measurement.results.dwells.map((dwell, k) =>
      k === 0
        ? {
            ...dwell,
            amplitude: { value: null, u: null },
            verdict: 'failed' as const,
            error: gone,
            window: null,
            budget: [],
          }
        : dwell,
    );
    const clips = measurement.results.clips.map((clip, k) =>
      k === 0 ? { ...clip, frames: 0, sha256: null, error: gone } : clip,
    );
    const outcomes = new Map([...measurement.outcomes, ['c1', { clip: 'c1', error: gone }] as const]);
    const html = reportHtml(
      test,
      { ...measurement, outcomes, results: { ...measurement.results, dwells, clips } },
      {
        painter,
        pictures: [{ setup: 'tripod', reason: `There is no picture of camera setup tripod: ${gone}` }],
      },
    );
    const text = seen(html);
    expect(text).toContain('1 not measured, 6 steady');
    expect(text).toContain('There is no picture of camera setup tripod');
    expect(text).toContain('2.500 Hz (d1): clips/gone.mp4 cannot be opened');
    expect(text).toContain('not read');
    expect(html.match(/One cycle of dwell/g)).toHaveLength(6);
  });

  it('no painter: no plots, and a sentence', () => {
    const { test, measurement } = syntheticTest([{ id: 'a', rig: RIG, driveHz: DRIVES }], {
      secondsPerClip: 2,
    });
    const html = reportHtml(test, measurement);
    expect(html).not.toContain('<img');
    expect(seen(html)).toContain('The plots could not be drawn on this machine.');
  });
});

describe('options of the report object', () => {
  it('inches: lengths are 1/25.4 of those in mm, and the report says so', () => {
    const typed = (k: number) => ({ id: `d${k}`, driveHz: 2 + k / 10, typed: { amplitude: 25.4, u: 0.254 } });
    const test = parsed({
      report: { inches: true, paper: 'Letter' },
      configurations: [{ id: 'a', travelLimit: 50.8, dwells: [typed(1), typed(2)] }],
    });
    const html = reportHtml(test, unmeasured(test), { painter });
    expect(seen(html)).toContain('1.000 ± 0.020');
    expect(seen(html)).toContain('1 in = 25.4 mm exactly');
    expect(seen(html)).toContain('2.00'); // travel limit
    expect(html).toContain('@page{size:letter');
  });

  it('the same inputs give the same bytes', () => {
    const { test, measurement } = syntheticTest([{ id: 'a', rig: RIG, driveHz: DRIVES }], {
      secondsPerClip: 2,
    });
    expect(reportHtml(test, measurement, { painter })).toBe(reportHtml(test, measurement, { painter }));
  });
});
