import type { Comparison } from './comparison.ts';

const PLAUSIBLE = 4;

/**
 * How much stronger the noise is in use than when quiet, as a ratio of powers, read where the active recording holds
 * nothing but noise: the weighted median of active over quiet, by bandwidth, then the mean of the bands that agree with it.
 * Where more than half of the band is signal, a lower quantile is tried; where nothing plausible (a quarter to four times)
 * is found the noise cannot be told from the signal and 1 is returned.
 */
export function noiseGainPower(comparison: Comparison): number {
  const bands = Array.from(comparison.lowHz, (low, i) => ({
    ratio: comparison.active[i] / comparison.quiet[i],
    widthHz: comparison.highHz[i] - low,
  })).sort((a, b) => a.ratio - b.ratio);
  for (const share of [0.5, 0.2]) {
    const centre = weightedQuantile(bands, share);
    if (centre < 1 / PLAUSIBLE || centre > PLAUSIBLE) continue;
    const agreeing = bands.filter((band) => band.ratio > centre / 1.5 && band.ratio < centre * 1.5);
    const width = agreeing.reduce((sum, band) => sum + band.widthHz, 0);
    return Math.exp(agreeing.reduce((sum, band) => sum + band.widthHz * Math.log(band.ratio), 0) / width);
  }
  return 1;
}

function weightedQuantile(sorted: readonly { ratio: number; widthHz: number }[], share: number): number {
  const total = sorted.reduce((sum, band) => sum + band.widthHz, 0);
  let below = 0;
  for (const band of sorted) {
    below += band.widthHz;
    if (below >= share * total) return band.ratio;
  }
  return sorted[sorted.length - 1].ratio;
}
