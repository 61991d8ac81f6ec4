import { Faults } from './faults.ts';
import { type Layout, newBatch, type RowBatch } from './rows.ts';
import { StampReader } from './stamp.ts';
import { readToken } from './token.ts';

/** Role of a field in a row; a number from 0 on is a place among the value columns. */
export const SKIPPED = -1;
export const STAMP = -2;

/** Fills batches row by row for a lane: what both lanes must do alike. */
export class RowWriter {
  readonly faults = new Faults();
  readonly batch: RowBatch;
  readonly stamps: StampReader;
  /** Role of each field. */
  readonly roles: Int32Array;
  private readonly layout: Layout;
  private readonly capacity: number;
  private faulty = false;
  private delivered = false;

  constructor(layout: Layout, capacity: number) {
    this.layout = layout;
    this.capacity = capacity;
    this.batch = newBatch(capacity, layout.valueFields.length);
    this.stamps = new StampReader(layout.stampForm, layout.dialect.decimal);
    this.roles = new Int32Array(layout.fields + 1).fill(SKIPPED);
    layout.valueFields.forEach((field, place) => {
      this.roles[field] = place;
    });
    if (layout.stampField >= 0) this.roles[layout.stampField] = STAMP;
  }

  get full(): boolean {
    return this.batch.length === this.capacity;
  }

  /** Empties the batch where it was delivered: whoever took it may have shortened it. */
  begin(): void {
    if (this.delivered) this.batch.length = 0;
    this.delivered = false;
  }

  /** The batch, as one that is not to be written to any more. */
  deliver(): RowBatch {
    this.delivered = true;
    return this.batch;
  }

  /** Opens the next row, all of it missing; give every field, then `close`. */
  open(): void {
    const { batch } = this;
    const row = batch.length;
    batch.stamps[row] = this.layout.stampField >= 0 ? Number.NaN : 0;
    for (const column of batch.values) column[row] = Number.NaN;
    this.faulty = false;
  }

  /** Puts the text of a field into the open row. */
  put(line: number, field: number, text: string): void {
    const role = field < this.roles.length ? this.roles[field] : SKIPPED;
    if (role === SKIPPED) return;
    const token = readToken(text, this.layout.dialect.decimal);
    if (token === 'missing') return;
    const value = role === STAMP ? this.stamps.read(text) : token === 'unreadable' ? Number.NaN : token;
    if (Number.isNaN(value)) this.fault(line, field, text);
    else if (role === STAMP) this.batch.stamps[this.batch.length] = value;
    else this.batch.values[role][this.batch.length] = value;
  }

  /**
   * Closes the open row of `fields` fields (an empty one behind a last delimiter not counted). A ragged row keeps its stamp only;
   * as the file's last, without an end of line, it is dropped. A row of empty fields counts only where no stamp tells the time.
   */
  close(line: number, fields: number, cutOff: boolean, text: () => string): void {
    const { batch, layout } = this;
    const row = batch.length;
    if (fields !== layout.fields) {
      if (cutOff) {
        this.faults.incompleteLine = line;
        return;
      }
      for (const column of batch.values) column[row] = Number.NaN;
      this.fault(line, -1, text());
    } else if (!this.faulty && layout.stampField >= 0 && this.blank(row)) return;
    batch.lines[row] = line;
    batch.length = row + 1;
  }

  private fault(line: number, field: number, text: string): void {
    this.faulty = true;
    this.faults.add(line, field, text);
  }

  private blank(row: number): boolean {
    return Number.isNaN(this.batch.stamps[row]) && this.batch.values.every((column) => Number.isNaN(column[row]));
  }
}
