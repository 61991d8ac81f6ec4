import type { LevelSpectrum } from './spectrum.ts';

/** Longest segment: at 200 Hz 44 minutes, at 50 kHz ten seconds; longer ones cost memory and show nothing new. */
const LONGEST = 2 ** 19;
const SHORTEST = 64;
/** Samples in a run, per sample of its longest segment: four segments that overlap by half. */
const FOUR_SEGMENTS = 2.5;
/** A level finer than this has degrees of freedom enough at every frequency; shorter ones would only cost time. */
const DEEPEST_RATIO = 1024;

/**
 * Segment lengths for a recording whose longest run has so many samples: powers of two, longest first, a factor of four apart.
 * The longest still gives four half-overlapped segments, since the scatter of fewer hides everything; from there down to 64,
 * or to a 1024th of the longest. Short runs get one level: 32 samples, or what fits into them.
 */
export function segmentLengths(longestRunSamples: number): number[] {
  const fits = powerOfTwoBelow(Math.max(8, longestRunSamples));
  const steady = powerOfTwoBelow(Math.max(8, longestRunSamples / FOUR_SEGMENTS));
  const longest = Math.min(LONGEST, fits, Math.max(32, steady));
  const lengths = [longest];
  const shortest = Math.max(SHORTEST, longest / DEEPEST_RATIO);
  for (let samples = longest / 4; samples >= shortest; samples /= 4) lengths.push(samples);
  return lengths;
}

/** Segments from which on the scatter no longer rules which lines are found. */
const STEADY_SEGMENTS = 16;
/** A spectrum of fewer samples per segment is too coarse to part lines. */
const COARSE_SAMPLES = 256;

/**
 * The level at which lines are looked for: the longest with 16 segments or more. In short recordings that would be a coarse
 * one, and a line gains more from narrow bins than from averages: there, the shortest of 256 samples or more with four segments,
 * else the longest. Throws RangeError without a level.
 */
export function lineLevel(levels: readonly LevelSpectrum[]): LevelSpectrum {
  const byLength = [...levels].sort((a, b) => b.segmentSamples - a.segmentSamples);
  if (byLength.length === 0)
    throw new RangeError('There is no spectrum to find lines in: every run is shorter than a segment');
  const steady = byLength.find((level) => level.segments >= STEADY_SEGMENTS);
  if (steady !== undefined && steady.segmentSamples >= COARSE_SAMPLES) return steady;
  const fine = byLength.findLast((level) => level.segmentSamples >= COARSE_SAMPLES && level.segments >= 4);
  return fine ?? steady ?? byLength[0];
}

function powerOfTwoBelow(limit: number): number {
  return 2 ** Math.floor(Math.log2(limit));
}
