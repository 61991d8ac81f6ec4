import { median } from './median.ts';

/** How stamps are judged; learned once from the opening rows, so that every pass judges alike. */
export interface TimeRule {
  readonly unitsPerSecond: number;
  /** Sample period by the opening rows, seconds. */
  readonly periodSeconds: number;
  /** Step from which the stamps are written, seconds. */
  readonly resolutionSeconds: number;
  /** A step beyond this is a gap, seconds. */
  readonly gapSeconds: number;
  /** True where a stamp that repeats belongs to a sample of its own, because the stamps are coarser than the period. */
  readonly coarse: boolean;
  /** Where the stamps start again from zero, seconds, to be tried in turn: midnight, or the tick counter's size. */
  readonly wrapsSeconds: readonly number[];
}

/** Stamps of the opening rows and which rows repeat the one before in all values. */
export interface Opening {
  /** Units of the time column, NaN where missing. */
  readonly stamps: Float64Array;
  /** 1 where all values equal those of the row before. */
  readonly same: Uint8Array;
}

const COUNTER_BITS = [16, 24, 31, 32];
const DAY_SECONDS = 86_400;
/** Share of repeated stamps that no logger writes twice by mistake. */
const MANY_REPEATS = 0.2;
/** Resolutions that a step may exceed the period by: rounding takes up to one; bundles with one stamp each may be late as well. */
const ROUNDED_STEP = 1.25;
const LATE_BUNDLE = 1.5;
/** Odd steps that are needed to tell rounded stamps from lost samples. */
const ENOUGH_STEPS = 8;

/** Learns period, resolution and gap limit from the opening rows; `clock` says that the stamps are times of day. */
export function learnTimeRule(opening: Opening, unitsPerSecond: number, clock: boolean): TimeRule {
  const steps = openingSteps(opening.stamps);
  const moving = steps.filter((step) => step > 0);
  const step = median(moving);
  const written = decimalResolution(opening.stamps);
  const coarse = areCoarse(opening, steps, Math.max(written, step));
  const resolution = coarse ? Math.max(written, step) : written;
  const { period, gap } = periodAndGap(coarse ? steps : moving, step, resolution, coarse);
  const integer = written >= 1;
  return {
    unitsPerSecond,
    periodSeconds: period / unitsPerSecond,
    resolutionSeconds: resolution / unitsPerSecond,
    gapSeconds: gap / unitsPerSecond,
    coarse,
    wrapsSeconds: clock ? [DAY_SECONDS] : integer ? COUNTER_BITS.map((bits) => 2 ** bits / unitsPerSecond) : [],
  };
}

/** The rule where the rate is given and no stamp is read: every row is one period on. */
export function evenRule(rateHz: number): TimeRule {
  const period = 1 / rateHz;
  return {
    unitsPerSecond: rateHz,
    periodSeconds: period,
    resolutionSeconds: 0,
    gapSeconds: Number.POSITIVE_INFINITY,
    coarse: false,
    wrapsSeconds: [],
  };
}

/** Steps of zero or more between the stamps that are there. */
function openingSteps(stamps: Float64Array): Float64Array {
  const there = stamps.filter((stamp) => !Number.isNaN(stamp));
  return there
    .subarray(1)
    .map((stamp, i) => stamp - there[i])
    .filter((step) => step >= 0);
}

/**
 * Stamps are coarse where more repeats differ in their values than not, and where there are many of them, or the stamps keep to a
 * straight line within `resolution`, as rounded ones do and rows written twice do not.
 */
function areCoarse({ stamps, same }: Opening, steps: Float64Array, resolution: number): boolean {
  let [differing, equal] = [0, 0];
  for (let row = 1; row < stamps.length; row++) if (stamps[row] === stamps[row - 1]) same[row] ? equal++ : differing++;
  if (differing <= equal || differing < ENOUGH_STEPS) return false;
  return differing > MANY_REPEATS * steps.length || residualRange(steps, 2.5 * resolution) <= 1.5 * resolution;
}

/** The largest power of ten of which all stamps are multiples, units of the stamps: the last digit written. 0 where it is beyond a double. */
function decimalResolution(stamps: Float64Array): number {
  const values = stamps.filter((stamp) => !Number.isNaN(stamp));
  const largest = values.reduce((size, value) => Math.max(size, Math.abs(value)), 1);
  for (let power = 9; power > -12; power--) {
    const size = power < 0 ? 1 / 10 ** -power : 10 ** power;
    const rounding = (4 * Number.EPSILON * largest) / size;
    if (rounding > 0.1) return 0;
    if (values.every((value) => Math.abs(value / size - Math.round(value / size)) <= rounding)) return size;
  }
  return 0;
}

/**
 * Period and the step that counts as a gap: 1.5 periods. Stamps coarse against the period step by the period rounded up or down;
 * then the larger step is no gap. It is told from a lost sample by a straight line, which rounded stamps never leave.
 */
function periodAndGap(steps: Float64Array, step: number, resolution: number, coarse: boolean) {
  const fine = meanUpTo(steps, 1.5 * step);
  if (resolution <= 0.5 * fine || steps.length === 0) return { period: fine, gap: 1.5 * fine };
  let period = meanUpTo(steps, 1.5 * step + resolution);
  const gapOf = (each: number) => Math.max(1.5 * each, each + (coarse ? LATE_BUNDLE : ROUNDED_STEP) * resolution);
  for (let i = 0; i < 3; i++) period = meanUpTo(steps, gapOf(period));
  const gap = gapOf(period);
  if (period < 0.999 * step) return { period, gap };
  const large = steps.filter((each) => each > 1.5 * step && each <= gap).length;
  const rounded = large >= ENOUGH_STEPS && residualRange(steps, gap) <= 1.5 * resolution;
  return rounded ? { period, gap } : { period: fine, gap: 1.5 * fine };
}

function meanUpTo(steps: Float64Array, limit: number): number {
  const within = steps.filter((step) => step <= limit * (1 + 1e-9));
  return within.length === 0 ? 0 : within.reduce((sum, step) => sum + step, 0) / within.length;
}

/** Range of the stamps about their straight line, over the longest stretch without a step beyond `gap`. */
function residualRange(steps: Float64Array, gap: number): number {
  let [from, to, start] = [0, 0, 0];
  steps.forEach((step, i) => {
    if (step > gap) start = i + 1;
    if (i + 1 - start > to - from) [from, to] = [start, i + 1];
  });
  const run = steps.subarray(from, to);
  const mean = run.reduce((sum, step) => sum + step, 0) / run.length;
  let [at, low, high] = [0, 0, 0];
  for (const step of run) {
    at += step - mean;
    low = Math.min(low, at);
    high = Math.max(high, at);
  }
  return high - low;
}
