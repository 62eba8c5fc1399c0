import type { CautionSituation } from './cautions.ts';
import type { KnowledgeCloud } from './knowledge-cloud.ts';
import type { PlanInput, PlanRow } from './plan-types.ts';

/** What about the input and its rows calls for a caution. */
export function situationsOf(input: PlanInput, rows: readonly PlanRow[]): Set<CautionSituation> {
  const situations = new Set<CautionSituation>(input.situations ?? []);
  if (input.travelLimitMm == null) situations.add('no-travel-limit');
  if (rows.some((row) => row.travel === 'refused' || row.travel === 'ramp'))
    situations.add('near-travel-limit');
  if (rows.length === 0 || rows.some((row) => row.cautionsHere)) situations.add('toward-peak');
  return situations;
}

/** The steps that are not to be run. */
function refusals(rows: readonly PlanRow[]): string[] {
  const refused = rows.filter((row) => row.aboveLimit).map((row) => row.driveHz);
  return refused.length === 0
    ? []
    : [`Not to be run, because the travel limit may be passed: ${refused.join(', ')} Hz.`];
}

/** A slow beat that has not died is the case in which a clip deceives. */
function slowBeats(rows: readonly PlanRow[]): string[] {
  const slow = rows.flatMap(({ beatPeriodS, filmS, waitS }) =>
    beatPeriodS !== null && beatPeriodS > filmS && beatPeriodS < 2 * waitS ? [beatPeriodS] : [],
  );
  if (slow.length === 0) return [];
  return [
    `Keep to the waiting times: until they are over the swing beats once in up to ${Math.max(...slow).toPrecision(2)} s, longer than a clip, and would pass for a drift or for steady.`,
  ];
}

/** What is lost while nothing tells the size of the motion. */
function unknownSize(cloud: KnowledgeCloud, input: PlanInput): string[] {
  if (cloud.gainMm !== null) return [];
  const limit = input.travelLimitMm == null ? '' : ' and watches the travel limit';
  return [
    `The size of the motion is not known: give the static deflection, or measure the first dwell and plan again, and the plan predicts it${limit}.`,
  ];
}

/** What a reader of the whole plan has to know beside its rows, one sentence each. */
export function planWarnings(rows: readonly PlanRow[], cloud: KnowledgeCloud, input: PlanInput): string[] {
  return [...refusals(rows), ...slowBeats(rows), ...unknownSize(cloud, input)];
}
