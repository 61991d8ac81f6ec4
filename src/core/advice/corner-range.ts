import type { Filter } from '../filter/filter.ts';
import { mergeLevels, weightedDensity } from '../spectrum/merge.ts';
import type { Band, LevelSpectrum } from '../spectrum/spectrum.ts';
import type { KeepBand } from './advice.ts';
import { layEvidence } from './evidence.ts';
import { excessEdge } from './keep-band.ts';
import { uniformNumbers } from './random.ts';
import { bestCorner, type Contest } from './rivals.ts';

/** What a resampled corner is derived from again; everything but the spectra stays as found. */
export interface Resampled {
  readonly quietLevels: readonly LevelSpectrum[];
  readonly activeLevels: readonly LevelSpectrum[];
  readonly noiseGainPower: number;
  readonly keep: KeepBand;
  /** Limits within which the edge is looked for again, Hz. */
  readonly excessLimits: Band;
  /** As far as any signal reaches, Hz. */
  readonly signalHighHz: number;
  readonly inUse: readonly Band[];
}

const RESAMPLES = 100;
const START = 20011;

/**
 * 90 % interval of the corner, Hz: groups of segments are weighted anew a hundred times (Bayesian bootstrap, Rubin 1981),
 * and keep band and corner are found again from each.
 */
export function cornerRange(resampled: Resampled, contest: Contest, chosen: Filter): readonly [number, number] {
  const uniform = uniformNumbers(START);
  const corners = Array.from({ length: RESAMPLES }, () => {
    const again = resample(resampled, contest, uniform);
    return bestCorner(again, chosen.family, chosen.order);
  }).sort((a, b) => a - b);
  const at = (share: number) => corners[Math.round(share * (corners.length - 1))];
  return [Math.min(at(0.05), chosen.cornerHz), Math.max(at(0.95), chosen.cornerHz)];
}

function resample(from: Resampled, contest: Contest, uniform: () => number): Contest {
  const weigh = (levels: readonly LevelSpectrum[]) => {
    const most = Math.max(...levels.map((level) => level.groups.length));
    return Array.from({ length: most }, () => -Math.log(uniform()));
  };
  const activeWeights = weigh(from.activeLevels);
  const active = mergeLevels(from.activeLevels, activeWeights);
  const quiet = mergeLevels(from.quietLevels, weigh(from.quietLevels));
  const longest = from.activeLevels.reduce((a, b) => (b.segmentSamples > a.segmentSamples ? b : a));
  const read = weightedDensity(longest, activeWeights);
  const highHz =
    from.keep.source === 'given' || from.keep.highHz <= 0
      ? from.keep.highHz
      : excessEdge(
          { ...longest, density: longest.density.map((_, bin) => read(bin)) },
          quiet,
          from.noiseGainPower,
          from.excessLimits,
        );
  const keep = { ...from.keep, highHz };
  const evidence = layEvidence(
    active,
    quiet,
    from.noiseGainPower,
    keep,
    Math.max(highHz, from.signalHighHz),
    from.inUse,
  );
  return { ...contest, keepHighHz: highHz, evidence };
}
