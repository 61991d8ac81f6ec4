import type { ThinnedTrace } from '../study-result.ts';

/**
 * Fold that keeps the smallest and the largest sample of every column of pixels, so that a thinned trace loses no peak.
 * Columns that no sample falls into become NaN.
 */
export class ThinFold {
  private readonly columnsPerSecond: number;
  private readonly low: Float64Array;
  private readonly high: Float64Array;
  private readonly periodSeconds: number;

  constructor(options: { columns: number; durationSeconds: number; rateHz: number }) {
    this.periodSeconds = 1 / options.rateHz;
    this.columnsPerSecond = options.columns / (options.durationSeconds + this.periodSeconds);
    this.low = new Float64Array(options.columns).fill(Number.NaN);
    this.high = new Float64Array(options.columns).fill(Number.NaN);
  }

  /** Takes consecutive samples, the first of them at `startSeconds` from the recording's first sample. */
  push(samples: Float64Array, startSeconds: number): void {
    const { low, high } = this;
    const last = low.length - 1;
    for (let i = 0; i < samples.length; i++) {
      const place = Math.floor((startSeconds + i * this.periodSeconds) * this.columnsPerSecond);
      const column = Math.max(0, Math.min(last, place));
      const value = samples[i];
      // Written so that a NaN column takes its first value.
      if (!(value >= low[column])) low[column] = value;
      if (!(value <= high[column])) high[column] = value;
    }
  }

  result(): ThinnedTrace {
    const seconds = Float64Array.from(this.low, (_, column) => (column + 0.5) / this.columnsPerSecond);
    return { seconds, low: this.low, high: this.high };
  }
}
