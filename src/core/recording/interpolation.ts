/** Sum of the weights' sizes beyond which four points amplify noise rather than fit it; 1.25 in the middle of even points. */
const LARGEST_WEIGHTS = 2;

/**
 * Weights of Lagrange's cubic through four points at the increasing times `at[base..base + 3]`, read at time `x`, into `weights`.
 * Where two points stand so close that the weights grow, a straight line between the neighbours takes over.
 * Lagrange interpolation: Abramowitz & Stegun 1964, 25.2.1.
 */
export function cubicWeights(at: Float64Array, base: number, x: number, weights: Float64Array): void {
  const [t0, t1, t2, t3] = [at[base], at[base + 1], at[base + 2], at[base + 3]];
  const [d0, d1, d2, d3] = [x - t0, x - t1, x - t2, x - t3];
  weights[0] = (d1 * d2 * d3) / ((t0 - t1) * (t0 - t2) * (t0 - t3));
  weights[1] = (d0 * d2 * d3) / ((t1 - t0) * (t1 - t2) * (t1 - t3));
  weights[2] = (d0 * d1 * d3) / ((t2 - t0) * (t2 - t1) * (t2 - t3));
  weights[3] = (d0 * d1 * d2) / ((t3 - t0) * (t3 - t1) * (t3 - t2));
  const size = Math.abs(weights[0]) + Math.abs(weights[1]) + Math.abs(weights[2]) + Math.abs(weights[3]);
  if (!(size <= LARGEST_WEIGHTS)) linearWeights(at, base, x, weights);
}

/** Weights of the straight line between the two of four points around `x`. */
function linearWeights(at: Float64Array, base: number, x: number, weights: Float64Array): void {
  let left = 0;
  while (left < 2 && at[base + left + 1] < x) left++;
  const span = at[base + left + 1] - at[base + left];
  const share = span > 0 ? (x - at[base + left]) / span : 0;
  weights.fill(0);
  weights[left] = 1 - share;
  weights[left + 1] = share;
}

/**
 * Largest loss of the cubic between even points, midway between two, dB, positive; `ratio` is frequency over sampling rate, up to 0.5.
 * From the midpoint weights −1/16, 9/16, 9/16, −1/16.
 */
export function interpolationLossDb(ratio: number): number {
  const gain = (9 / 8) * Math.cos(Math.PI * ratio) - (1 / 8) * Math.cos(3 * Math.PI * ratio);
  return -20 * Math.log10(Math.abs(gain));
}
