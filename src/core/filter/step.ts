import { times } from './complex.ts';
import type { Family, Filter, StepFigures } from './filter.ts';
import { type StepTerm, stepTerms } from './partial-fractions.ts';
import { groupDelaySeconds } from './response.ts';

/** Figures of a prototype, times in units of 1/(2π·corner). */
interface PrototypeFigures {
  readonly rise: number;
  readonly settling: number;
  readonly overshoot: number;
}

/** Band about the end value within which an answer counts as settled. */
const SETTLED = 0.01;

/** Grid on which turning points are looked for; the quickest ringing of the families here turns every 1.5 or so. */
const STEP = 0.05;

const known = new Map<string, PrototypeFigures>();

/**
 * How a filter answers a unit step: delay at 0 Hz, rise from 10 % to 90 %, settling to 1 % and overshoot, from the exact
 * answer by partial fractions; every crossing and turning point to rounding.
 */
export function stepFigures(filter: Filter): StepFigures {
  const { rise, settling, overshoot } = figuresOf(filter.family, filter.order);
  const unitSeconds = 1 / (2 * Math.PI * filter.cornerHz);
  return {
    delaySeconds: groupDelaySeconds(filter, 0),
    riseSeconds: rise * unitSeconds,
    settlingSeconds: settling * unitSeconds,
    overshoot,
  };
}

/** Answer of a filter to a unit step at 0 s, at each of `timesSeconds`. */
export function stepResponse(filter: Filter, timesSeconds: Float64Array): Float64Array {
  const terms = stepTerms(filter.family, filter.order);
  return timesSeconds.map((t) => (t <= 0 ? 0 : 1 + sumAt(terms, t * 2 * Math.PI * filter.cornerHz)));
}

function figuresOf(family: Family, order: number): PrototypeFigures {
  const key = `${family} ${order}`;
  const before = known.get(key);
  if (before) return before;
  const terms = stepTerms(family, order);
  const value = (t: number) => 1 + sumAt(terms, t);
  const end = settledFor(terms);
  // Between two neighbours of these the answer is monotone.
  const turns = [0, ...turningPoints(terms, end), end];
  const reach = (level: number) => bisect((t) => value(t) - level, 0, turns[1]);
  const last = turns.findLastIndex((t) => Math.abs(value(t) - 1) > SETTLED);
  const figures = {
    rise: reach(0.9) - reach(0.1),
    settling: bisect((t) => Math.abs(value(t) - 1) - SETTLED, turns[last], turns[last + 1]),
    overshoot: Math.max(0, ...turns.map((t) => value(t) - 1)),
  };
  known.set(key, figures);
  return figures;
}

/** Σ Re(residue·e^{pole·t}). */
function sumAt(terms: readonly StepTerm[], t: number): number {
  return terms.reduce(
    (sum, { pole, residue }) =>
      sum + Math.exp(pole.re * t) * (residue.re * Math.cos(pole.im * t) - residue.im * Math.sin(pole.im * t)),
    0,
  );
}

/** A time after which all terms together stay below half of the settling band. */
function settledFor(terms: readonly StepTerm[]): number {
  const slowest = Math.min(...terms.map(({ pole }) => -pole.re));
  const largest = terms.reduce((sum, { residue }) => sum + Math.hypot(residue.re, residue.im), 0);
  return Math.log(largest / (SETTLED / 2)) / slowest;
}

/** Where the answer turns, up to `end`: zeros of its slope, the impulse response. */
function turningPoints(terms: readonly StepTerm[], end: number): readonly number[] {
  const slopes = terms.map(({ pole, residue }) => ({ pole, residue: times(pole, residue) }));
  const slope = (t: number) => sumAt(slopes, t);
  const turns: number[] = [];
  // With −3 dB at 1 no answer turns before 1; near 0 the slope of a high order would be rounding alone.
  for (let t = 1; t + STEP < end; t += STEP)
    if (slope(t) > 0 !== slope(t + STEP) > 0) turns.push(bisect(slope, t, t + STEP));
  return turns;
}

/** Root of a function between two times at which its signs differ. */
function bisect(value: (t: number) => number, from: number, to: number): number {
  const sign = Math.sign(value(to));
  let low = from;
  let high = to;
  for (let round = 0; round < 60; round++) {
    const middle = (low + high) / 2;
    if (Math.sign(value(middle)) === sign) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
