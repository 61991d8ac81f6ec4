import type { ActivityWindow } from '../spectrum/stationary.ts';
import type { Inset } from '../study-result.ts';

/** A stretch of one run to be shown at full resolution. */
export interface InsetPlace {
  readonly title: string;
  readonly run: number;
  readonly firstSample: number;
  readonly samples: number;
}

/**
 * Chooses where to look closely: the stretch of `samples` with the least movement and the one with the most.
 * Movement is the variance of the window means plus the mean of the window variances. Short recordings give one stretch.
 */
export function chooseInsets(windows: readonly ActivityWindow[], samples: number): InsetPlace[] {
  let calm: { movement: number; first: number } | null = null;
  let lively: { movement: number; first: number } | null = null;
  for (let first = 0; first < windows.length; first++) {
    const stretch = stretchFrom(windows, first, samples);
    if (stretch === null) continue;
    const movement = movementOf(stretch);
    if (calm === null || movement < calm.movement) calm = { movement, first };
    if (lively === null || movement > lively.movement) lively = { movement, first };
  }
  const place = (title: string, first: number) => {
    const { run, firstSample } = windows[first];
    return { title, run, firstSample, samples };
  };
  if (calm === null || lively === null) {
    const longest = windows.reduce((a, b) => (b.samples > a.samples ? b : a));
    return [{ title: 'Close view', run: longest.run, firstSample: longest.firstSample, samples: longest.samples }];
  }
  if (calm.first === lively.first) return [place('Close view', calm.first)];
  return [place('Quietest stretch', calm.first), place('Strongest movement', lively.first)];
}

/** Fold that keeps the samples of one place before and behind the filter. */
export class InsetFold {
  private readonly place: InsetPlace;
  private readonly periodSeconds: number;
  private readonly before: Float64Array;
  private readonly after: Float64Array;
  private filled = 0;
  private firstSeconds = 0;

  constructor(place: InsetPlace, rateHz: number) {
    this.place = place;
    this.periodSeconds = 1 / rateHz;
    this.before = new Float64Array(place.samples);
    this.after = new Float64Array(place.samples);
  }

  /** Takes a block's samples before and after; `firstSample` and `startSeconds` belong to the first of them. */
  push(
    block: { run: number; firstSample: number; startSeconds: number },
    before: Float64Array,
    after: Float64Array,
  ): void {
    if (block.run !== this.place.run) return;
    const from = Math.max(0, this.place.firstSample - block.firstSample);
    const to = Math.min(before.length, this.place.firstSample + this.place.samples - block.firstSample);
    if (to <= from) return;
    if (this.filled === 0) this.firstSeconds = block.startSeconds + from * this.periodSeconds;
    this.before.set(before.subarray(from, to), this.filled);
    this.after.set(after.subarray(from, to), this.filled);
    this.filled += to - from;
  }

  result(): Inset {
    return {
      title: this.place.title,
      seconds: Float64Array.from({ length: this.filled }, (_, i) => this.firstSeconds + i * this.periodSeconds),
      before: this.before.subarray(0, this.filled),
      after: this.after.subarray(0, this.filled),
    };
  }
}

/** Windows from `first` that cover `samples` within one run; null where the run ends before. */
function stretchFrom(windows: readonly ActivityWindow[], first: number, samples: number): ActivityWindow[] | null {
  const stretch: ActivityWindow[] = [];
  let covered = 0;
  for (let next = first; covered < samples; next++) {
    const window = windows[next];
    if (window === undefined || window.run !== windows[first].run) return null;
    stretch.push(window);
    covered += window.samples;
  }
  return stretch;
}

function movementOf(stretch: readonly ActivityWindow[]): number {
  const mean = stretch.reduce((sum, window) => sum + window.mean, 0) / stretch.length;
  const spread = stretch.reduce((sum, window) => sum + (window.mean - mean) ** 2, 0);
  return (spread + stretch.reduce((sum, window) => sum + window.variance, 0)) / stretch.length;
}
