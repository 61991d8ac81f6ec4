import type { Filter } from '../filter/filter.ts';
import { weightedDensity } from '../spectrum/merge.ts';
import type { Band, LevelSpectrum, Spectrum } from '../spectrum/spectrum.ts';
import type { KeepBand } from './advice.ts';
import { type BandPowers, reweighted } from './band-powers.ts';
import { type Division, layEvidence } from './evidence.ts';
import { excessEdge } from './keep-band.ts';
import { uniformNumbers } from './random.ts';
import { bestCorner, type Contest } from './rivals.ts';

/** What a resampled corner is derived from again; everything but powers and keep-band edge stays as found. */
export interface Resampled {
  readonly quietSpectrum: Spectrum;
  readonly quietPowers: BandPowers;
  readonly activePowers: BandPowers;
  /** The level at which the edge of the keep band is read. */
  readonly activeLevel: LevelSpectrum;
  readonly keep: KeepBand;
  /** Limits within which the edge is looked for again, Hz. */
  readonly excessLimits: Band;
  /** Standard deviation of the first noise line's frequency, Hz; 0 where it was given. */
  readonly firstLineDeviationHz: number;
  readonly division: Division;
}

const RESAMPLES = 100;
const START = 20011;

/**
 * 90 % interval of the corner, Hz: groups of segments are weighted anew a hundred times (Bayesian bootstrap, Rubin 1981),
 * and keep band and corner are found again from each, with the first noise line as uncertain as it was measured.
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
  const draw = (powers: BandPowers) => powers.groups.map(() => -Math.log(uniform()));
  const activeWeights = draw(from.activePowers);
  const highHz = edgeAgain(from, activeWeights);
  const evidence = layEvidence(
    reweighted(from.activePowers, activeWeights),
    reweighted(from.quietPowers, draw(from.quietPowers)),
    from.quietSpectrum,
    {
      ...from.division,
      keep: { ...from.keep, highHz },
      signalHighHz: Math.max(highHz, from.division.signalHighHz),
    },
  );
  const firstLineHz =
    contest.firstLineHz === null ? null : contest.firstLineHz + from.firstLineDeviationHz * normal(uniform);
  return { ...contest, keepHighHz: highHz, firstLineHz, evidence };
}

/** Standard normal number; Box & Muller 1958. */
function normal(uniform: () => number): number {
  return Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

function edgeAgain(
  { keep, activeLevel, quietSpectrum, division, excessLimits }: Resampled,
  weights: readonly number[],
) {
  if (keep.source === 'given' || keep.highHz <= 0) return keep.highHz;
  const read = weightedDensity(activeLevel, weights);
  return excessEdge(activeLevel, read, quietSpectrum, division.noiseGainPower, excessLimits);
}
