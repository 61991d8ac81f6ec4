import { hertz } from '../figure.ts';
import { UserError } from '../user-error.ts';
import { type Complex, divide, times } from './complex.ts';
import { prototypeSections } from './families.ts';
import type { DiscreteFilter, Filter, PrototypeSection, Section } from './filter.ts';

/**
 * The filter at a sampling rate as second-order sections, the lowest Q first: bilinear transform, pre-warped so that the
 * gain at the corner stays −3.0103 dB (Oppenheim & Schafer, Discrete-Time Signal Processing, §7.2.2).
 * Throws as `requireCornerBelowNyquist` does.
 */
export function discretise(filter: Filter, rateHz: number): DiscreteFilter {
  requireCornerBelowNyquist(filter.cornerHz, rateHz);
  const warped = Math.tan((Math.PI * filter.cornerHz) / rateHz);
  const sections = prototypeSections(filter.family, filter.order).map((section) => bilinear(section, warped));
  return { rateHz, method: 'bilinear', sections };
}

/** Throws UserError('usage') where a corner is not between 0 and half of the rate. */
export function requireCornerBelowNyquist(cornerHz: number, rateHz: number): void {
  if (cornerHz > 0 && cornerHz < rateHz / 2 && Number.isFinite(rateHz)) return;
  throw new UserError(
    'usage',
    `A corner of ${hertz(cornerHz, 3)} cannot be had at a rate of ${hertz(rateHz, 4)}; it must lie between 0 and ${hertz(rateHz / 2, 4)}.`,
  );
}

/** Gain of the discrete filter at a frequency, linear. */
export function discreteGain(filter: DiscreteFilter, frequencyHz: number): number {
  const { re, im } = transfer(filter, frequencyHz);
  return Math.hypot(re, im);
}

/** Gain of the discrete filter at a frequency, dB, negative for loss. */
export function discreteGainDb(filter: DiscreteFilter, frequencyHz: number): number {
  return 20 * Math.log10(discreteGain(filter, frequencyHz));
}

/** Phase of the discrete filter at a frequency, radians, between −π and π. */
export function discretePhaseRadians(filter: DiscreteFilter, frequencyHz: number): number {
  const { re, im } = transfer(filter, frequencyHz);
  return Math.atan2(im, re);
}

/** H(e^{jω}): product of the sections. */
function transfer({ rateHz, sections }: DiscreteFilter, frequencyHz: number): Complex {
  const omega = (2 * Math.PI * frequencyHz) / rateHz;
  const polynomial = (c0: number, c1: number, c2: number): Complex => ({
    re: c0 + c1 * Math.cos(omega) + c2 * Math.cos(2 * omega),
    im: -c1 * Math.sin(omega) - c2 * Math.sin(2 * omega),
  });
  return sections
    .map(({ b0, b1, b2, a1, a2 }) => divide(polynomial(b0, b1, b2), polynomial(1, a1, a2)))
    .reduce(times, { re: 1, im: 0 });
}

function bilinear({ frequency, q }: PrototypeSection, warped: number): Section {
  const k = warped * frequency;
  if (q === null) {
    const b0 = k / (1 + k);
    return { b0, b1: b0, b2: 0, a1: (k - 1) / (k + 1), a2: 0 };
  }
  const scale = 1 + k / q + k * k;
  const b0 = (k * k) / scale;
  return { b0, b1: 2 * b0, b2: b0, a1: (2 * (k * k - 1)) / scale, a2: (1 - k / q + k * k) / scale };
}
