import type { Measured } from '../numeric/measured.ts';
import type { ResonanceModel } from '../resonance/models.ts';
import { evenNormal } from './even-normal.ts';
import type { PlanPoint } from './plan-points.ts';
import { planResponse } from './plan-response.ts';
import type { StartingKnowledge } from './starting-knowledge.ts';

/**
 * What is known of an oscillator, as many equally likely oscillators. All arrays have one length.
 * `gainMm` (static gain, mm) is null where neither a static deflection nor a dwell tells it.
 */
export interface KnowledgeCloud {
  readonly naturalHz: Float64Array;
  readonly dampingRatio: Float64Array;
  readonly gainMm: Float64Array | null;
}

/** Number of oscillators in a cloud. */
export const CLOUD_SIZE = 512;
const GRID_HZ = 121;
const GRID_DAMPING = 41;
const REFINEMENTS = 5;
const RELEVANT = 1e-4; // nodes below this fraction of the likeliest are outside the region looked at
const TWO_SIDED_90 = 1.645;
// A model that is a little wrong must not shut out the truth: points are believed to no better than this.
const BELIEVED_RELATIVE = 0.03;
const BELIEVED_LAG_RAD = 0.05;

interface Region {
  hz: [number, number];
  logDamping: [number, number];
}

interface Node {
  naturalHz: number;
  dampingRatio: number;
  weight: number;
  gainMm: number;
  uGainMm: number;
}

/**
 * Joins starting knowledge with the dwells measured so far (none, one, or more than a fit needs) on a grid of
 * oscillators, each weighted by how well it fits both; the static gain is solved for in each. Points count with
 * at least 3 % (lag: 3 degrees), so that a model that is a little wrong does not mislead the plan.
 *
 * @param gain static gain with its uncertainty where known beforehand, mm
 * Source: Bayes' rule with the gain integrated out; a gain that is not known beforehand has a uniform logarithm.
 */
export function cloudFromKnowledge(
  model: ResonanceModel,
  start: StartingKnowledge,
  gain: Measured | null,
  points: readonly PlanPoint[],
): KnowledgeCloud {
  const { value, u } = start.naturalHz;
  const spread = logDampingSpread(start);
  const middle = Math.log(start.dampingRatio.value);
  let region: Region = {
    hz: [Math.max(value - 4 * u, value / 5), value + 4 * u],
    logDamping: [middle - 3.5 * spread, Math.min(middle + 3.5 * spread, Math.log(0.9))],
  };
  // look again, closer, at the part of the region that matters
  let nodes = nodesIn(region, model, start, gain, points);
  for (let k = 0; k < REFINEMENTS; k++) {
    const closer = relevantRegion(nodes, region);
    const gained =
      width(region.hz) / width(closer.hz) > 1.5 || width(region.logDamping) / width(closer.logDamping) > 1.5;
    if (!gained) break;
    region = closer;
    nodes = nodesIn(region, model, start, gain, points);
  }
  return sampled(nodes, gain?.value != null || points.length > 0);
}

function logDampingSpread({ dampingRatio: { low, high } }: StartingKnowledge): number {
  return Math.max(Math.log(high / low) / (2 * TWO_SIDED_90), 0.01);
}

const width = ([low, high]: [number, number]) => high - low;

function nodesIn(
  region: Region,
  model: ResonanceModel,
  start: StartingKnowledge,
  gain: Measured | null,
  points: readonly PlanPoint[],
): Node[] {
  const nodes: Node[] = [];
  const middle = Math.log(start.dampingRatio.value);
  const spread = logDampingSpread(start);
  let likeliest = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < GRID_HZ; i++) {
    const naturalHz = region.hz[0] + ((i + 0.5) / GRID_HZ) * width(region.hz);
    for (let j = 0; j < GRID_DAMPING; j++) {
      const logDamping = region.logDamping[0] + ((j + 0.5) / GRID_DAMPING) * width(region.logDamping);
      const dampingRatio = Math.exp(logDamping);
      const fit = gainAt(model, naturalHz, dampingRatio, gain, points);
      const logWeight =
        -0.5 * ((naturalHz - start.naturalHz.value) / start.naturalHz.u) ** 2 -
        0.5 * ((logDamping - middle) / spread) ** 2 +
        fit.logLikelihood;
      likeliest = Math.max(likeliest, logWeight);
      nodes.push({ naturalHz, dampingRatio, weight: logWeight, gainMm: fit.gainMm, uGainMm: fit.uGainMm });
    }
  }
  for (const node of nodes) node.weight = Math.exp(node.weight - likeliest);
  return nodes;
}

/** Best static gain of one oscillator for the points, its uncertainty, and the likelihood with the gain integrated out. */
function gainAt(
  model: ResonanceModel,
  naturalHz: number,
  dampingRatio: number,
  gain: Measured | null,
  points: readonly PlanPoint[],
): { gainMm: number; uGainMm: number; logLikelihood: number } {
  const before =
    gain?.value != null && gain.value > 0 ? { value: gain.value, u: gain.u ?? 0.1 * gain.value } : null;
  if (points.length === 0) return { gainMm: before?.value ?? 1, uGainMm: before?.u ?? 0, logLikelihood: 0 };
  let sumHH = before === null ? 0 : 1 / before.u ** 2;
  let sumHA = before === null ? 0 : before.value / before.u ** 2;
  let sumAA = before === null ? 0 : (before.value / before.u) ** 2;
  let lagChi2 = 0;
  for (const point of points) {
    const { amplitude, lagRad } = planResponse(model, point.driveHz, naturalHz, dampingRatio);
    const variance = (point.uAmplitudeMm ?? 0) ** 2 + (BELIEVED_RELATIVE * point.amplitudeMm) ** 2;
    sumHH += amplitude ** 2 / variance;
    sumHA += (amplitude * point.amplitudeMm) / variance;
    sumAA += point.amplitudeMm ** 2 / variance;
    if (point.lagDeg != null) {
      const off = (point.lagDeg * Math.PI) / 180 - lagRad;
      const turned = Math.atan2(Math.sin(off), Math.cos(off));
      lagChi2 += turned ** 2 / (BELIEVED_LAG_RAD ** 2 + (((point.uLagDeg ?? 0) * Math.PI) / 180) ** 2);
    }
  }
  const gainMm = sumHA / sumHH;
  const chi2 = Math.max(sumAA - gainMm * sumHA, 0) + lagChi2;
  const logLikelihood = -0.5 * chi2 - 0.5 * Math.log(sumHH) - (before === null ? Math.log(gainMm) : 0);
  return { gainMm, uGainMm: 1 / Math.sqrt(sumHH), logLikelihood };
}

/** The smallest box around the nodes that matter, one grid step wider on each side, inside the old box. */
function relevantRegion(nodes: readonly Node[], region: Region): Region {
  const box = {
    hz: [Infinity, -Infinity] as [number, number],
    logDamping: [Infinity, -Infinity] as [number, number],
  };
  for (const { naturalHz, dampingRatio, weight } of nodes) {
    if (weight < RELEVANT) continue;
    const logDamping = Math.log(dampingRatio);
    box.hz = [Math.min(box.hz[0], naturalHz), Math.max(box.hz[1], naturalHz)];
    box.logDamping = [Math.min(box.logDamping[0], logDamping), Math.max(box.logDamping[1], logDamping)];
  }
  const wider = (inner: [number, number], outer: [number, number], cells: number): [number, number] => {
    const step = width(outer) / cells;
    return [Math.max(inner[0] - step, outer[0]), Math.min(inner[1] + step, outer[1])];
  };
  return {
    hz: wider(box.hz, region.hz, GRID_HZ),
    logDamping: wider(box.logDamping, region.logDamping, GRID_DAMPING),
  };
}

/** Draws equally likely oscillators from weighted nodes at even steps of the cumulated weight; no chance involved. */
function sampled(nodes: readonly Node[], gainKnown: boolean): KnowledgeCloud {
  const total = nodes.reduce((sum, node) => sum + node.weight, 0);
  const naturalHz = new Float64Array(CLOUD_SIZE);
  const dampingRatio = new Float64Array(CLOUD_SIZE);
  const gainMm = new Float64Array(CLOUD_SIZE);
  let index = -1;
  let passed = 0;
  for (let k = 0; k < CLOUD_SIZE; k++) {
    const wanted = ((k + 0.5) / CLOUD_SIZE) * total;
    while (passed < wanted && index < nodes.length - 1) {
      index++;
      passed += nodes[index]?.weight ?? 0;
    }
    const node = nodes[index] ?? nodes[0];
    if (node === undefined) throw new Error('a cloud needs nodes');
    naturalHz[k] = node.naturalHz;
    dampingRatio[k] = node.dampingRatio;
    gainMm[k] = Math.max(node.gainMm + node.uGainMm * evenNormal(k, 0), 0.01 * node.gainMm);
  }
  return { naturalHz, dampingRatio, gainMm: gainKnown ? gainMm : null };
}

/** Quantile of values that are equally likely; `probability` in [0, 1]. */
export function quantileOf(values: ArrayLike<number>, probability: number): number {
  return quantileOfSorted(Float64Array.from(values).sort(), probability);
}

/** Quantile of equally likely values that are in ascending order already. */
export function quantileOfSorted(sorted: Float64Array, probability: number): number {
  const place = Math.min(Math.max(probability * sorted.length - 0.5, 0), sorted.length - 1);
  const below = Math.floor(place);
  const low = sorted[below]!;
  return low + (place - below) * ((sorted[below + 1] ?? low) - low);
}
