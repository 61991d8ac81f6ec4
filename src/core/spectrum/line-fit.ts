/** Fold of mean and variance about a straight line through consecutive samples, taken about the first so that a large offset costs no digits. */
export class LineFit {
  count = 0;
  private origin = 0;
  private sum = 0;
  private squares = 0;
  private moment = 0;

  /** Takes the next sample. */
  add(value: number): void {
    if (this.count === 0) this.origin = value;
    const y = value - this.origin;
    this.sum += y;
    this.squares += y * y;
    this.moment += y * this.count;
    this.count++;
  }

  /** Mean of the samples. */
  mean(): number {
    return this.origin + this.sum / this.count;
  }

  /** Unbiased variance about the straight line; 0 where fewer than three samples leave nothing to vary. */
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
