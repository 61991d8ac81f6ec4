import { requireCornerBelowNyquist } from './discretise.ts';
import type { DiscreteFilter } from './filter.ts';

/** Both ways of getting α of y += α·(x − y) from a corner. */
export interface AlphaForms {
  /** 1 − e^{−T/RC}: keeps the pole, and with it the step response. */
  readonly exact: number;
  /** T/(RC + T): the backward difference that is common in firmware. */
  readonly common: number;
  /** (−3 dB corner that the common form makes)/(corner asked for) − 1; always negative. */
  readonly commonCornerError: number;
}

/**
 * The one-pole RC low-pass at a sampling rate as y += α·(x − y), α = 1 − e^{−T/RC}: its answer to a step that begins with
 * sample 0 is the analog one at (n + 1)·T, that of an input held over each sample (common practice; derived from 1 − e^{−t/RC}).
 * Throws UserError('usage') where the corner is not between 0 and half of the rate.
 */
export function stepInvariantOnePole(cornerHz: number, rateHz: number): DiscreteFilter {
  const { exact } = alphaForms(cornerHz, rateHz);
  return { rateHz, method: 'step-invariant', sections: [{ b0: exact, b1: 0, b2: 0, a1: exact - 1, a2: 0 }] };
}

/** α for a corner at a rate, exact and common, with the error of the common one. Throws as `stepInvariantOnePole` does. */
export function alphaForms(cornerHz: number, rateHz: number): AlphaForms {
  requireCornerBelowNyquist(cornerHz, rateHz);
  const ratio = (2 * Math.PI * cornerHz) / rateHz;
  const common = ratio / (1 + ratio);
  // |H|² = α²/(1 − 2(1 − α)·cos ω + (1 − α)²) = 1/2, solved for sin²(ω/2) so that low corners keep their digits.
  const reached = (rateHz / Math.PI) * Math.asin(common / (2 * Math.sqrt(1 - common)));
  return { exact: -Math.expm1(-ratio), common, commonCornerError: reached / cornerHz - 1 };
}
