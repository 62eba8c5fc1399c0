/** A range of positions in the coded frame, px. */
export interface TravelBox {
  readonly minX: number;
  readonly minY: number;
  readonly maxX: number;
  readonly maxY: number;
}

/** The range a marker has moved in: where it may be expected again after a loss, and how large its region must be. */
export class Travel {
  private range: TravelBox | null = null;

  /** The range so far; null before the first position. */
  get box(): TravelBox | null {
    return this.range;
  }

  /** Takes a trusted position in. */
  include(x: number, y: number): void {
    const { range } = this;
    this.range = range
      ? {
          minX: Math.min(range.minX, x),
          minY: Math.min(range.minY, y),
          maxX: Math.max(range.maxX, x),
          maxY: Math.max(range.maxY, y),
        }
      : { minX: x, minY: y, maxX: x, maxY: y };
  }

  /** The larger side of the range, px; 0 before there is one. */
  get extentPx(): number {
    const { range } = this;
    return range ? Math.max(range.maxX - range.minX, range.maxY - range.minY) : 0;
  }

  /**
   * Whether a position is one the marker may well have moved to: within the range, widened by its own extent (a
   * growing oscillation) and by `slackPx`.
   */
  allows(x: number, y: number, slackPx: number): boolean {
    const { range } = this;
    if (!range) return true;
    const slack = this.extentPx + slackPx;
    return (
      x >= range.minX - slack && x <= range.maxX + slack && y >= range.minY - slack && y <= range.maxY + slack
    );
  }
}
