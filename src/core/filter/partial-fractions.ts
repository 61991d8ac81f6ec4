import { type Complex, divide, minus, times } from './complex.ts';
import { prototypeSections } from './families.ts';
import type { Family } from './filter.ts';

/** One term of a prototype's step response: Re(residue·e^{pole·t}), t in units of 1/(2π·corner). */
export interface StepTerm {
  /** Real, or the upper one of a conjugate pair. */
  readonly pole: Complex;
  /** That of H(s)/s; of a pair twice, so that the real part counts both. */
  readonly residue: Complex;
}

/**
 * Terms of a prototype's answer to a unit step, 1 + Σ Re(residue·e^{pole·t}): partial fractions of H(s)/s over distinct
 * poles (Oppenheim, Willsky & Nawab, Signals and Systems, appendix A). Throws UserError('usage') as `prototypeSections` does.
 */
export function stepTerms(family: Family, order: number): readonly StepTerm[] {
  const upper = prototypeSections(family, order).map(({ frequency, q }): Complex => {
    if (q === null) return { re: -frequency, im: 0 };
    return { re: -frequency / (2 * q), im: frequency * Math.sqrt(1 - 1 / (4 * q * q)) };
  });
  const poles = upper.flatMap((pole) => (pole.im === 0 ? [pole] : [pole, { re: pole.re, im: -pole.im }]));
  return upper.map((pole) => {
    // −Π p/(p − pᵢ) over the other poles p: factor by factor, so that nothing grows large.
    const residue = poles
      .filter((other) => other.re !== pole.re || other.im !== pole.im)
      .map((other) => divide(other, minus(other, pole)))
      .reduce(times, { re: pole.im === 0 ? -1 : -2, im: 0 });
    return { pole, residue };
  });
}
