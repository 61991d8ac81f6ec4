import { mergeLevels } from '../spectrum/merge.ts';
import type { Band, LevelSpectrum, NoiseLine, Spectrum } from '../spectrum/spectrum.ts';
import type { KeepBand, Limits, Rival } from './advice.ts';
import { bandPowers } from './band-powers.ts';
import { compareSpectra, excessBands } from './comparison.ts';
import { cornerRange } from './corner-range.ts';
import { layEvidence } from './evidence.ts';
import { findSignalBands } from './keep-band.ts';
import { noiseGainPower } from './noise-gain.ts';
import { type Contest, rivals } from './rivals.ts';
import { type Choice, choose } from './verdict.ts';

/** Highest corner a digital filter is advised at, as a share of the sampling rate. */
const HIGHEST_CORNER_SHARE = 0.45;

/** One channel's evidence and the user's wishes. */
export interface Question {
  readonly quietLevels: readonly LevelSpectrum[];
  readonly activeLevels: readonly LevelSpectrum[];
  readonly lines: readonly NoiseLine[];
  readonly limits: Limits;
  readonly keepHz: Band | null;
  readonly rejectHz: number | null;
}

/** What the spectra say, before any simulation. */
export interface Answer {
  readonly quietSpectrum: Spectrum;
  readonly activeSpectrum: Spectrum;
  readonly noiseGainPower: number;
  readonly keep: KeepBand;
  readonly inUse: readonly Band[];
  readonly contest: Contest;
  readonly rivals: readonly Rival[];
  readonly choice: Choice;
  readonly cornerRangeHz: readonly [number, number];
}

/**
 * Advises a filter for one channel from its quiet and active spectra: keep band, noise model, every rival at its best corner,
 * the choice among them and the 90 % interval of its corner. Given keep band and reject frequency overrule the measured ones.
 */
export function advise(question: Question): Answer {
  const { quietLevels, activeLevels, lines, limits } = question;
  const quietSpectrum = mergeLevels(quietLevels);
  const activeSpectrum = mergeLevels(activeLevels);
  const comparison = compareSpectra(activeSpectrum, quietSpectrum);
  const gainPower = noiseGainPower(comparison);
  const excess = excessBands(
    comparison,
    gainPower,
    lines.map((line) => line.frequencyHz),
  );
  const activeLevel = longest(activeLevels);
  const found = findSignalBands(comparison, excess, activeLevel, quietSpectrum, gainPower);
  const keep: KeepBand = question.keepHz
    ? { ...question.keepHz, source: 'given' }
    : { ...(found.keep ?? { lowHz: 0, highHz: 0 }), source: 'measured' };
  const rateHz = Math.min(quietSpectrum.rateHz, activeSpectrum.rateHz);
  const division = {
    rateHz,
    noiseGainPower: gainPower,
    keep,
    signalHighHz: Math.max(keep.highHz, question.keepHz ? 0 : found.limits.highHz),
    inUse: found.inUse.filter((band) => band.lowHz > keep.highHz),
  };
  const activePowers = bandPowers(activeLevel);
  const quietPowers = bandPowers(longest(quietLevels));
  const firstLine = lines.find((line) => line.frequencyHz > keep.highHz);
  const contest: Contest = {
    limits,
    keepHighHz: keep.highHz,
    firstLineHz: question.rejectHz ?? firstLine?.frequencyHz ?? null,
    highestCornerHz: HIGHEST_CORNER_SHARE * rateHz,
    nominal: question.keepHz !== null && question.rejectHz !== null,
    evidence: layEvidence(activePowers, quietPowers, quietSpectrum, division),
  };
  const field = rivals(contest);
  const within = lines.filter((line) => line.frequencyHz <= keep.highHz);
  const choice = choose(
    contest,
    field,
    within.map((line) => (gainPower * line.amplitude ** 2) / 2),
  );
  const resampled = {
    quietSpectrum,
    quietPowers,
    activePowers,
    activeLevel,
    keep,
    excessLimits: found.limits,
    firstLineDeviationHz: question.rejectHz === null && firstLine ? firstLine.toleranceHz / 2 : 0,
    division,
  };
  return {
    quietSpectrum,
    activeSpectrum,
    noiseGainPower: gainPower,
    keep,
    inUse: division.inUse,
    contest,
    rivals: field,
    choice,
    cornerRangeHz: cornerRange(resampled, contest, choice.rival),
  };
}

function longest(levels: readonly LevelSpectrum[]): LevelSpectrum {
  return levels.reduce((a, b) => (b.segmentSamples > a.segmentSamples ? b : a));
}
