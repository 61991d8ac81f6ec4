import type { Faults } from './faults.ts';
import type { Dialect } from './recording.ts';
import type { StampForm } from './stamp.ts';

/** What the head of a file says about its rows: which fields are read and how. */
export interface Layout {
  readonly file: string;
  readonly dialect: Dialect;
  /** 1-based line of the first row of data. */
  readonly firstDataLine: number;
  /** Fields of a row. */
  readonly fields: number;
  /** 0-based field of the time stamp; -1 where there is none. */
  readonly stampField: number;
  readonly stampForm: StampForm;
  /** 0-based fields read as numbers, increasing. */
  readonly valueFields: readonly number[];
}

/** Rows as numbers, column by column; owned by the lane and valid until its next call. */
export interface RowBatch {
  length: number;
  /** 1-based line of each row in the file. */
  readonly lines: Uint32Array;
  /** Stamps in the file's own unit, counted from the whole part of the first one; NaN where missing; zeros without a time column. */
  readonly stamps: Float64Array;
  /** One array per field of `valueFields`; NaN where missing or unreadable. */
  readonly values: readonly Float64Array[];
}

/** Turns bytes into rows. Feed bytes, then take batches until there is none; call `finish` behind the last bytes. */
export interface RowLane {
  /** Takes the next bytes once `next` has given null; copies what it needs. */
  feed(bytes: Uint8Array): void;
  /** Says that no more bytes come. */
  finish(): void;
  /** The next full batch, or behind the end what is left; null where more bytes are needed. */
  next(): RowBatch | null;
  readonly faults: Faults;
}

/** An empty batch of `capacity` rows and `columns` value columns. */
export function newBatch(capacity: number, columns: number): RowBatch {
  return {
    length: 0,
    lines: new Uint32Array(capacity),
    stamps: new Float64Array(capacity),
    values: Array.from({ length: columns }, () => new Float64Array(capacity)),
  };
}

/** A copy of a batch that outlives the lane's next call, no longer than its rows. */
export function copyBatch({ length, lines, stamps, values }: RowBatch): RowBatch {
  return {
    length,
    lines: lines.slice(0, length),
    stamps: stamps.slice(0, length),
    values: values.map((column) => column.slice(0, length)),
  };
}
