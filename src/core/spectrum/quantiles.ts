import chiSquare from '@stdlib/stats-base-dists-chisquare-quantile';
import fCdf from '@stdlib/stats-base-dists-f-cdf';
import fInverse from '@stdlib/stats-base-dists-f-quantile';

/**
 * Value that χ² with `dof` degrees of freedom (a real number over 0) stays below with probability `p` (0 ≤ p < 1).
 * Throws RangeError outside that domain. Tables: NIST/SEMATECH e-Handbook §1.3.6.7.4.
 */
export function chiSquareQuantile(p: number, dof: number): number {
  checkProbability(p);
  checkDof(dof);
  return chiSquare(p, dof);
}

/**
 * Value that F with `dof1` (numerator) and `dof2` degrees of freedom (real numbers over 0) stays below with probability `p`
 * (0 ≤ p < 1). Throws RangeError outside that domain. Tables: NIST/SEMATECH e-Handbook §1.3.6.7.3.
 */
export function fQuantile(p: number, dof1: number, dof2: number): number {
  checkProbability(p);
  checkDof(dof1);
  checkDof(dof2);
  return fInverse(p, dof1, dof2);
}

/** Probability that F with `dof1` and `dof2` degrees of freedom exceeds `x` (≥ 0). Throws RangeError outside the domain. */
export function fUpperTail(x: number, dof1: number, dof2: number): number {
  if (!(x >= 0)) throw new RangeError(`A ratio of variances is 0 or more, not ${x}`);
  checkDof(dof1);
  checkDof(dof2);
  // F with swapped degrees of freedom is the reciprocal: keeps small tails exact where 1 − cdf would lose them.
  return x === 0 ? 1 : fCdf(1 / x, dof2, dof1);
}

function checkProbability(p: number): void {
  if (!(p >= 0 && p < 1)) throw new RangeError(`A probability lies between 0 and 1, not at ${p}`);
}

function checkDof(dof: number): void {
  if (!(dof > 0 && dof < Number.POSITIVE_INFINITY))
    throw new RangeError(`Degrees of freedom are finite and over 0, not ${dof}`);
}
