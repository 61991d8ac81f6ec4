import type { Complex } from './bessel.ts';
import { prototypeSections } from './families.ts';
import type { Family, Filter, PrototypeSection, StepFigures } from './filter.ts';
import { groupDelaySeconds } from './response.ts';

/** Answer of the prototype to a unit step: 1 + Σ residue·e^{pole·t}, t in units of 1/(2π·corner). */
interface StepSeries {
  readonly poles: readonly Complex[];
  readonly residues: readonly Complex[];
}

/** Figures of a prototype, times in units of 1/(2π·corner). */
interface PrototypeFigures {
  readonly rise: number;
  readonly settling: number;
  readonly overshoot: number;
}

/** Grid on which crossings are looked for before they are refined; the answers of order 8 have long settled by its end. */
const END = 80;
const STEP = 0.02;
const SETTLED = 0.01;

const known = new Map<string, PrototypeFigures>();

/** How a filter answers a unit step: delay at 0 Hz, rise, settling and overshoot, from the exact answer by partial fractions. */
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
  const series = seriesOf(prototypeSections(filter.family, filter.order));
  return timesSeconds.map((t) => (t < 0 ? 0 : valueAt(series, t * 2 * Math.PI * filter.cornerHz)));
}

function figuresOf(family: Family, order: number): PrototypeFigures {
  const key = `${family} ${order}`;
  const before = known.get(key);
  if (before) return before;
  const series = seriesOf(prototypeSections(family, order));
  const value = (t: number) => valueAt(series, t);
  const figures = {
    rise: crossing(value, 0.9) - crossing(value, 0.1),
    settling: lastCrossing((t) => Math.abs(value(t) - 1) - SETTLED),
    overshoot: peak(value) - 1,
  };
  known.set(key, figures);
  return figures;
}

/** Partial fractions of H(s)/s over distinct poles: residue = Π(−p) / (pᵢ·Π(pᵢ − p)). */
function seriesOf(sections: readonly PrototypeSection[]): StepSeries {
  const poles = sections.flatMap(({ frequency, q }): Complex[] => {
    if (q === null) return [{ re: -frequency, im: 0 }];
    const re = -frequency / (2 * q);
    const im = frequency * Math.sqrt(1 - 1 / (4 * q * q));
    return [
      { re, im },
      { re, im: -im },
    ];
  });
  const residues = poles.map((pole, i) => {
    // −1 times the product of (−p)/(pᵢ − p) over the other poles: paired, so that nothing grows large.
    let re = -1;
    let im = 0;
    poles.forEach((other, j) => {
      if (j === i) return;
      const d = { re: pole.re - other.re, im: pole.im - other.im };
      const size = d.re * d.re + d.im * d.im;
      const factor = {
        re: -(other.re * d.re + other.im * d.im) / size,
        im: -(other.im * d.re - other.re * d.im) / size,
      };
      [re, im] = [re * factor.re - im * factor.im, re * factor.im + im * factor.re];
    });
    return { re, im };
  });
  return { poles, residues };
}

function valueAt({ poles, residues }: StepSeries, t: number): number {
  return poles.reduce((sum, { re, im }, i) => {
    const decay = Math.exp(re * t);
    return sum + decay * (residues[i].re * Math.cos(im * t) - residues[i].im * Math.sin(im * t));
  }, 1);
}

/** First time at which a rising value reaches `level`. */
function crossing(value: (t: number) => number, level: number): number {
  let t = 0;
  while (value(t) < level) t += STEP;
  return bisect((x) => value(x) - level, t - STEP, t);
}

/** Last time at which a value that ends negative changes sign. */
function lastCrossing(value: (t: number) => number): number {
  let t = END;
  while (value(t) < 0) t -= STEP;
  return bisect(value, t, t + STEP);
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

/** Largest value, at least 1, refined by a parabola through the three samples about it. */
function peak(value: (t: number) => number): number {
  let largest = 1;
  for (let t = STEP; t < END / 2; t += STEP) {
    const [before, here, after] = [value(t - STEP), value(t), value(t + STEP)];
    const curvature = before - 2 * here + after;
    // Where the answer has settled to the last bit there is no curvature left.
    if (here <= 1 || here < before || here < after || curvature >= 0) continue;
    largest = Math.max(largest, here - (after - before) ** 2 / (8 * curvature));
  }
  return largest;
}
