/**
 * Fold of the variance about each stretch's own mean, leaving out the first `skipSamples` of every stretch.
 * Sums are taken about the stretch's first sample, so that a large offset costs no digits.
 */
export class VarianceFold {
  private readonly skipSamples: number;
  private origin = 0;
  private seen = 0;
  private count = 0;
  private sum = 0;
  private squares = 0;
  private total = 0;
  private totalCount = 0;

  constructor(skipSamples: number) {
    this.skipSamples = skipSamples;
  }

  push(samples: Float64Array, starts: boolean): void {
    if (starts) this.close();
    for (let i = 0; i < samples.length; i++) {
      if (this.seen++ < this.skipSamples) continue;
      if (this.count === 0) this.origin = samples[i];
      const value = samples[i] - this.origin;
      this.count++;
      this.sum += value;
      this.squares += value * value;
    }
  }

  /** Root of the pooled variance; 0 where nothing was left. */
  result(): number {
    this.close();
    return this.totalCount > 0 ? Math.sqrt(this.total / this.totalCount) : 0;
  }

  private close(): void {
    if (this.count > 0) {
      this.total += Math.max(0, this.squares - this.sum ** 2 / this.count);
      this.totalCount += this.count;
    }
    this.seen = 0;
    this.count = 0;
    this.sum = 0;
    this.squares = 0;
  }
}
