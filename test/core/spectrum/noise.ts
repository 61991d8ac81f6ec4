import { uniformNumbers } from '../../../src/core/advice/random.ts';
import type { LevelSpectrum } from '../../../src/core/spectrum/spectrum.ts';
import { WelchFold } from '../../../src/core/spectrum/welch.ts';

/** Normal numbers of variance 1, the same on every machine (Box & Muller 1958). */
export function normalNumbers(start: number): () => number {
  const uniform = uniformNumbers(start);
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** Samples of a function of their index. */
export function samplesOf(count: number, value: (index: number) => number): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => value(i));
}

/** Samples that half-overlapped segments of a length need. */
export function samplesFor(segmentSamples: number, segments: number): number {
  return (segmentSamples / 2) * (segments + 1);
}

/** Spectrum of one run at one segment length. */
export function levelFrom(samples: Float64Array, segmentSamples: number, rateHz: number): LevelSpectrum {
  return levelsFrom(samples, [segmentSamples], rateHz)[0];
}

/** Spectra of one run at several segment lengths. */
export function levelsFrom(samples: Float64Array, segmentSamples: readonly number[], rateHz: number): LevelSpectrum[] {
  const fold = new WelchFold({ rateHz, segmentSamples, expectedSamples: samples.length });
  fold.push(samples, true);
  return fold.result();
}
