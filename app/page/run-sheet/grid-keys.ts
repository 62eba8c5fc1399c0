/** A cell of the run sheet by row and column, from 0. */
export interface CellPlace {
  readonly row: number;
  readonly column: number;
}

/** Where a key takes the focus in a grid; null for keys that do not move it. */
export function movedPlace(
  at: CellPlace,
  key: string,
  rows: number,
  columns: number,
  wide: boolean,
): CellPlace | null {
  const within = (row: number, column: number): CellPlace => ({
    row: Math.min(rows - 1, Math.max(0, row)),
    column: Math.min(columns - 1, Math.max(0, column)),
  });
  switch (key) {
    case 'ArrowUp':
      return within(at.row - 1, at.column);
    case 'ArrowDown':
      return within(at.row + 1, at.column);
    case 'ArrowLeft':
      return within(at.row, at.column - 1);
    case 'ArrowRight':
      return within(at.row, at.column + 1);
    case 'Home':
      return within(wide ? 0 : at.row, 0);
    case 'End':
      return within(wide ? rows - 1 : at.row, columns - 1);
    case 'PageUp':
      return within(at.row - 10, at.column);
    case 'PageDown':
      return within(at.row + 10, at.column);
    default:
      return null;
  }
}
