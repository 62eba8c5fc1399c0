/** Middle value; the mean of the middle two for an even count. */
export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/** `median (least-most)` with a fixed number of decimals. */
export function spread(values: readonly number[], decimals: number): string {
  const [least, most] = [Math.min(...values), Math.max(...values)];
  return `${median(values).toFixed(decimals)} (${least.toFixed(decimals)}-${most.toFixed(decimals)})`;
}

/** A table in columns, the first to the left and the others to the right. */
export function table(rows: readonly (readonly string[])[]): string {
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  return rows
    .map((row) =>
      row
        .map((cell, column) => (column === 0 ? cell.padEnd(widths[0]!) : cell.padStart(widths[column]!)))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}
