import { asciiChunks } from './bytes.ts';
import { Clock, type ClockRepairs } from './clock.ts';
import { ColumnFold } from './column-fold.ts';
import type { Faults } from './faults.ts';
import { NumberLane, QuoteFound } from './number-lane.ts';
import type { ByteSource } from './recording.ts';
import { copyBatch, type Layout, type RowBatch, type RowLane } from './rows.ts';
import { TextLane } from './text-lane.ts';
import { type TimeBase, TimeBaseFold } from './time-base.ts';
import { evenRule, learnTimeRule, type Opening, type TimeRule } from './time-rule.ts';
import type { TimeColumn } from './time-values.ts';

/** Rows from which the time rule is learned; a fixed number, so that no block size matters. */
const OPENING_ROWS = 16_384;

/** How a source is read, pass after pass. */
export interface Reading {
  readonly source: ByteSource;
  readonly layout: Layout;
  readonly time: TimeColumn;
  readonly rateHz: number | undefined;
  readonly quoted: boolean;
  readonly blockRows: number;
  readonly memoryBytes: number;
  readonly onProgress: ((bytesRead: number) => void) | undefined;
}

/** What the first pass found. */
export interface Survey {
  readonly reading: Reading;
  readonly rule: TimeRule;
  /** Rows of data in the file, and those kept. */
  readonly rows: number;
  readonly keptRows: number;
  readonly bytes: number;
  readonly time: TimeBase | null;
  readonly columns: readonly ColumnFold[];
  readonly faults: Faults;
  readonly repairs: ClockRepairs;
  /** All placed batches, where they fit into the memory allowed; else null. */
  readonly batches: readonly RowBatch[] | null;
}

/**
 * First pass over a recording: time base, columns, faults, and the numbers themselves where they fit. Starts over in the text lane
 * where a quote turns up behind the head. Throws UserError('input') where time runs backwards.
 */
export async function survey(reading: Reading): Promise<Survey> {
  try {
    return await surveyOnce(reading);
  } catch (error) {
    if (!(error instanceof QuoteFound)) throw error;
    return surveyOnce({ ...reading, quoted: true });
  }
}

async function surveyOnce(reading: Reading): Promise<Survey> {
  const { layout, time, rateHz, blockRows } = reading;
  const rule = await learnRule(reading);
  const lane = newLane(reading, blockRows);
  const clock = newClock(reading, rule);
  const timeBase = new TimeBaseFold(rule);
  const columns = layout.valueFields.map((_, place) => new ColumnFold(place));
  const memory = new Memory(reading.memoryBytes);
  let [rows, keptRows, bytes] = [0, 0, 0];
  const progress = (read: number) => {
    bytes = read;
    reading.onProgress?.(read);
  };
  for await (const batch of laneBatches(reading, lane, progress)) {
    rows += batch.length;
    clock.place(batch);
    keptRows += batch.length;
    const starts = timeBase.push(batch);
    for (const column of columns) column.push(batch, starts);
    memory.keep(batch);
  }
  for (const column of columns) column.finish();
  return {
    reading,
    rule,
    rows,
    keptRows,
    bytes,
    time: keptRows > 0 ? timeBase.result(time.kind === 'none' || time.kind === 'counter' ? rateHz : undefined) : null,
    columns,
    faults: lane.faults,
    repairs: clock.repairs,
    batches: memory.batches,
  };
}

/** The placed batches of one more pass over the source; each is valid until the next. */
export async function* placedBatches({ reading, rule }: Survey): AsyncGenerator<RowBatch> {
  const clock = newClock(reading, rule);
  for await (const batch of laneBatches(reading, newLane(reading, reading.blockRows), reading.onProgress)) {
    clock.place(batch);
    yield batch;
  }
}

function newLane({ layout, quoted }: Reading, capacity: number): RowLane {
  return quoted ? new TextLane(layout, capacity) : new NumberLane(layout, capacity);
}

function newClock({ layout, time }: Reading, rule: TimeRule): Clock {
  return new Clock(layout.file, rule, time.kind === 'none');
}

async function* laneBatches(
  { source, layout }: Reading,
  lane: RowLane,
  onProgress?: (bytesRead: number) => void,
): AsyncGenerator<RowBatch> {
  for await (const chunk of asciiChunks(source, layout.dialect.encoding, onProgress)) {
    lane.feed(chunk);
    for (let batch = lane.next(); batch; batch = lane.next()) yield batch;
  }
  lane.finish();
  for (let batch = lane.next(); batch; batch = lane.next()) yield batch;
}

async function learnRule(reading: Reading): Promise<TimeRule> {
  const { time, rateHz } = reading;
  if (time.kind === 'none') return evenRule(rateHz as number);
  const lane = newLane(reading, OPENING_ROWS);
  for await (const batch of laneBatches(reading, lane))
    return learnTimeRule(opening(batch), time.unitsPerSecond, time.kind === 'clock');
  return learnTimeRule({ stamps: new Float64Array(0), same: new Uint8Array(0) }, time.unitsPerSecond, false);
}

function opening({ length, stamps, values }: RowBatch): Opening {
  const same = Uint8Array.from({ length }, (_, row) =>
    row > 0 && values.every((column) => Object.is(column[row], column[row - 1])) ? 1 : 0,
  );
  return { stamps: stamps.slice(0, length), same };
}

/** Keeps copies of batches until they outgrow the memory allowed, then none. */
class Memory {
  batches: RowBatch[] | null = [];
  private left: number;

  constructor(bytes: number) {
    this.left = bytes;
  }

  keep(batch: RowBatch): void {
    if (!this.batches) return;
    this.left -= batch.length * (12 + 8 * batch.values.length);
    if (this.left < 0) this.batches = null;
    else this.batches.push(copyBatch(batch));
  }
}
