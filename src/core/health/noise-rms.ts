import type { ActivityWindow } from '../spectrum/stationary.ts';

/**
 * Noise of a recording, in its unit: root of the median variance over windows of 64 samples, each about its own straight line, weighted
 * by samples. What comes now and then, or changes slowly, does not count; 0 without a window.
 */
export function noiseRms(windows: readonly ActivityWindow[]): number {
  const sorted = [...windows].sort((a, b) => a.variance - b.variance);
  const half = sorted.reduce((sum, window) => sum + window.samples, 0) / 2;
  let below = 0;
  for (const { variance, samples } of sorted) {
    below += samples;
    if (below >= half) return Math.sqrt(variance);
  }
  return 0;
}
