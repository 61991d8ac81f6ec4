import chiSquare from '@stdlib/stats-base-dists-chisquare-quantile';
import fCdf from '@stdlib/stats-base-dists-f-cdf';
import fInverse from '@stdlib/stats-base-dists-f-quantile';

/** Beyond so many degrees of freedom the library's χ² quantile is off by up to 0.6 %, its F quantile past this by any amount. */
const CHI_SQUARE_LIMIT = 1500;
const F_LIMIT = 1e7;

/**
 * Value that χ² with `dof` degrees of freedom (a real number over 0) stays below with probability `p` (0 ≤ p < 1).
 * Throws RangeError outside that domain. Tables: NIST/SEMATECH e-Handbook §1.3.6.7.4.
 */
export function chiSquareQuantile(p: number, dof: number): number {
  checkProbability(p);
  checkDof(dof);
  return dof <= CHI_SQUARE_LIMIT || p === 0 ? chiSquare(p, dof) : expandedChiSquare(p, dof);
}

/**
 * Value that F with `dof1` (numerator) and `dof2` degrees of freedom (real numbers over 0) stays below with probability `p`
 * (0 ≤ p < 1); ∞ where it lies beyond 10⁹, which only a denominator of two degrees of freedom or fewer can bring about.
 * Throws RangeError outside that domain. Tables: NIST/SEMATECH e-Handbook §1.3.6.7.3.
 */
export function fQuantile(p: number, dof1: number, dof2: number): number {
  checkProbability(p);
  checkDof(dof1);
  checkDof(dof2);
  const value = fInverse(p, Math.min(dof1, F_LIMIT), Math.min(dof2, F_LIMIT));
  return Number.isNaN(value) ? Number.POSITIVE_INFINITY : value;
}

/** Probability that F with `dof1` and `dof2` degrees of freedom exceeds `x` (≥ 0). Throws RangeError outside the domain. */
export function fUpperTail(x: number, dof1: number, dof2: number): number {
  if (!(x >= 0)) throw new RangeError(`A ratio of variances is 0 or more, not ${x}`);
  checkDof(dof1);
  checkDof(dof2);
  // F with swapped degrees of freedom is the reciprocal: keeps small tails exact where 1 − cdf would lose them.
  return x === 0 ? 1 : fCdf(1 / x, Math.min(dof2, F_LIMIT), Math.min(dof1, F_LIMIT));
}

/** Expansion of the χ² quantile for many degrees of freedom, good to 1e-9 from 1,500 on (Goldberg & Levine 1946, Ann. Math. Stat. 17:216). */
function expandedChiSquare(p: number, dof: number): number {
  // The normal quantile: a χ² of one degree of freedom is the square of a normal number.
  const x = Math.sign(p - 0.5) * Math.sqrt(chiSquare(Math.abs(2 * p - 1), 1));
  const root = Math.sqrt(2 * dof);
  return (
    dof +
    root * x +
    (2 / 3) * (x ** 2 - 1) +
    (x ** 3 - 7 * x) / (9 * root) -
    (6 * x ** 4 + 14 * x ** 2 - 32) / (405 * dof) +
    (9 * x ** 5 + 256 * x ** 3 - 433 * x) / (4860 * root * dof) +
    (12 * x ** 6 - 243 * x ** 4 - 923 * x ** 2 + 1472) / (25515 * dof ** 2)
  );
}

function checkProbability(p: number): void {
  if (!(p >= 0 && p < 1)) throw new RangeError(`A probability lies between 0 and 1, not at ${p}`);
}

function checkDof(dof: number): void {
  if (!(dof > 0 && dof < Number.POSITIVE_INFINITY))
    throw new RangeError(`Degrees of freedom are finite and over 0, not ${dof}`);
}
