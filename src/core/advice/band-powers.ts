import type { LevelSpectrum } from '../spectrum/spectrum.ts';

/** Powers of one level in steps of a twenty-fourth of an octave; no filter of order 8 bends within one. */
export interface BandPowers {
  /** Centre of the power within each step, Hz, increasing. */
  readonly frequencyHz: Float64Array;
  /** Width of the bins in each step, Hz. */
  readonly widthHz: Float64Array;
  /** Power in each step, unit². */
  readonly power: Float64Array;
  /** The same for each group of segments, to be weighted anew. */
  readonly groups: readonly Float64Array[];
  /** Segments in each group. */
  readonly segments: readonly number[];
}

const STEPS_PER_OCTAVE = 24;

/** Sums a level's density into narrow steps of frequency, 0 Hz left out. A sum needs no smoothing, and finest bins leak least. */
export function bandPowers(level: LevelSpectrum): BandPowers {
  const binHz = level.rateHz / level.segmentSamples;
  const bins = level.density.length;
  const firstBins: number[] = [];
  let previous = Number.NEGATIVE_INFINITY;
  for (let bin = 1; bin < bins; bin++) {
    const step = Math.floor(Math.log2(bin) * STEPS_PER_OCTAVE);
    if (step !== previous) firstBins.push(bin);
    previous = step;
  }
  const endOf = (step: number) => firstBins[step + 1] ?? bins;
  const sum = (value: (bin: number) => number) =>
    Float64Array.from(firstBins, (first, step) => {
      let total = 0;
      for (let bin = first; bin < endOf(step); bin++) total += value(bin);
      return total;
    });
  const density = sum((bin) => level.density[bin]);
  const moment = sum((bin) => level.density[bin] * bin);
  return {
    frequencyHz: density.map((value, step) => (value > 0 ? (moment[step] / value) * binHz : firstBins[step] * binHz)),
    widthHz: Float64Array.from(firstBins, (first, step) => (endOf(step) - first) * binHz),
    power: density.map((value) => value * binHz),
    groups: level.groups.map((group) => sum((bin) => group.density[bin] * binHz)),
    segments: level.groups.map((group) => group.segments),
  };
}

/** The powers with their groups weighted anew: a resample. `weights` holds at least one value above zero per group. */
export function reweighted(powers: BandPowers, weights: readonly number[]): BandPowers {
  const shares = powers.segments.map((segments, group) => segments * weights[group]);
  const total = shares.reduce((sum, share) => sum + share, 0);
  const power = powers.power.map((_, step) =>
    powers.groups.reduce((sum, group, g) => sum + (shares[g] / total) * group[step], 0),
  );
  return { ...powers, power };
}
