/** Families of this version; `rc` is the single pole. */
export type Family = 'rc' | 'butterworth' | 'bessel';
export type Shape = 'low-pass';

/** A filter as an engineer names it. The gain at `cornerHz` is −3.0103 dB whatever the family and order. */
export interface Filter {
  readonly shape: Shape;
  readonly family: Family;
  /** Number of poles; 1 for `rc`. */
  readonly order: number;
  readonly cornerHz: number;
}

/** One section of the analog prototype whose −3 dB frequency is 1. */
export interface PrototypeSection {
  /** Pole frequency relative to the corner. */
  readonly frequency: number;
  /** Pole quality; null for a single real pole. */
  readonly q: number | null;
}

/** Second-order section, a0 = 1: y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂. First-order sections have b2 = a2 = 0. */
export interface Section {
  readonly b0: number;
  readonly b1: number;
  readonly b2: number;
  readonly a1: number;
  readonly a2: number;
}

/** A filter made discrete at one rate. */
export interface DiscreteFilter {
  readonly rateHz: number;
  /** `bilinear`: pre-warped at the corner. `step-invariant`: α = 1 − e^{−T/RC}, one pole only. */
  readonly method: 'bilinear' | 'step-invariant';
  readonly sections: readonly Section[];
}

/** How a filter answers a unit step, and what it does to time. */
export interface StepFigures {
  /** Group delay at 0 Hz, seconds. */
  readonly delaySeconds: number;
  /** 10 % to 90 %, seconds. */
  readonly riseSeconds: number;
  /** Until the answer stays within 1 % of its end value, seconds. */
  readonly settlingSeconds: number;
  /** Peak above the end value, as a fraction of the step. */
  readonly overshoot: number;
}
