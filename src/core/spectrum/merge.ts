import type { LevelSpectrum, Spectrum } from './spectrum.ts';

/** A level resolves a frequency that lies this many bins up: a relative resolution of 1.5/32, about 5 %, or finer. */
const RESOLVING_BIN = 32;

/**
 * Merges levels so that every frequency is read from the shortest segment that resolves it: nearly constant relative resolution,
 * and the most averages wherever less resolution will do (Tröbs & Heinzel 2006, Measurement 39:120).
 *
 * The first point is bin 1 of the longest level and stands for 0 Hz on as well (bin 0 is emptied by the removed mean); the last is
 * Nyquist, where the density is doubled to be one-sided like its neighbours, half a bin wide, with half the degrees of freedom.
 * `weights` resamples: each level's groups are averaged anew, group g of G with the mean of the weights over its share
 * g/G … (g+1)/G of the recording, so that groups of all levels that lie at the same time weigh alike.
 * Throws RangeError without a level or where weights sum to nothing.
 */
export function mergeLevels(levels: readonly LevelSpectrum[], weights?: readonly number[]): Spectrum {
  const pieces = piecesOf(levels);
  const frequencyHz: number[] = [];
  const density: number[] = [];
  const degreesOfFreedom: number[] = [];
  const widthHz: number[] = [];
  for (const { level, from, to } of pieces) {
    const binHz = level.rateHz / level.segmentSamples;
    const nyquist = level.segmentSamples / 2;
    const read = weights === undefined ? (k: number) => level.density[k] : weightedDensity(level, weights);
    for (let k = from; k < to; k++) {
      const folded = k === nyquist ? 2 : 1;
      frequencyHz.push(k * binHz);
      density.push(read(k) * folded);
      degreesOfFreedom.push(level.degreesOfFreedom / folded);
      widthHz.push(binHz / folded);
    }
  }
  closeSeams(pieces, frequencyHz, widthHz);
  return {
    rateHz: pieces[0].level.rateHz,
    frequencyHz: Float64Array.from(frequencyHz),
    density: Float64Array.from(density),
    degreesOfFreedom: Float64Array.from(degreesOfFreedom),
    widthHz: Float64Array.from(widthHz),
  };
}

/**
 * Reads a level's density, unit²/Hz, with its groups weighted anew; see `mergeLevels` for how weights belong to groups.
 * Throws RangeError where the weights of the level's groups sum to nothing.
 */
export function weightedDensity(level: LevelSpectrum, weights: readonly number[]): (bin: number) => number {
  const shares = level.groups.map((group, g) => group.segments * meanOver(weights, g, level.groups.length));
  const total = shares.reduce((sum, share) => sum + share, 0);
  if (!(total > 0)) throw new RangeError('Weights for resampling must not sum to nothing');
  return (bin) => level.groups.reduce((sum, group, g) => sum + (shares[g] / total) * group.density[bin], 0);
}

/** Mean of the weights taken as equal steps over 0 … 1, over the share g/G … (g+1)/G. */
function meanOver(weights: readonly number[], g: number, groups: number): number {
  const from = (g / groups) * weights.length;
  const to = ((g + 1) / groups) * weights.length;
  let sum = 0;
  for (let step = Math.floor(from); step < Math.min(weights.length, Math.ceil(to - 1e-9)); step++)
    sum += weights[step] * (Math.min(to, step + 1) - Math.max(from, step));
  return sum / (to - from);
}

interface Piece {
  readonly level: LevelSpectrum;
  /** First bin read, and the one behind the last. */
  readonly from: number;
  readonly to: number;
}

/** Which bins of which level are read, from low to high frequencies. */
function piecesOf(levels: readonly LevelSpectrum[]): Piece[] {
  const byLength = [...levels].sort((a, b) => b.segmentSamples - a.segmentSamples);
  if (byLength.length === 0) throw new RangeError('There is no spectrum to merge: every run is shorter than a segment');
  // A level whose resolving bin is Nyquist or beyond adds nothing.
  const useful = byLength.filter((level, i) => i === 0 || level.segmentSamples / 2 > RESOLVING_BIN);
  return useful.map((level, i) => {
    const next = useful[i + 1];
    // The next level's first bin takes half a bin on either side of it.
    const end = next && ((RESOLVING_BIN - 0.5) * level.segmentSamples) / next.segmentSamples;
    return {
      level,
      from: i === 0 ? 1 : RESOLVING_BIN,
      to: end === undefined ? level.segmentSamples / 2 + 1 : Math.ceil(end - 0.5),
    };
  });
}

/** Stretches the last point below each seam, and the first of all, to what their neighbours leave open. */
function closeSeams(pieces: readonly Piece[], frequencyHz: readonly number[], widthHz: number[]): void {
  widthHz[0] += frequencyHz[0] - widthHz[0] / 2;
  let end = 0;
  for (const { from, to } of pieces.slice(0, -1)) {
    end += to - from;
    const upperHz = frequencyHz[end] - widthHz[end] / 2;
    const lowerHz = end === 1 ? 0 : frequencyHz[end - 1] - (frequencyHz[end - 1] - frequencyHz[end - 2]) / 2;
    widthHz[end - 1] = upperHz - lowerHz;
  }
}
