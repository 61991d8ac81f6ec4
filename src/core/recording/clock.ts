import { UserError } from '../user-error.ts';
import type { RowBatch } from './rows.ts';
import type { TimeRule } from './time-rule.ts';

/** Rows without a stamp that are placed one period behind each other; more of them in a row are dropped. */
const LONGEST_FILL = 5;
/** Periods by which a counter may be on after it started again from zero. */
const PERIODS_BEHIND_WRAP = 16;

/** A kind of repair: how often, and the line of the first. */
export interface Repair {
  count: number;
  firstLine: number;
}

/** What the clock had to repair. */
export interface ClockRepairs {
  /** Rows dropped because they repeat the stamp before. */
  readonly repeated: Repair;
  /** Rows without a stamp, placed a period behind the row before. */
  readonly filled: Repair;
  /** Rows without a stamp, dropped. */
  readonly lost: Repair;
  /** Counter or clock started again from zero. */
  readonly wrapped: Repair;
}

/**
 * Gives every row its time: turns a batch's stamps into seconds from the first stamp, in place, and takes rows out that repeat one.
 * A fold over batches; after `place` the stamps never fall.
 */
export class Clock {
  readonly repairs: ClockRepairs = { repeated: none(), filled: none(), lost: none(), wrapped: none() };
  private readonly file: string;
  private readonly rule: TimeRule;
  private readonly counting: boolean;
  private first = Number.NaN;
  private last = 0;
  private lastRead = 0;
  private offset = 0;
  private filledInRow = 0;
  private row = 0;

  /** `counting` is for recordings without stamps: a row is a period. */
  constructor(file: string, rule: TimeRule, counting: boolean) {
    this.file = file;
    this.rule = rule;
    this.counting = counting;
  }

  /** Places a batch's rows. Throws UserError('input') where time runs backwards. */
  place(batch: RowBatch): void {
    if (this.counting) {
      for (let i = 0; i < batch.length; i++) batch.stamps[i] = this.row++ / this.rule.unitsPerSecond;
      return;
    }
    let kept = 0;
    for (let i = 0; i < batch.length; i++) {
      const seconds = this.secondsOf(batch, i);
      if (Number.isNaN(seconds)) continue;
      this.last = seconds;
      batch.stamps[kept] = seconds;
      if (kept !== i) {
        batch.lines[kept] = batch.lines[i];
        for (const column of batch.values) column[kept] = column[i];
      }
      kept++;
    }
    batch.length = kept;
  }

  /** Time of row `i`, seconds; NaN where the row is to be dropped. */
  private secondsOf(batch: RowBatch, i: number): number {
    const stamp = batch.stamps[i];
    if (Number.isNaN(stamp)) return this.fill(batch.lines[i]);
    if (Number.isNaN(this.first)) {
      this.first = stamp;
      this.filledInRow = 0;
      return 0;
    }
    let seconds = (stamp - this.first) / this.rule.unitsPerSecond + this.offset;
    if (seconds < this.lastRead) seconds = this.unwrapped(seconds, batch.lines[i]);
    const repeats = seconds === this.lastRead && this.filledInRow === 0 && !this.rule.coarse;
    this.lastRead = seconds;
    this.filledInRow = 0;
    if (!repeats) return Math.max(seconds, this.last);
    note(this.repairs.repeated, batch.lines[i]);
    return Number.NaN;
  }

  private fill(line: number): number {
    this.filledInRow++;
    if (Number.isNaN(this.first) || this.filledInRow > LONGEST_FILL) {
      note(this.repairs.lost, line);
      return Number.NaN;
    }
    note(this.repairs.filled, line);
    return this.last + this.rule.periodSeconds;
  }

  private unwrapped(seconds: number, line: number): number {
    const limit = PERIODS_BEHIND_WRAP * this.rule.periodSeconds + this.rule.resolutionSeconds;
    for (const wrap of this.rule.wrapsSeconds) {
      const step = seconds + wrap - this.lastRead;
      if (step > 0 && step <= limit) {
        note(this.repairs.wrapped, line);
        this.offset += wrap;
        return seconds + wrap;
      }
    }
    throw new UserError(
      'input',
      `${this.file}: time runs backwards in row ${line}; sort the rows, or cut the file there and give the parts one by one.`,
    );
  }
}

function none(): Repair {
  return { count: 0, firstLine: 0 };
}

function note(repair: Repair, line: number): void {
  if (repair.count === 0) repair.firstLine = line;
  repair.count++;
}
