/** Collects rows as they were logged between two blocks, column by column; grows where rows stand denser than samples. */
export class FreshRows {
  private columns: Float64Array[];
  private length = 0;

  constructor(columns: number) {
    this.columns = Array.from({ length: columns }, () => new Float64Array(64));
  }

  /** Copies rows `from` to `to − 1`. */
  add(columns: readonly Float64Array[], from: number, to: number): void {
    const needed = this.length + to - from;
    if (needed > (this.columns[0]?.length ?? 0)) this.grow(needed);
    for (let c = 0; c < columns.length; c++) this.columns[c].set(columns[c].subarray(from, to), this.length);
    this.length = needed;
  }

  /** What was added since the last call; valid until the next `add`. */
  take(): Float64Array[] {
    const taken = this.columns.map((column) => column.subarray(0, this.length));
    this.length = 0;
    return taken;
  }

  private grow(rows: number): void {
    this.columns = this.columns.map((column) => {
      const larger = new Float64Array(Math.max(rows, 2 * column.length));
      larger.set(column.subarray(0, this.length));
      return larger;
    });
  }
}
