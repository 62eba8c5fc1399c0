import type { Results } from '../../src/engine/results.ts';
import type { TestFile } from '../../src/testfile/schema.ts';

/**
 * The results to show: the fit of the test as it stands, with the fuller results of the dwells and ring-downs that
 * were measured since the test was opened in their places.
 */
export function mergeResults(test: TestFile, fitted: Results, measured: readonly Results[]): Results {
  const key = (each: { configuration: string; id: string }): string => `${each.configuration}\n${each.id}`;
  const dwells = new Map(measured.flatMap((each) => each.dwells).map((each) => [key(each), each]));
  const ringdowns = new Map(measured.flatMap((each) => each.ringdowns).map((each) => [key(each), each]));
  const clips = new Map(measured.flatMap((each) => each.clips).map((each) => [each.id, each]));
  const excluded = new Map(
    test.configurations.flatMap((sheet) =>
      sheet.dwells.map((dwell) => [key({ configuration: sheet.id, id: dwell.id }), dwell.excluded ?? null]),
    ),
  );
  const known = new Set(fitted.dwells.map(key));
  return {
    ...fitted,
    clips: [...fitted.clips.filter((each) => !clips.has(each.id)), ...clips.values()],
    dwells: [
      ...fitted.dwells.map((each) => dwells.get(key(each)) ?? each),
      ...[...dwells.values()].filter((each) => !known.has(key(each))),
    ].map((each) => ({ ...each, excluded: excluded.get(key(each)) ?? null })),
    ringdowns: [...fitted.ringdowns.filter((each) => !ringdowns.has(key(each))), ...ringdowns.values()],
  };
}
