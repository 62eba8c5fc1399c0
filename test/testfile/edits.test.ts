import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { editLabel } from '../../src/testfile/edit-labels.ts';
import { freshId } from '../../src/testfile/edit-lists.ts';
import { type Edit, editSchema } from '../../src/testfile/edit-schema.ts';
import { applyEdit, emptyTest, freshTestId } from '../../src/testfile/edits.ts';
import { readTest } from '../../src/testfile/read-test.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import { writeTest } from '../../src/testfile/write-test.ts';

const SHEET = 'configuration-1';

function testAfter(...edits: Edit[]): TestFile {
  return edits.reduce((test, edit) => applyEdit(test, editSchema.parse(edit)), emptyTest('carriage'));
}

const threeClips: Edit = {
  kind: 'add-clips',
  configuration: SHEET,
  setup: 'setup-1',
  clips: [
    { id: 'a', file: 'clips/1.6Hz.mp4', driveHz: 1.6 },
    { id: 'b', file: 'clips/1.7Hz.mp4', driveHz: 1.7 },
    { id: 'c', file: 'clips/IMG_1.mp4' },
  ],
};

describe('clips', () => {
  it('give one dwell each, with the drive frequency where it is known', () => {
    const { clips, configurations } = testAfter(threeClips);
    expect(clips.map((each) => [each.id, each.setup])).toEqual([
      ['a', 'setup-1'],
      ['b', 'setup-1'],
      ['c', 'setup-1'],
    ]);
    expect(configurations[0]?.dwells).toEqual([
      { id: 'a', driveHz: 1.6, clip: 'a' },
      { id: 'b', driveHz: 1.7, clip: 'b' },
      { id: 'c', clip: 'c' },
    ]);
  });

  it('fill the planned dwell of the same drive frequency instead of adding one', () => {
    const planned: Edit = { kind: 'add-dwells', configuration: SHEET, dwells: [{ id: 'p', driveHz: 1.7 }] };
    expect(testAfter(planned, threeClips).configurations[0]?.dwells[0]).toEqual({
      id: 'p',
      driveHz: 1.7,
      clip: 'b',
    });
  });
});

describe('run sheet', () => {
  it('null takes a key away, an absent key stays', () => {
    const test = testAfter(
      threeClips,
      { kind: 'change-dwells', configuration: SHEET, dwells: [{ id: 'a', excluded: 'bumped the bench' }] },
      { kind: 'change-dwells', configuration: SHEET, dwells: [{ id: 'a', driveHz: 1.61, excluded: null }] },
    );
    expect(test.configurations[0]?.dwells[0]).toEqual({ id: 'a', driveHz: 1.61, clip: 'a' });
  });

  it('a dwell is added behind the one named, and none is lost by sorting with half the ids', () => {
    const test = testAfter(
      threeClips,
      { kind: 'add-dwells', configuration: SHEET, dwells: [{ id: 'd' }], after: 'a' },
      { kind: 'order-dwells', configuration: SHEET, ids: ['c', 'b'] },
    );
    expect(test.configurations[0]?.dwells.map((each) => each.id)).toEqual(['c', 'b', 'a', 'd']);
  });

  it('a clip read as a ring-down and back is a dwell again', () => {
    const as = { configuration: SHEET, id: 'c' };
    const ring = testAfter(threeClips, { kind: 'dwell-to-ringdown', ...as });
    expect(ring.configurations[0]?.ringdowns).toEqual([{ id: 'c', clip: 'c' }]);
    const back = applyEdit(ring, { kind: 'ringdown-to-dwell', ...as });
    expect(back.configurations[0]?.dwells.at(-1)).toEqual({ id: 'c', clip: 'c' });
  });
});

describe('camera setup', () => {
  const scale = { from: [0, 0], to: [100, 0], length: 50 } as const;

  it('has at most one response marker: a second takes the place of the first', () => {
    const at = (x: number): [number, number] => [x, 1];
    const test = testAfter(
      { kind: 'place-marker', setup: 'setup-1', marker: { id: 'm1', role: 'response', at: at(1) } },
      { kind: 'place-marker', setup: 'setup-1', marker: { id: 'g1', role: 'ground', at: at(2) } },
      { kind: 'place-marker', setup: 'setup-1', marker: { id: 'g2', role: 'ground', at: at(3) } },
      { kind: 'place-marker', setup: 'setup-1', marker: { id: 'm2', role: 'response', at: at(4) } },
    );
    expect(test.setups[0]?.markers.map((each) => each.id)).toEqual(['g1', 'g2', 'm2']);
  });

  it('refuses a scale without a length and one of no length', () => {
    const partly: Edit = { kind: 'scale', setup: 'setup-1', scale: { from: [0, 0], to: [1, 1] } };
    expect(() => testAfter(partly)).toThrow(InputError);
    expect(() =>
      testAfter({ kind: 'scale', setup: 'setup-1', scale: { ...partly.scale, length: 0 } }),
    ).toThrow(/more than 0 mm/);
  });

  it('a scale keeps what a later edit does not name', () => {
    const test = testAfter(
      { kind: 'scale', setup: 'setup-1', scale: { from: [0, 0], to: [100, 0], length: 50, lengthU: 0.1 } },
      { kind: 'scale', setup: 'setup-1', scale: { to: [101, 0] } },
    );
    expect(test.setups[0]?.scale).toEqual({ ...scale, to: [101, 0], lengthU: 0.1 });
  });
});

it('an edit of something that is not there is refused by name', () => {
  expect(() => testAfter({ kind: 'remove-marker', setup: 'setup-1', id: 'ghost' })).toThrow(/"ghost"/);
  expect(() => testAfter({ kind: 'change-clip', id: 'ghost', changes: {} })).toThrow(/"ghost"/);
});

it('identity: no edit changes the test it is given, and every result can be written and read back', () => {
  const ids = fc.constantFrom('a', 'b', 'c', 'x');
  const number = fc.double({ min: -1e6, max: 1e6, noNaN: true });
  const edits: fc.Arbitrary<Edit> = fc.oneof(
    ids.map((id): Edit => ({ kind: 'remove-dwells', configuration: SHEET, ids: [id] })),
    fc
      .tuple(ids, number)
      .map(
        ([id, driveHz]): Edit => ({ kind: 'change-dwells', configuration: SHEET, dwells: [{ id, driveHz }] }),
      ),
    ids.map((id): Edit => ({ kind: 'add-dwells', configuration: SHEET, dwells: [{ id }] })),
    fc.tuple(ids, number, number).map(
      ([id, x, y]): Edit => ({
        kind: 'place-marker',
        setup: 'setup-1',
        marker: { id, role: 'ground', at: [x, y] },
      }),
    ),
    ids.map((id): Edit => ({ kind: 'add-configuration', id, label: id, like: SHEET })),
    fc.string().map((title): Edit => ({ kind: 'title', title })),
  );
  fc.assert(
    fc.property(fc.array(edits, { maxLength: 12 }), (list) => {
      let test = testAfter(threeClips);
      for (const edit of list) {
        const before = writeTest(test);
        let next = test;
        try {
          next = applyEdit(test, edit);
        } catch (error) {
          expect(error).toBeInstanceOf(InputError);
        }
        expect(writeTest(test)).toBe(before);
        expect(readTest(writeTest(next), 'again')).toEqual(JSON.parse(writeTest(next)));
        expect(editLabel(edit).length).toBeGreaterThan(3);
        test = next;
      }
    }),
    { seed: 11, numRuns: 200 },
  );
});

it('fresh ids are not taken and hold only letters, digits and hyphens', () => {
  const test = testAfter(threeClips);
  expect(freshTestId(test, 'A')).toBe('a-2');
  expect(freshId(new Set(), 'Spalt 4 mm / größer')).toBe('spalt-4-mm-gro-er');
  expect(freshId(new Set(), '…')).toBe('item');
});
