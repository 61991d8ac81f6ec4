import type { Spectrum } from '../spectrum/spectrum.ts';

/** Density of `spectrum` at a frequency, by straight line between its points and constant beyond its ends; unit²/Hz. */
export function densityAt(spectrum: Spectrum, frequencyHz: number): number {
  const { frequencyHz: points, density } = spectrum;
  const end = points.length - 1;
  if (frequencyHz <= points[0]) return density[0];
  if (frequencyHz >= points[end]) return density[end];
  let low = 0;
  let high = end;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (points[middle] <= frequencyHz) low = middle;
    else high = middle;
  }
  const part = (frequencyHz - points[low]) / (points[high] - points[low]);
  return density[low] + part * (density[high] - density[low]);
}
