/** Fold of mean and variance about a straight line, with sums about the first sample so that a large offset costs no digits. */
export class LineFit {
  count = 0;
  private origin = 0;
  private sum = 0;
  private squares = 0;
  private moment = 0;

  /** Takes samples[from] … samples[to − 1]. */
  add(samples: Float64Array, from: number, to: number): void {
    if (this.count === 0 && to > from) this.origin = samples[from];
    const { origin } = this;
    let { count, sum, squares, moment } = this;
    for (let i = from; i < to; i++) {
      const y = samples[i] - origin;
      sum += y;
      squares += y * y;
      moment += y * count++;
    }
    this.count = count;
    this.sum = sum;
    this.squares = squares;
    this.moment = moment;
  }

  /** Mean of the samples. */
  mean(): number {
    return this.origin + this.sum / this.count;
  }

  /** Unbiased variance about the least-squares straight line; 0 where fewer than three samples leave nothing to vary. */
  variance(): number {
    const n = this.count;
    if (n < 3) return 0;
    const spread = (n * (n * n - 1)) / 12;
    const tilt = this.moment - (this.sum * (n - 1)) / 2;
    return Math.max(0, this.squares - this.sum ** 2 / n - tilt ** 2 / spread) / (n - 2);
  }

  /** Starts anew. */
  clear(): void {
    this.count = 0;
    this.sum = 0;
    this.squares = 0;
    this.moment = 0;
  }
}
