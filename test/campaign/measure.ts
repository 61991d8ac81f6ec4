import { allowedCorners } from '../../src/core/advice/rivals.ts';
import { discretise } from '../../src/core/filter/discretise.ts';
import type { Filter } from '../../src/core/filter/filter.ts';
import { gainDb } from '../../src/core/filter/response.ts';
import { FilterFold } from '../../src/core/filter/run.ts';
import { study } from '../../src/core/study.ts';
import type { StudySettings } from '../../src/core/study-result.ts';
import { makePair, type PairRecipe, type Truth } from './pairs.ts';

const SETTINGS: StudySettings = {
  droopDb: 0.5,
  rejectionDb: 20,
  keepHz: null,
  rejectHz: null,
  channels: null,
  rateHz: null,
};

/** What the advice was worth on a pair whose truth is known. */
export interface Measured {
  readonly verdict: string;
  readonly filter: Filter;
  /** (error − least error of the same family and order within the true limits) ÷ noise power; null where no corner meets them. */
  readonly excessError: number | null;
  /** Found first line over true one; null where none was found. */
  readonly lineRatio: number | null;
  /** Found keep edge over true one. */
  readonly edgeRatio: number;
  readonly trueDroopDb: number;
  readonly trueRejectionDb: number;
  readonly best: { readonly cornerHz: number; readonly lowHz: number; readonly highHz: number } | null;
  readonly range: readonly [number, number];
  readonly coversBest: boolean;
}

/** Studies a made pair and measures the advice against the truth on the recordings themselves. */
export async function measure(recipe: PairRecipe, seed: number): Promise<Measured> {
  const { quiet, active, truth } = makePair(recipe, seed);
  const result = await study({ quiet, active, settings: SETTINGS, version: 'campaign' });
  const { advice, keep } = result.channels[0];
  const { shape, family, order, cornerHz } = advice;
  const filter: Filter = { shape, family, order, cornerHz };
  const noisy = await samplesOf(active);
  const errorAt = (corner: number) => delayedError(noisy, truth.signal, { ...filter, cornerHz: corner }, recipe);
  const best = bestWithinTruth(recipe, truth, filter, errorAt);
  return {
    verdict: advice.verdict,
    filter,
    excessError: best === null ? null : (errorAt(cornerHz) - best.error) / truth.noisePower,
    lineRatio: advice.firstLineHz === null ? null : advice.firstLineHz / truth.firstLineHz,
    edgeRatio: keep.highHz / truth.keepHighHz,
    trueDroopDb: -gainDb(filter, truth.keepHighHz),
    trueRejectionDb: -gainDb(filter, truth.firstLineHz),
    best,
    range: advice.cornerRangeHz,
    coversBest: best !== null && best.cornerHz >= advice.cornerRangeHz[0] && best.cornerHz <= advice.cornerRangeHz[1],
  };
}

function bestWithinTruth(recipe: PairRecipe, truth: Truth, filter: Filter, errorAt: (corner: number) => number) {
  const contest = {
    limits: { droopDb: SETTINGS.droopDb, rejectionDb: SETTINGS.rejectionDb },
    keepHighHz: truth.keepHighHz,
    firstLineHz: truth.firstLineHz,
    highestCornerHz: 0.45 * recipe.rateHz,
  };
  const { lowHz, highHz } = allowedCorners(contest, filter.family, filter.order);
  if (highHz < lowHz) return null;
  const at = (part: number) => lowHz * (highHz / lowHz) ** part;
  const errors = Array.from({ length: 9 }, (_, i) => errorAt(at(i / 8)));
  const least = errors.indexOf(Math.min(...errors));
  const cornerHz = at((least + vertex(errors[least - 1], errors[least], errors[least + 1])) / 8);
  return { cornerHz, error: Math.min(errors[least], errorAt(cornerHz)), lowHz, highHz };
}

/** Offset of the least value of the parabola through three equally spaced values; 0 at a border. */
function vertex(before: number | undefined, here: number, after: number | undefined): number {
  if (before === undefined || after === undefined) return 0;
  const curvature = before - 2 * here + after;
  return curvature > 0 ? (before - after) / (2 * curvature) : 0;
}

async function samplesOf(recording: { blocks(): AsyncIterable<{ channels: readonly Float64Array[] }> }) {
  const blocks: Float64Array[] = [];
  for await (const block of recording.blocks()) blocks.push(block.channels[0]);
  const all = new Float64Array(blocks.reduce((sum, block) => sum + block.length, 0));
  let at = 0;
  for (const block of blocks) {
    all.set(block, at);
    at += block.length;
  }
  return all;
}

/** Mean-square error of the filtered recording against the signal (plus offset), at the best single delay, once settled. */
function delayedError(noisy: Float64Array, signal: Float64Array, filter: Filter, recipe: PairRecipe): number {
  const filtered = new FilterFold(discretise(filter, recipe.rateHz)).push(noisy, true);
  const skip = Math.min(Math.floor(noisy.length / 4), Math.ceil((4 / filter.cornerHz) * recipe.rateHz) + TAPS);
  const error = (delay: number) => {
    let sum = 0;
    const whole = Math.floor(delay);
    const weights = lagrangeWeights(delay - whole);
    for (let i = skip; i < filtered.length - TAPS; i++) {
      let wanted = recipe.offset;
      for (let tap = 0; tap < TAPS; tap++) wanted += weights[tap] * signal[i - whole + TAPS / 2 - 1 - tap];
      sum += (filtered[i] - wanted) ** 2;
    }
    return sum / (filtered.length - TAPS - skip);
  };
  const most = Math.min(skip - TAPS, Math.ceil((filter.order * recipe.rateHz) / filter.cornerHz));
  const near = leastOf(
    Array.from({ length: 25 }, (_, i) => (most * i) / 24),
    error,
  );
  let low = Math.max(0, near - most / 24);
  let high = near + most / 24;
  const golden = (Math.sqrt(5) - 1) / 2;
  for (let round = 0; round < 22; round++) {
    const a = high - golden * (high - low);
    const b = low + golden * (high - low);
    if (error(a) < error(b)) high = b;
    else low = a;
  }
  return error((low + high) / 2);
}

const TAPS = 10;

/** Weights of Lagrange's polynomial through ten samples, for a delay of 0 to 1 sample from the fifth (Abramowitz & Stegun 25.2.1). */
function lagrangeWeights(part: number): number[] {
  const at = part + TAPS / 2 - 1;
  return Array.from({ length: TAPS }, (_, k) =>
    Array.from({ length: TAPS }, (_, j) => (j === k ? 1 : (at - j) / (k - j))).reduce((a, b) => a * b, 1),
  );
}

function leastOf(values: readonly number[], error: (value: number) => number): number {
  return values.map((value) => ({ value, error: error(value) })).reduce((a, b) => (b.error < a.error ? b : a)).value;
}
