import FFT from 'fft.js';
import { hann } from './window.ts';

/** Transform of two real sequences at once, with the scratch space it needs. */
export interface PairTransform {
  /** Interleaved input: first sequence in the even places, second in the odd ones. */
  readonly input: Float64Array;
  /** Interleaved complex output. */
  readonly output: Float64Array;
  /** Hann window of that length. */
  readonly window: Float64Array;
  run(): void;
}

const byLength = new Map<number, PairTransform>();

/**
 * Complex transform of `samples` points, a power of two from 4 on. Shared by all who ask for that length, because tables and
 * scratch weigh more than a spectrum: fill `input`, run, and read `output` before anyone else does.
 */
export function pairTransform(samples: number): PairTransform {
  let transform = byLength.get(samples);
  if (transform === undefined) {
    const fft = new FFT(samples);
    const input = new Float64Array(2 * samples);
    const output = new Float64Array(2 * samples);
    transform = { input, output, window: hann(samples), run: () => fft.transform(output, input) };
    byLength.set(samples, transform);
  }
  return transform;
}

/**
 * Adds |A|² and |B|² of the two sequences to `sumA` and `sumB` (bins 0 … N/2; the same array is allowed).
 * With Z = A + iB: A[k] = (Z[k] + Z*[N−k])/2, B[k] = (Z[k] − Z*[N−k])/2i (Press et al., Numerical Recipes, §12.3).
 */
export function addPowers({ output }: PairTransform, sumA: Float64Array, sumB: Float64Array): void {
  const last = output.length;
  sumA[0] += output[0] * output[0];
  sumB[0] += output[1] * output[1];
  for (let k = 1, low = 2, high = last - 2; low <= high; k++, low += 2, high -= 2) {
    const realSum = output[low] + output[high];
    const realDifference = output[low] - output[high];
    const imaginarySum = output[low + 1] + output[high + 1];
    const imaginaryDifference = output[low + 1] - output[high + 1];
    sumA[k] += 0.25 * (realSum * realSum + imaginaryDifference * imaginaryDifference);
    sumB[k] += 0.25 * (imaginarySum * imaginarySum + realDifference * realDifference);
  }
}
