import type { RowBatch } from './rows.ts';

/** Longest stretch of missing values that is bridged by a straight line, samples. */
export const LONGEST_BRIDGE = 5;

/** Rows in which a column has no value, too many in a row to be bridged. */
export interface Stretch {
  /** First row and the one behind the last, counted over the rows kept. */
  readonly fromRow: number;
  readonly toRow: number;
  /** Time of the row before and of the row behind, seconds; NaN where the stretch reaches the end of its run. */
  readonly beforeSeconds: number;
  readonly behindSeconds: number;
  /** 1-based line of its first row. */
  readonly line: number;
}

/** What one value column holds, as a fold over placed batches. */
export class ColumnFold {
  lowest = Number.POSITIVE_INFINITY;
  highest = Number.NEGATIVE_INFINITY;
  /** Rows with a value. */
  present = 0;
  /** Values bridged, and the line of the first. */
  bridged = 0;
  firstBridgedLine = 0;
  readonly stretches: Stretch[] = [];
  private readonly place: number;
  private row = 0;
  private runRow = 0;
  private missingFrom = -1;
  private missingLine = 0;
  private beforeSeconds = Number.NaN;
  private lastSeconds = Number.NaN;

  /** `place` among the value columns of the batches. */
  constructor(place: number) {
    this.place = place;
  }

  /** Takes a batch; `starts` are its rows that start a run behind a gap. */
  push({ length, stamps, lines, values }: RowBatch, starts: readonly number[]): void {
    const column = values[this.place];
    let start = 0;
    for (let i = 0; i < length; i++) {
      if (start < starts.length && starts[start] === i) {
        this.endRun(this.row + i);
        start++;
      }
      const value = column[i];
      if (!Number.isNaN(value)) {
        if (this.missingFrom >= 0) this.close(this.row + i, stamps[i]);
        if (value < this.lowest) this.lowest = value;
        if (value > this.highest) this.highest = value;
        this.present++;
      } else if (this.missingFrom < 0) {
        this.missingFrom = this.row + i;
        this.missingLine = lines[i];
        this.beforeSeconds = i > 0 ? stamps[i - 1] : this.lastSeconds;
      }
    }
    if (length > 0) this.lastSeconds = stamps[length - 1];
    this.row += length;
  }

  /** Closes the last run; call once behind the last batch. */
  finish(): void {
    this.endRun(this.row);
  }

  get constant(): boolean {
    return this.present > 0 && this.lowest === this.highest;
  }

  private endRun(row: number): void {
    if (this.missingFrom >= 0) this.close(row, Number.NaN);
    this.runRow = row;
  }

  private close(toRow: number, behindSeconds: number): void {
    const fromRow = this.missingFrom;
    const startsRun = fromRow === this.runRow;
    const wholeRun = startsRun && Number.isNaN(behindSeconds);
    if (toRow - fromRow > LONGEST_BRIDGE || wholeRun) {
      const beforeSeconds = startsRun ? Number.NaN : this.beforeSeconds;
      this.stretches.push({ fromRow, toRow, beforeSeconds, behindSeconds, line: this.missingLine });
    } else {
      if (this.bridged === 0) this.firstBridgedLine = this.missingLine;
      this.bridged += toRow - fromRow;
    }
    this.missingFrom = -1;
  }
}
