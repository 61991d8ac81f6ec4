import type { Band, LevelSpectrum, Spectrum } from '../spectrum/spectrum.ts';
import type { Comparison } from './comparison.ts';
import { densityAt } from './density.ts';

/** Signal's band and what else is there only in use. */
export interface SignalBands {
  /** null where nothing in the active recording exceeds the quiet one. */
  readonly keep: Band | null;
  readonly inUse: readonly Band[];
  /** Where the signal's excess was found, Hz: the limits within which its edge is looked for. */
  readonly limits: Band;
}

interface Cluster extends Band {
  readonly excessPower: number;
}

/** Bands of excess less than this ratio apart belong to one cluster. */
const JOIN_RATIO = 1.5;
/** Share of the excess power that the keep band holds. */
const KEPT_SHARE = 0.99;
/**
 * A Hann main lobe carries the outermost component's power this many bins beyond it before 99 % of the whole is reached
 * (bins weigh 1/6, 2/3, 1/6: Harris 1978); taken off the measured edge.
 */
const LEAKAGE_BINS = 0.5;

/**
 * Finds the keep band: the lowest clusters of excess that hold the signal's power, to the frequency below which lie 99 % of it.
 * Clusters behind a gap are present only in use. `excess` marks the bands of `comparison`; `active` is the longest level,
 * because the edge of slow motion needs the finest bins.
 */
export function findSignalBands(
  comparison: Comparison,
  excess: readonly boolean[],
  active: LevelSpectrum,
  quiet: Spectrum,
  noiseGainPower: number,
): SignalBands {
  const clusters = joinClusters(comparison, excess, noiseGainPower);
  if (clusters.length === 0) return { keep: null, inUse: [], limits: { lowHz: 0, highHz: 0 } };
  const last = lastOfSignal(clusters);
  const limits = { lowHz: clusters[0].lowHz, highHz: clusters[last].highHz };
  return {
    keep: {
      lowHz: excess.indexOf(true) < 3 ? 0 : limits.lowHz,
      highHz: excessEdge(active, (bin) => active.density[bin], quiet, noiseGainPower, limits),
    },
    inUse: clusters.slice(last + 1).map(({ lowHz, highHz }) => ({ lowHz, highHz })),
    limits,
  };
}

/**
 * Frequency in Hz below which 99 % of the excess of active over quiet·`noiseGainPower` within `limits` lies,
 * corrected for the leakage of the window. `read` gives the density of `active` at a bin.
 */
export function excessEdge(
  active: LevelSpectrum,
  read: (bin: number) => number,
  quiet: Spectrum,
  noiseGainPower: number,
  limits: Band,
): number {
  const binHz = active.rateHz / active.segmentSamples;
  const first = Math.max(1, Math.floor(limits.lowHz / binHz));
  const last = Math.min(active.density.length - 1, Math.ceil(limits.highHz / binHz));
  const cumulated = new Float64Array(last - first + 2);
  for (let bin = first; bin <= last; bin++) {
    const excess = read(bin) - noiseGainPower * densityAt(quiet, bin * binHz);
    cumulated[bin - first + 1] = cumulated[bin - first] + excess;
  }
  const target = KEPT_SHARE * cumulated[cumulated.length - 1];
  const reached = cumulated.findIndex((power, index) => index > 0 && power >= target);
  if (reached < 1) return limits.highHz;
  const part = (target - cumulated[reached - 1]) / (cumulated[reached] - cumulated[reached - 1]);
  const bins = first + reached - 1 - 0.5 + part;
  return Math.max(0.5, bins - LEAKAGE_BINS) * binHz;
}

function joinClusters(comparison: Comparison, excess: readonly boolean[], noiseGainPower: number): Cluster[] {
  const clusters: Cluster[] = [];
  excess.forEach((marked, band) => {
    if (!marked) return;
    const lowHz = comparison.lowHz[band];
    const highHz = comparison.highHz[band];
    const power = (comparison.active[band] - noiseGainPower * comparison.quiet[band]) * (highHz - lowHz);
    const previous = clusters.at(-1);
    if (previous && lowHz <= previous.highHz * JOIN_RATIO)
      clusters[clusters.length - 1] = { lowHz: previous.lowHz, highHz, excessPower: previous.excessPower + power };
    else clusters.push({ lowHz, highHz, excessPower: power });
  });
  return clusters;
}

/** Index of the last cluster that is signal: a wide gap parts it from what follows, and most of the power lies below. */
function lastOfSignal(clusters: readonly Cluster[]): number {
  const total = clusters.reduce((sum, cluster) => sum + cluster.excessPower, 0);
  let below = 0;
  for (let index = 0; index + 1 < clusters.length; index++) {
    below += clusters[index].excessPower;
    const gap = clusters[index + 1].lowHz / clusters[index].highHz;
    if ((gap >= 8 && below >= 0.3 * total) || (gap >= 3 && below >= 0.8 * total)) return index;
    if (below >= KEPT_SHARE * total) return index;
  }
  return clusters.length - 1;
}
