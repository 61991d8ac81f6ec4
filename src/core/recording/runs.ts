import type { Stretch } from './column-fold.ts';
import type { TimeBase, TimeRun } from './time-base.ts';

/** A run as `blocks()` delivers it: rows of the file and samples of the uniform grid. */
export interface Run {
  /** First row and the one behind the last, counted over the rows kept. */
  readonly fromRow: number;
  readonly toRow: number;
  /** Time of the first sample, seconds from the first sample of the recording. */
  readonly startSeconds: number;
  /** Stamp of the first row, seconds from the first stamp. */
  readonly firstStampSeconds: number;
  readonly samples: number;
}

/** Runs shorter than this are dropped, samples. */
const SHORTEST_RUN = 2;

/** Runs on the uniform grid: those between gaps, cut where values are missing for too long. Shorter ones than 2 samples are counted only. */
export function gridRuns(time: TimeBase, stretches: readonly Stretch[]): { runs: Run[]; tooShort: number } {
  const sorted = [...stretches].sort((a, b) => a.fromRow - b.fromRow);
  let next = 0;
  const pieces = time.runs.flatMap((run) => {
    const within: Stretch[] = [];
    for (; next < sorted.length && sorted[next].fromRow < run.toRow; next++) within.push(sorted[next]);
    return cut(run, within);
  });
  const zero = time.uneven ? 0 : fittedStart(time.runs[0], time.rateHz);
  const runs = pieces
    .map((piece) => (time.uneven ? byStamps(piece, time.rateHz) : byRows(piece, time.rateHz, zero)))
    .filter((run) => run.samples >= SHORTEST_RUN);
  return { runs, tooShort: pieces.length - runs.length };
}

/** A part of a run between two gaps. */
interface Piece {
  readonly whole: TimeRun;
  readonly fromRow: number;
  readonly toRow: number;
  readonly firstSeconds: number;
  readonly lastSeconds: number;
}

function cut(whole: TimeRun, stretches: readonly Stretch[]): Piece[] {
  const pieces: Piece[] = [];
  let { fromRow, firstSeconds } = whole;
  for (const stretch of stretches) {
    if (stretch.fromRow > fromRow)
      pieces.push({ whole, fromRow, toRow: stretch.fromRow, firstSeconds, lastSeconds: stretch.beforeSeconds });
    if (stretch.toRow > fromRow) {
      fromRow = stretch.toRow;
      firstSeconds = stretch.behindSeconds;
    }
  }
  if (whole.toRow > fromRow)
    pieces.push({ whole, fromRow, toRow: whole.toRow, firstSeconds, lastSeconds: whole.lastSeconds });
  return pieces;
}

/** A row is a sample; the run starts where its straight line does. */
function byRows({ whole, fromRow, toRow, firstSeconds }: Piece, rateHz: number, zero: number): Run {
  const startSeconds = fittedStart(whole, rateHz) - zero + (fromRow - whole.fromRow) / rateHz;
  return { fromRow, toRow, startSeconds, firstStampSeconds: firstSeconds, samples: toRow - fromRow };
}

function byStamps({ fromRow, toRow, firstSeconds, lastSeconds }: Piece, rateHz: number): Run {
  const samples = Math.floor((lastSeconds - firstSeconds) * rateHz + 1e-6) + 1;
  return { fromRow, toRow, startSeconds: firstSeconds, firstStampSeconds: firstSeconds, samples };
}

function fittedStart({ meanSeconds, fromRow, toRow }: TimeRun, rateHz: number): number {
  return meanSeconds - (toRow - fromRow - 1) / 2 / rateHz;
}
