/** Figures of the periodic Hann window (Harris 1978, Table I; Heinzel, Rüdiger & Schilling 2002, Appendix C.4). */
export const HANN = {
  /** Mean of the weights. */
  coherentGain: 0.5,
  /** Equivalent noise bandwidth, bins: N·Σw² / (Σw)². */
  noiseBandwidthBins: 1.5,
  /** Correlation of the amplitudes of two segments of white noise that overlap by half. */
  overlapCorrelation: 1 / 6,
  /**
   * Variance of a mean over many neighbouring bins, relative to independent bins: 1 + 2·(4/9 + 1/36).
   * Degrees of freedom that are summed over neighbouring bins have to be divided by it.
   */
  neighbourInflation: 35 / 18,
} as const;

/**
 * Periodic (DFT-even) Hann window: w[n] = ½ − ½·cos(2πn/N), n = 0 … N−1.
 * Throws RangeError for fewer than 3 samples. Source: Harris 1978, eq. 27 with α = 2.
 */
export function hann(samples: number): Float64Array {
  if (!Number.isInteger(samples) || samples < 3)
    throw new RangeError(`A window needs 3 samples or more, not ${samples}`);
  const weights = new Float64Array(samples);
  for (let n = 0; n < samples; n++) weights[n] = 0.5 - 0.5 * Math.cos((2 * Math.PI * n) / samples);
  return weights;
}

/**
 * Power that a sine shows in a bin `distanceBins` away from its frequency, relative to a bin right on it.
 * The amplitude is sinc(d)/(1 − d²) for long segments (Harris 1978, §V; Nuttall 1981, Table I).
 */
export function hannLobe(distanceBins: number): number {
  const d = Math.abs(distanceBins);
  if (d < 1e-9) return 1;
  if (Math.abs(d - 1) < 1e-7) return 0.25;
  return (Math.sin(Math.PI * d) / (Math.PI * d * (1 - d * d))) ** 2;
}

/** Upper bound of `hannLobe` beyond the main lobe (d ≥ 2): the crests of the side lobes, falling 18 dB an octave. */
export function hannSideLobes(distanceBins: number): number {
  const d = Math.abs(distanceBins);
  return (1 / (Math.PI * d * (d * d - 1))) ** 2;
}

/**
 * Distance of a sine from the middle one of three bins, in bins, −½ … ½, from the powers above the noise in them.
 * With amplitudes a₋, a₀, a₊ the Hann lobe gives δ = 2·(a₊ − a₋)/(a₋ + 2a₀ + a₊) exactly
 * (Grandke 1983, IEEE Trans. IM-32:350, carried from two bins to three). Negative powers count as 0.
 */
export function hannOffset(below: number, middle: number, above: number): number {
  const [low, mid, high] = [below, middle, above].map((power) => Math.sqrt(Math.max(0, power)));
  const sum = low + 2 * mid + high;
  return sum > 0 ? Math.max(-0.5, Math.min(0.5, (2 * (high - low)) / sum)) : 0;
}
