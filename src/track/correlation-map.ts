/** Grey values of a picture for searches, row by row. */
export interface FloatImage {
  readonly data: Float32Array;
  readonly width: number;
  readonly height: number;
}

/**
 * ZNCC of a patch with an image at every place where it lies inside: row by row,
 * (image.width - patch.width + 1) * (image.height - patch.height + 1) values from -1 to 1, 0 where the image is flat.
 */
export type CorrelationMap = (image: FloatImage, patch: FloatImage) => Float32Array;

/** The correlation map by plain sums: for patches of a few hundred pixels in regions, without any start-up cost. */
export function correlatePlainly(image: FloatImage, patch: FloatImage): Float32Array {
  const { data, width } = image;
  const columns = width - patch.width + 1;
  const rows = image.height - patch.height + 1;
  const count = patch.width * patch.height;
  let mean = 0;
  for (const value of patch.data) mean += value;
  mean /= count;
  const centred = patch.data.map((value) => value - mean);
  let energy = 0;
  for (const value of centred) energy += value * value;

  const map = new Float32Array(columns * rows);
  for (let row = 0, to = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++, to++) {
      let sum = 0;
      let squares = 0;
      let product = 0;
      for (let j = 0, i = 0; j < patch.height; j++) {
        let at = (row + j) * width + column;
        for (const end = at + patch.width; at < end; at++, i++) {
          const value = data[at]!;
          sum += value;
          squares += value * value;
          product += value * centred[i]!;
        }
      }
      const spread = energy * (squares - (sum * sum) / count);
      // Below a variance of 0.01 DN squared there is nothing to correlate with.
      map[to] = spread > energy * count * 0.01 ? product / Math.sqrt(spread) : 0;
    }
  }
  return map;
}

/** A local maximum of a correlation map. */
export interface MapPeak {
  readonly column: number;
  readonly row: number;
  readonly score: number;
}

/** The highest local maxima of a map above `least`, best first, none within `apart` of a better one. */
export function highestPeaks(
  map: Float32Array,
  columns: number,
  most: number,
  least: number,
  apart: number,
): MapPeak[] {
  const rows = map.length / columns;
  const peaks: MapPeak[] = [];
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const score = map[row * columns + column]!;
      if (score >= least && isLocalMaximum(map, columns, rows, column, row))
        peaks.push({ column, row, score });
    }
  }
  peaks.sort((a, b) => b.score - a.score);
  const chosen: MapPeak[] = [];
  for (const peak of peaks) {
    if (chosen.length === most) break;
    const taken = chosen.some(
      (other) => Math.hypot(peak.column - other.column, peak.row - other.row) < apart,
    );
    if (!taken) chosen.push(peak);
  }
  return chosen;
}

function isLocalMaximum(
  map: Float32Array,
  columns: number,
  rows: number,
  column: number,
  row: number,
): boolean {
  const score = map[row * columns + column]!;
  for (let y = Math.max(0, row - 1); y <= Math.min(rows - 1, row + 1); y++) {
    for (let x = Math.max(0, column - 1); x <= Math.min(columns - 1, column + 1); x++) {
      if (map[y * columns + x]! > score) return false;
    }
  }
  return true;
}
