import type { LevelSpectrum } from './spectrum.ts';

/** Longest segment: at 200 Hz 44 minutes, at 50 kHz ten seconds; longer ones cost memory and show nothing new. */
const LONGEST = 2 ** 19;
/** Shortest level of a ladder; a shorter one resolves nothing below its own Nyquist frequency. */
const SHORTEST = 256;
/** Samples in a run, per sample of its longest segment: four segments that overlap by half. */
const FOUR_SEGMENTS = 2.5;

/**
 * Segment lengths for a recording whose longest run has so many samples: powers of two, longest first. The longest still gives
 * four half-overlapped segments, since the scatter of fewer hides everything. Below it they stand on the ladder 256·4ᵏ whatever
 * the length, so that two recordings of one rate resolve every frequency alike and their lines can be compared.
 * Short runs get one level: 32 samples, or what fits into them.
 */
export function segmentLengths(longestRunSamples: number): number[] {
  const fits = powerOfTwoBelow(Math.max(8, longestRunSamples));
  const steady = powerOfTwoBelow(Math.max(8, longestRunSamples / FOUR_SEGMENTS));
  const longest = Math.min(LONGEST, fits, Math.max(32, steady));
  const lengths = [longest];
  for (let samples = SHORTEST; samples < longest; samples *= 4) lengths.push(samples);
  return lengths.sort((a, b) => b - a);
}

/** Segments from which on the scatter no longer rules which lines are found. */
const STEADY_SEGMENTS = 16;
/** A spectrum of fewer samples per segment is too coarse to part lines. */
const COARSE_SAMPLES = 256;
/** Longest segment for lines: those of real machines wander, and gain nothing from narrower bins. */
const LONGEST_FOR_LINES = 2 ** 17;

/** Segment length for finding lines: the longest power of two of which a run of so many samples still holds 16, half-overlapped. */
export function lineSegmentSamples(longestRunSamples: number): number {
  const steady = powerOfTwoBelow(Math.max(8, longestRunSamples / ((STEADY_SEGMENTS + 1) / 2)));
  return Math.min(LONGEST_FOR_LINES, Math.max(COARSE_SAMPLES, steady));
}

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
