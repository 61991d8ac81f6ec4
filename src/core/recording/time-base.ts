import type { Gap } from './recording.ts';
import type { RowBatch } from './rows.ts';
import type { TimeRule } from './time-rule.ts';

/** Rows between two gaps, and the straight line of their stamps on their numbers. */
export interface TimeRun {
  /** First row and the one behind the last, counted over the rows kept, from 0. */
  readonly fromRow: number;
  readonly toRow: number;
  /** Seconds from the first sample. */
  readonly firstSeconds: number;
  readonly lastSeconds: number;
  /** Mean of the stamps, seconds from the first sample: a point that the straight line passes. */
  readonly meanSeconds: number;
  /** Slope of the straight line, seconds a row. */
  readonly periodSeconds: number;
  /** Standard deviation of the stamps about the straight line, seconds. */
  readonly jitterSeconds: number;
  /** Standard deviation of the steps, seconds. */
  readonly stepDeviationSeconds: number;
}

/** The time base of a recording. */
export interface TimeBase {
  readonly runs: readonly TimeRun[];
  readonly longest: TimeRun;
  readonly gaps: readonly Gap[];
  /** Rate of the uniform grid, Hz. */
  readonly rateHz: number;
  /** True where the rows stand so unevenly, or some of them at such another rate, that they must be interpolated. */
  readonly uneven: boolean;
  /** The first run of some length at another rate than the longest; null where there is none. */
  readonly otherRate: TimeRun | null;
}

/** Unevenness that is let pass, periods. */
const LET_PASS = 0.01;
/** Relative difference by which a rate is rounded to a shorter number. */
const RATE_ROUNDING = 1e-9;

/**
 * The time base as a fold over placed batches: cuts runs at gaps and fits each run's straight line by least squares.
 * Sums are kept about running means (Welford 1962) of what is left after the rule's period is taken off, so that they stay exact to
 * far below a period over any length.
 */
export class TimeBaseFold {
  private readonly rule: TimeRule;
  private readonly runs: TimeRun[] = [];
  private readonly gaps: Gap[] = [];
  private row = 0;
  private fromRow = 0;
  private first = 0;
  private last = 0;
  private rows = 0;
  private meanRest = 0;
  private sumRowRest = 0;
  private sumRestRest = 0;
  private meanStep = 0;
  private sumStepStep = 0;

  constructor(rule: TimeRule) {
    this.rule = rule;
  }

  /** Takes a batch that the clock has placed; gives the rows of it at which a gap was crossed. */
  push({ length, stamps, lines }: RowBatch): number[] {
    const starts: number[] = [];
    for (let i = 0; i < length; i++) {
      const seconds = stamps[i];
      const step = seconds - this.last;
      if (this.rows > 0 && step > this.rule.gapSeconds) {
        this.gaps.push({ row: lines[i], atSeconds: this.last, lengthSeconds: step });
        this.close();
        starts.push(i);
      }
      if (this.rows === 0) this.first = seconds;
      else this.addStep(step - this.rule.periodSeconds);
      this.addRest(seconds - this.first - this.rows * this.rule.periodSeconds);
      this.last = seconds;
      this.row++;
    }
    return starts;
  }

  /** The time base of all rows pushed, at least one; `rateHz` where the rate is given. */
  result(rateHz?: number): TimeBase {
    if (this.rows > 0) this.close();
    const { runs, gaps, rule } = this;
    const longest = runs.reduce((a, b) => (b.toRow - b.fromRow > a.toRow - a.fromRow ? b : a));
    const otherRate = rule.coarse ? null : (runs.find((run) => differs(run, longest)) ?? null);
    return {
      runs,
      longest,
      gaps,
      rateHz: rateHz ?? roundedRate(1 / longest.periodSeconds),
      uneven: otherRate !== null || (!rule.coarse && isUneven(longest, rule)),
      otherRate,
    };
  }

  private addRest(rest: number): void {
    const before = this.rows++;
    const fromMean = rest - this.meanRest;
    this.meanRest += fromMean / this.rows;
    this.sumRestRest += fromMean * (rest - this.meanRest);
    this.sumRowRest += (before / 2) * fromMean;
  }

  private addStep(step: number): void {
    const fromMean = step - this.meanStep;
    this.meanStep += fromMean / this.rows;
    this.sumStepStep += fromMean * (step - this.meanStep);
  }

  private close(): void {
    const { rows, rule } = this;
    const sumRowRow = (rows * (rows * rows - 1)) / 12;
    const slope = rows > 1 ? this.sumRowRest / sumRowRow : 0;
    const about = Math.max(0, this.sumRestRest - slope * this.sumRowRest);
    this.runs.push({
      fromRow: this.fromRow,
      toRow: this.row,
      firstSeconds: this.first,
      lastSeconds: this.last,
      meanSeconds: this.first + this.meanRest + ((rows - 1) / 2) * rule.periodSeconds,
      periodSeconds: rule.periodSeconds + slope,
      jitterSeconds: rows > 2 ? Math.sqrt(about / (rows - 2)) : 0,
      stepDeviationSeconds: rows > 2 ? Math.sqrt(this.sumStepStep / (rows - 2)) : 0,
    });
    this.fromRow = this.row;
    this.rows = 0;
    this.meanRest = this.sumRowRest = this.sumRestRest = this.meanStep = this.sumStepStep = 0;
  }
}

/**
 * Uneven are stamps that leave the straight line, and whose steps differ, by more than 1 % of a period: a slow wander of the clock
 * alone leaves the steps even. What the stamps' resolution explains does not count: q/√12 of a stamp, q/√6 of a step.
 */
function isUneven({ jitterSeconds, stepDeviationSeconds, periodSeconds }: TimeRun, rule: TimeRule): boolean {
  const q = rule.resolutionSeconds;
  const stamps = Math.sqrt(Math.max(0, jitterSeconds ** 2 - q ** 2 / 12));
  const steps = Math.sqrt(Math.max(0, stepDeviationSeconds ** 2 - q ** 2 / 6) / 2);
  return Math.min(stamps, steps) > LET_PASS * periodSeconds;
}

/** A run of some length at another rate, as where a logger was set anew: its rows are no samples of one grid. */
function differs({ fromRow, toRow, periodSeconds }: TimeRun, longest: TimeRun): boolean {
  return toRow - fromRow >= 64 && Math.abs(periodSeconds / longest.periodSeconds - 1) > LET_PASS;
}

/** The shortest number within rounding of the rate: stamps 0.005 s apart make 200 Hz, not 199.99999999999997. */
function roundedRate(rateHz: number): number {
  for (let digits = 1; digits < 15; digits++) {
    const shorter = Number(rateHz.toPrecision(digits));
    if (Math.abs(shorter - rateHz) <= RATE_ROUNDING * rateHz) return shorter;
  }
  return rateHz;
}
