import { estimateFloor, type Floor } from './floor.ts';
import type { LevelSpectrum } from './spectrum.ts';

/** First bin in which lines are looked for: 0 to 2 hold the removed mean and drift. */
export const FIRST_BIN = 3;
/** Bins that a floor needs at the least; with fewer left, none are left out. */
const FEWEST_BINS = 15;

/**
 * Floor of a level, unit²/Hz by bin, from the bins from 3 on that are not marked in `filled`. Between the bins used it goes straight in
 * log-log, beyond them it is constant.
 */
export function floorOfBins(level: LevelSpectrum, filled?: Uint8Array): Floor {
  const bins = usedBins(level.density.length, filled);
  const frequencyHz = new Float64Array(bins);
  const found = estimateFloor({
    frequencyHz,
    density: frequencyHz.map((bin) => level.density[bin]),
    degreesOfFreedom: new Float64Array(bins.length).fill(level.degreesOfFreedom),
  });
  return {
    density: spread(found.density, bins, level.density.length, true),
    degreesOfFreedom: spread(found.degreesOfFreedom, bins, level.density.length, false),
  };
}

function usedBins(length: number, filled: Uint8Array | undefined): Uint32Array {
  const first = Math.min(FIRST_BIN, length - 1);
  const all = new Uint32Array(length - first);
  for (let i = 0; i < all.length; i++) all[i] = first + i;
  if (filled === undefined) return all;
  const free = all.filter((bin) => filled[bin] === 0);
  return free.length >= FEWEST_BINS ? free : all;
}

/** Values at some bins carried to all. */
function spread(values: Float64Array, bins: Uint32Array, length: number, logarithmic: boolean): Float64Array {
  const all = new Float64Array(length);
  all.fill(values[0], 0, bins[0]);
  for (let i = 0; i < bins.length; i++) {
    const next = bins[i + 1] ?? length;
    all[bins[i]] = values[i];
    for (let bin = bins[i] + 1; bin < next; bin++) {
      const part = i + 1 < bins.length ? Math.log(bin / bins[i]) / Math.log(next / bins[i]) : 0;
      const end = values[i + 1] ?? values[i];
      all[bin] = logarithmic ? values[i] * (end / values[i]) ** part : values[i] + part * (end - values[i]);
    }
  }
  return all;
}
