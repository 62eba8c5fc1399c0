import { evenNormal } from './even-normal.ts';
import { CLOUD_SIZE, type KnowledgeCloud } from './knowledge-cloud.ts';
import type { PlanFit } from './plan-points.ts';

/**
 * The cloud of a resonance fit: its estimates with their covariance, normal in the logarithms so that none
 * becomes negative.
 */
export function cloudFromFit(fit: PlanFit): KnowledgeCloud {
  const centre = [fit.gainMm, fit.naturalHz, fit.dampingRatio];
  const relative = fit.covariance.map(
    (c, i) => c / ((centre[Math.floor(i / 3)] ?? 1) * (centre[i % 3] ?? 1)),
  );
  const root = lowerRoot3(relative);
  const cloud = [0, 1, 2].map(() => new Float64Array(CLOUD_SIZE));
  for (let k = 0; k < CLOUD_SIZE; k++) {
    const z = [evenNormal(k, 0), evenNormal(k, 1), evenNormal(k, 2)];
    cloud.forEach((values, row) => {
      const shift = z.reduce((sum, value, column) => sum + (root[row * 3 + column] ?? 0) * value, 0);
      values[k] = (centre[row] ?? 0) * Math.exp(shift);
    });
  }
  const [gainMm, naturalHz, dampingRatio] = cloud;
  if (gainMm === undefined || naturalHz === undefined || dampingRatio === undefined)
    throw new Error('unreachable');
  return { gainMm, naturalHz, dampingRatio };
}

/** Lower triangular root of a 3 x 3 covariance; a parameter without variance stays fixed. */
function lowerRoot3(matrix: readonly number[]): Float64Array {
  const root = new Float64Array(9);
  for (let row = 0; row < 3; row++) {
    for (let column = 0; column <= row; column++) {
      let sum = matrix[row * 3 + column] ?? 0;
      for (let k = 0; k < column; k++) sum -= root[row * 3 + k]! * root[column * 3 + k]!;
      if (row === column) root[row * 3 + row] = Math.sqrt(Math.max(sum, 0));
      else root[row * 3 + column] = root[column * 3 + column]! > 0 ? sum / root[column * 3 + column]! : 0;
    }
  }
  return root;
}
