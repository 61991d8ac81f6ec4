import { UserError } from '../user-error.ts';
import { besselPoles } from './bessel.ts';
import type { Family, PrototypeSection } from './filter.ts';

/** Highest order of every family with a choice of orders. */
const HIGHEST_ORDER = 8;

const made = new Map<string, readonly PrototypeSection[]>();

/**
 * Sections of a family's analog low-pass prototype, −3.0103 dB at 1, the lowest Q first: Butterworth 1930 in closed form,
 * Bessel after Thomson 1949, `rc` the single real pole of resistor and capacitor. A new family is one more case here.
 * Throws UserError('usage') for an order that the family does not have.
 */
export function prototypeSections(family: Family, order: number): readonly PrototypeSection[] {
  const key = `${family} ${order}`;
  const known = made.get(key);
  if (known) return known;
  const highest = family === 'rc' ? 1 : HIGHEST_ORDER;
  if (!Number.isInteger(order) || order < 1 || order > highest)
    throw new UserError(
      'usage',
      `There is no ${family} filter of order ${order}; choose an order from 1 to ${highest}.`,
    );
  const sections = sectionsOf(family, order);
  made.set(key, sections);
  return sections;
}

function sectionsOf(family: Family, order: number): readonly PrototypeSection[] {
  switch (family) {
    case 'rc':
      return [{ frequency: 1, q: null }];
    case 'butterworth':
      return butterworthSections(order);
    case 'bessel':
      return besselPoles(order)
        .filter((pole) => pole.im >= 0)
        .map((pole) => {
          const frequency = Math.hypot(pole.re, pole.im);
          return { frequency, q: pole.im === 0 ? null : frequency / (-2 * pole.re) };
        })
        .sort((a, b) => (a.q ?? 0) - (b.q ?? 0));
  }
}

/** Poles on the unit circle at equal angles: Q = 1/(2·cos θ). */
function butterworthSections(order: number): readonly PrototypeSection[] {
  const real = order % 2 === 1 ? [{ frequency: 1, q: null }] : [];
  const pairs = Array.from({ length: Math.floor(order / 2) }, (_, k) => {
    const angle = (Math.PI * (2 * (k + 1) - (order % 2 === 1 ? 0 : 1))) / (2 * order);
    return { frequency: 1, q: 1 / (2 * Math.cos(angle)) };
  });
  return [...real, ...pairs];
}
