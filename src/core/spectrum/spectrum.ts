/** One-sided power spectral density by Welch's method at one segment length; bin k stands at k·rate/segmentSamples. */
export interface LevelSpectrum {
  readonly rateHz: number;
  readonly segmentSamples: number;
  /** unit²/Hz, segmentSamples/2 + 1 values. */
  readonly density: Float64Array;
  /** Segments averaged. */
  readonly segments: number;
  /** χ² degrees of freedom of each value, allowing for the overlap. */
  readonly degreesOfFreedom: number;
  /** Means over consecutive groups of segments, for resampling; the same bins as `density`. Groups may differ in size. */
  readonly groups: readonly { readonly segments: number; readonly density: Float64Array }[];
}

/** Levels merged to nearly constant relative resolution: frequencies strictly increasing, f > 0. All arrays of one length. */
export interface Spectrum {
  readonly rateHz: number;
  readonly frequencyHz: Float64Array;
  /** unit²/Hz */
  readonly density: Float64Array;
  readonly degreesOfFreedom: Float64Array;
  /** Width in Hz that each point stands for: Σ density·widthHz is the power, unit². */
  readonly widthHz: Float64Array;
}

/** A narrow peak of the quiet spectrum above its noise floor. */
export interface NoiseLine {
  readonly frequencyHz: number;
  /** Uncertainty of the frequency, about two standard deviations, Hz. */
  readonly toleranceHz: number;
  /** Peak amplitude of the sine, in the channel's unit. */
  readonly amplitude: number;
  /** Height of the density above the noise floor at the line level's resolution, dB. */
  readonly aboveFloorDb: number;
  /** Name of the harmonic family, such as '24.3 Hz × 2' or 'mains 50 Hz × 1'; null where it stands alone. */
  readonly family: string | null;
  /** Frequencies above Nyquist that would fold onto this line, Hz, with mains harmonics among them named. */
  readonly foldedFrom: readonly { readonly frequencyHz: number; readonly mains: string | null }[];
}

/** A stretch of frequency, Hz. */
export interface Band {
  readonly lowHz: number;
  readonly highHz: number;
}
