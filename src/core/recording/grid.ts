import { LONGEST_BRIDGE } from './column-fold.ts';
import { FreshRows } from './fresh-rows.ts';
import { cubicWeights } from './interpolation.ts';
import type { UniformBlock } from './recording.ts';
import type { RowBatch } from './rows.ts';
import type { Run } from './runs.ts';

/** Rows kept between batches: an open bridge and the neighbours of an interpolation. */
const MARGIN = LONGEST_BRIDGE + 8;

/** What the grid is made of. */
export interface GridPlan {
  readonly runs: readonly Run[];
  readonly rateHz: number;
  /** True where samples are interpolated between uneven stamps; else a row is a sample. */
  readonly interpolate: boolean;
  /** Places of the channels among the value columns of the batches. */
  readonly places: readonly number[];
  /** Samples of a block at the most. */
  readonly blockRows: number;
}

/** Turns placed batches into blocks on the uniform grid: bridges missing values and, where the stamps are uneven, interpolates. */
export class Grid {
  private readonly plan: GridPlan;
  private readonly times: Float64Array;
  private readonly columns: readonly Float64Array[];
  private readonly output: readonly Float64Array[];
  private readonly weights = new Float64Array(4);
  /** Rows seen before the batch, and the run they belong to. */
  private row = 0;
  private run = 0;
  /** Rows held of the run; the first `scanned` have no value missing, the first `used` are samples already. */
  private held = 0;
  private scanned = 0;
  private used = 0;
  private nextSample = 0;
  private left = 0;
  /** Rows at or before the last sample, as they were logged, and how many of those held are among them already. */
  private readonly fresh: FreshRows;
  private taken = 0;

  /** `batchRows` is the most that a batch holds. */
  constructor(plan: GridPlan, batchRows: number) {
    this.plan = plan;
    const empty = (length: number) => plan.places.map(() => new Float64Array(length));
    this.times = new Float64Array(batchRows + MARGIN);
    this.columns = empty(batchRows + MARGIN);
    this.output = plan.interpolate ? empty(plan.blockRows) : [];
    this.fresh = new FreshRows(plan.interpolate ? plan.places.length : 0);
  }

  /** The blocks that a batch completes; each is valid until the next is taken. */
  *push(batch: RowBatch): Generator<UniformBlock> {
    const { runs } = this.plan;
    for (let i = 0; i < batch.length && this.run < runs.length; ) {
      const run = runs[this.run];
      const row = this.row + i;
      if (row < run.fromRow) {
        i = Math.min(batch.length, run.fromRow - this.row);
        continue;
      }
      const take = Math.min(batch.length - i, run.toRow - row);
      this.append(batch, i, take, run);
      i += take;
      const ends = row + take === run.toRow;
      this.bridge(ends);
      yield* this.plan.interpolate ? this.interpolated(run, ends) : this.asTheyAre(run);
      if (ends) this.startRun();
    }
    this.row += batch.length;
  }

  private startRun(): void {
    this.run++;
    this.held = this.scanned = this.used = this.nextSample = this.left = this.taken = 0;
  }

  private append(batch: RowBatch, from: number, rows: number, run: Run): void {
    this.plan.places.forEach((place, c) => {
      this.columns[c].set(batch.values[place].subarray(from, from + rows), this.held);
    });
    if (this.plan.interpolate)
      for (let i = 0; i < rows; i++) this.times[this.held + i] = batch.stamps[from + i] - run.firstStampSeconds;
    this.held += rows;
  }

  /** Fills missing values between two others by a straight line, at the ends of a run by the nearest; moves `scanned` on. */
  private bridge(ends: boolean): void {
    let scanned = this.held;
    for (const column of this.columns) {
      for (let i = this.scanned; i < this.held; i++) {
        if (!Number.isNaN(column[i])) continue;
        let behind = i + 1;
        while (behind < this.held && Number.isNaN(column[behind])) behind++;
        if (behind === this.held && !ends) {
          scanned = Math.min(scanned, i);
          break;
        }
        this.fill(column, i, behind);
        i = behind;
      }
    }
    this.scanned = scanned;
  }

  private fill(column: Float64Array, from: number, behind: number): void {
    const before = from - 1;
    if (before < 0) column.fill(column[behind], from, behind);
    else if (behind === this.held) column.fill(column[before], from, behind);
    else {
      const place = (row: number) => (this.plan.interpolate ? this.times[row] : row);
      const span = place(behind) - place(before);
      const slope = span > 0 ? (column[behind] - column[before]) / span : 0;
      for (let i = from; i < behind; i++) column[i] = column[before] + slope * (place(i) - place(before));
    }
  }

  private *asTheyAre(run: Run): Generator<UniformBlock> {
    for (let from = this.used; from < this.scanned; from += this.plan.blockRows) {
      const to = Math.min(from + this.plan.blockRows, this.scanned);
      const channels = this.columns.map((column) => column.subarray(from, to));
      yield this.block(run, channels, channels, to - from);
    }
    this.forget(this.scanned - 1);
    this.used = this.scanned;
  }

  private *interpolated(run: Run, ends: boolean): Generator<UniformBlock> {
    let filled = 0;
    while (this.nextSample + filled < run.samples && this.reaches(this.nextSample + filled, ends)) {
      this.interpolate((this.nextSample + filled) / this.plan.rateHz, ends, filled);
      filled++;
      if (filled < this.plan.blockRows) continue;
      yield this.filledBlock(run, filled);
      filled = 0;
    }
    if (filled > 0) yield this.filledBlock(run, filled);
    this.takeRows();
    this.forget(Math.min(this.left - 1, this.held - 4, this.scanned - 1));
  }

  /** Moves `left` to the last row at or before a sample; true where all the points around it are there. */
  private reaches(sample: number, ends: boolean): boolean {
    const x = sample / this.plan.rateHz;
    while (this.left + 2 < this.scanned && this.times[this.left + 1] <= x) this.left++;
    return ends || Math.max(this.left - 1, 0) + 3 < this.scanned;
  }

  private interpolate(x: number, ends: boolean, to: number): void {
    const { times, weights, columns, output, scanned } = this;
    if (scanned < 4) {
      const span = times[this.left + 1] - times[this.left];
      const share = span > 0 ? (x - times[this.left]) / span : 0;
      columns.forEach((column, c) => {
        output[c][to] = column[this.left] + share * (column[this.left + 1] - column[this.left]);
      });
      return;
    }
    const base = Math.max(0, ends ? Math.min(this.left - 1, scanned - 4) : this.left - 1);
    cubicWeights(times, base, x, weights);
    const [w0, w1, w2, w3] = weights;
    for (let c = 0; c < columns.length; c++) {
      const column = columns[c];
      output[c][to] = w0 * column[base] + w1 * column[base + 1] + w2 * column[base + 2] + w3 * column[base + 3];
    }
  }

  private filledBlock(run: Run, length: number): UniformBlock {
    this.takeRows();
    const channels = this.output.map((column) => column.subarray(0, length));
    return this.block(run, channels, this.fresh.take(), length);
  }

  private takeRows(): void {
    if (this.taken > this.left) return;
    this.fresh.add(this.columns, this.taken, this.left + 1);
    this.taken = this.left + 1;
  }

  private block(run: Run, channels: readonly Float64Array[], rows: Float64Array[], length: number): UniformBlock {
    const firstSample = this.nextSample;
    this.nextSample += length;
    const startSeconds = run.startSeconds + firstSample / this.plan.rateHz;
    return { run: this.run, firstSample, startSeconds, length, channels, rows };
  }

  /** Drops the first `rows` rows held. */
  private forget(rows: number): void {
    if (rows <= 0) return;
    for (const column of this.columns) column.copyWithin(0, rows, this.held);
    if (this.plan.interpolate) this.times.copyWithin(0, rows, this.held);
    this.held -= rows;
    this.scanned -= rows;
    this.left = Math.max(0, this.left - rows);
    this.taken = Math.max(0, this.taken - rows);
  }
}
