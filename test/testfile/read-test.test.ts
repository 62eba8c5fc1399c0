import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { readTest } from '../../src/testfile/read-test.ts';
import { writeTest } from '../../src/testfile/write-test.ts';

const minimal = { format: 'dwellbook-test', version: 1 };
const read = (value: unknown) => readTest(JSON.stringify(value), 'a.dwellbook');

function message(act: () => unknown): string {
  try {
    act();
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error('nothing was refused');
}

describe('a test file that cannot be used is refused with its place', () => {
  it('a syntax error is told by line and column', () => {
    const text = '{\n  "format": "dwellbook-test",\n  "version": 1\n  "title": "x"\n}';
    expect(message(() => readTest(text, 'a.dwellbook'))).toMatch(
      /^a\.dwellbook, line 4, column 3: a comma is expected/,
    );
  });

  it('a text that breaks off is told by its end', () => {
    expect(message(() => readTest('{"format": "dwellbook-test"', 'a.dwellbook'))).toMatch(
      /line 1, column 28: a closing } is missing/,
    );
  });

  it.each([
    ['empty file', '', /is empty/],
    ['an array', '[]', /expected an object/],
    ['another format', '{"format":"x","version":1}', /"format" should be "dwellbook-test", but is "x"/],
    ['a newer version', '{"format":"dwellbook-test","version":2}', /newer program.*version 2/],
  ])('%s', (_name, text, expected) => {
    expect(message(() => readTest(text, 'a.dwellbook'))).toMatch(expected);
  });

  it.each([
    [
      { clips: [{ id: 'c1', file: 7, setup: 's' }] },
      'a.dwellbook: clips[0].file: expected string, but found 7.',
    ],
    [
      { configurations: [{ id: 'a', dwells: [{ id: 'd1', driveHz: '2.4' }] }] },
      'configurations[0].dwells[0].driveHz: expected number, but found "2.4".',
    ],
    [
      { configurations: [{ id: 'a', excitation: 'hammer' }] },
      'configurations[0].excitation: expected "force" or "spring-end" or',
    ],
    [{ setups: [{ id: 's', motionAxis: { from: [1, 2], to: [3] } }] }, 'setups[0].motionAxis.to'],
    [
      { setups: [{ id: 's', markers: [{ id: 'm', role: 'response', at: [1, 2], frame: 1.5 }] }] },
      'markers[0].frame: expected a whole number',
    ],
    [
      { clips: [{ id: 'c', file: 'x.mp4', setup: 's', captureFps: 0 }] },
      'clips[0].captureFps: expected at least 0 (and not equal to it), but found 0.',
    ],
  ])('a wrong type or value: %j', (part, expected) => {
    expect(message(() => read({ ...minimal, ...part }))).toContain(expected);
  });

  it('an id that stands twice', () => {
    const clip = { id: 'c', file: 'x.mp4', setup: 's' };
    expect(message(() => read({ ...minimal, clips: [clip, clip] }))).toContain(
      'the id "c" stands twice among the clips',
    );
  });
});

describe('what is not known is kept', () => {
  it('unknown keys survive reading and writing at every level', () => {
    const value = {
      ...minimal,
      title: 'Carriage 7',
      operator: 'bench 3',
      setups: [
        {
          id: 's',
          tripod: { height: 1.2 },
          markers: [{ id: 'm', role: 'response', at: [1, 2], colour: 'red' }],
        },
      ],
      clips: [{ id: 'c', file: 'x.mp4', setup: 's', phone: 'spare' }],
      configurations: [
        {
          id: 'a',
          excitation: 'force',
          note: 'n',
          dwells: [{ id: 'd', driveHz: 2, who: 'x' }],
          sweeps: [],
          ringdowns: [],
        },
      ],
    };
    expect(JSON.parse(writeTest(read(value)))).toEqual(value);
  });

  it('reading what was written changes nothing more (any unknown JSON beside the known keys)', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (extra) => {
        const once = writeTest(read({ ...minimal, extra }));
        expect(writeTest(readTest(once, 'a'))).toBe(once);
      }),
    );
  });
});

it('any text is either read or refused by an InputError of one line', () => {
  fc.assert(
    fc.property(fc.oneof(fc.string(), fc.json()), (text) => {
      const said = message(() => {
        readTest(text, 'a.dwellbook');
        throw new InputError('read');
      });
      expect(said.split('\n')).toHaveLength(1);
    }),
  );
});
