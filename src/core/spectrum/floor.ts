import { chiSquareQuantile } from './quantiles.ts';
import { HANN } from './window.ts';

/** Points of a spectrum above 0 Hz; all arrays of one length, frequencies increasing. */
export interface SpectrumPoints {
  readonly frequencyHz: Float64Array;
  /** unit²/Hz */
  readonly density: Float64Array;
  readonly degreesOfFreedom: Float64Array;
}

/** A noise floor and how well it is known. */
export interface Floor {
  /** unit²/Hz at each point. */
  readonly density: Float64Array;
  /** χ² degrees of freedom that an average would need to scatter as the floor does. */
  readonly degreesOfFreedom: Float64Array;
}

/** Quarter of an octave to either side. */
const HALF_WINDOW = 2 ** 0.25;
/** Points a window has at the least: a line's main lobe, three to four of them, must stay a minority. */
const FEWEST_POINTS = 15;
/** The floor is worked out at steps of this ratio and read between them along a straight line in log-log. */
const STEP = 2 ** (1 / 12);
/** A window is condensed to so many medians before a slope is fitted to it. */
const BLOCKS = 31;
/** Points looked at in a window; wider windows are thinned evenly, which costs a median next to nothing. */
const MOST_POINTS = 1023;

/**
 * Noise floor under the lines of a spectrum, unit²/Hz: running median over half an octave, over 15 points at the least,
 * corrected for the median of χ² lying below its mean. Where the window is lopsided or wide (near the ends) the median follows the
 * local slope in log-log, so that a steep spectrum is neither over- nor underrated there.
 */
export function noiseFloor(spectrum: SpectrumPoints): Float64Array {
  return estimateFloor(spectrum).density;
}

/** The same with its uncertainty. Throws RangeError for a spectrum without points. */
export function estimateFloor(spectrum: SpectrumPoints): Floor {
  const { frequencyHz } = spectrum;
  if (frequencyHz.length === 0) throw new RangeError('A spectrum without points has no floor');
  const levels = unbiased(spectrum);
  const anchors = anchorsOf(frequencyHz);
  const estimates = anchors.map((index) => floorAt(spectrum, levels, index));
  const density = new Float64Array(frequencyHz.length);
  const degreesOfFreedom = new Float64Array(frequencyHz.length);
  let left = 0;
  for (let i = 0; i < frequencyHz.length; i++) {
    while (left + 1 < anchors.length - 1 && anchors[left + 1] <= i) left++;
    const right = Math.min(left + 1, anchors.length - 1);
    const span = Math.log(frequencyHz[anchors[right]] / frequencyHz[anchors[left]]);
    const part = span > 0 ? Math.log(frequencyHz[i] / frequencyHz[anchors[left]]) / span : 0;
    const between = (a: number, b: number) => a + part * (b - a);
    density[i] = Math.exp(between(estimates[left].logDensity, estimates[right].logDensity));
    degreesOfFreedom[i] = between(estimates[left].dof, estimates[right].dof);
  }
  return { density, degreesOfFreedom };
}

/** Logarithms of the densities, each over its own median bias, so that a plain median of them estimates a mean. */
function unbiased({ density, degreesOfFreedom }: SpectrumPoints): Float64Array {
  const logBias = new Map<number, number>();
  const faintest = 1e-30 * density.reduce((most, value) => Math.max(most, value), 0) + Number.MIN_VALUE;
  return density.map((value, i) => {
    const dof = degreesOfFreedom[i];
    let bias = logBias.get(dof);
    if (bias === undefined) {
      bias = Math.log(chiSquareQuantile(0.5, dof) / dof);
      logBias.set(dof, bias);
    }
    return Math.log(Math.max(value, faintest)) - bias;
  });
}

/** Indices at which the floor is worked out: the ends and steps of a 24th of an octave. */
function anchorsOf(frequencyHz: Float64Array): number[] {
  const anchors = [0];
  for (let i = 1; i < frequencyHz.length - 1; i++) {
    if (frequencyHz[i] >= frequencyHz[anchors[anchors.length - 1]] * STEP) anchors.push(i);
  }
  if (frequencyHz.length > 1) anchors.push(frequencyHz.length - 1);
  return anchors;
}

function floorAt(
  { frequencyHz, degreesOfFreedom }: SpectrumPoints,
  levels: Float64Array,
  index: number,
): { logDensity: number; dof: number } {
  const [from, to] = windowAround(frequencyHz, index);
  const blocks = condense(frequencyHz, levels, from, to);
  const at = Math.log(frequencyHz[index]);
  const slope = medianSlope(blocks);
  const logDensity = median(blocks.map(({ x, y }) => y - slope * (x - at)));
  const centre = blocks.reduce((sum, { x }) => sum + x, 0) / blocks.length;
  const spread = blocks.reduce((sum, { x }) => sum + (x - centre) ** 2, 0) / blocks.length;
  const leverage = spread > 0 ? 1 + (at - centre) ** 2 / spread : 1;
  // A median needs π/2 times the points of a mean; neighbouring bins are correlated.
  const independent = Math.min(to - from, MOST_POINTS) / HANN.neighbourInflation;
  return { logDensity, dof: (degreesOfFreedom[index] * independent * 2) / (Math.PI * leverage) };
}

/** First index and the one behind the last of the window around a point. */
function windowAround(frequencyHz: Float64Array, index: number): [number, number] {
  const wanted = Math.min(FEWEST_POINTS, frequencyHz.length);
  let from = firstAtOrAbove(frequencyHz, frequencyHz[index] / HALF_WINDOW);
  let to = firstAtOrAbove(frequencyHz, frequencyHz[index] * HALF_WINDOW);
  from = Math.max(0, Math.min(from, index - (FEWEST_POINTS >> 1), frequencyHz.length - wanted));
  to = Math.min(frequencyHz.length, Math.max(to, index + (FEWEST_POINTS >> 1) + 1, from + wanted));
  return [from, to];
}

function firstAtOrAbove(sorted: Float64Array, value: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

interface Block {
  readonly x: number;
  readonly y: number;
}

/** Medians of up to 31 consecutive parts of the window, each of an odd number of points: x = ln f, y = ln density. */
function condense(frequencyHz: Float64Array, levels: Float64Array, from: number, to: number): Block[] {
  const stride = Math.ceil((to - from) / MOST_POINTS);
  const points = Math.floor((to - from - 1) / stride) + 1;
  const each = 2 * Math.floor(Math.ceil(points / BLOCKS) / 2) + 1;
  const blocks: Block[] = [];
  for (let first = 0; first < points; first += each) {
    const count = Math.min(each, points - first);
    if (count < each && blocks.length > 0) break;
    const values = new Array<number>(count);
    for (let j = 0; j < count; j++) values[j] = levels[from + (first + j) * stride];
    blocks.push({ x: Math.log(frequencyHz[from + (first + (count >> 1)) * stride]), y: median(values) });
  }
  return blocks;
}

/** Median of the slopes between all pairs (Theil 1950, Sen 1968): up to 29 % of the points may be anything. */
function medianSlope(blocks: readonly Block[]): number {
  const slopes: number[] = [];
  for (let i = 0; i < blocks.length; i++)
    for (let j = i + 1; j < blocks.length; j++) slopes.push((blocks[j].y - blocks[i].y) / (blocks[j].x - blocks[i].x));
  return slopes.length > 0 ? median(slopes) : 0;
}

function median(values: number[]): number {
  const sorted = Float64Array.from(values).sort();
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}
