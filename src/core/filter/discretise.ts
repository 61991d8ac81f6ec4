import { hertz } from '../figure.ts';
import { UserError } from '../user-error.ts';
import { prototypeSections } from './families.ts';
import type { DiscreteFilter, Filter, PrototypeSection, Section } from './filter.ts';

/**
 * The filter at a sampling rate as second-order sections, the lowest Q first: bilinear transform, pre-warped so that the
 * gain at the corner stays −3.0103 dB (Oppenheim & Schafer, Discrete-Time Signal Processing, §7.2.2).
 * Throws UserError('usage') where the corner is not between 0 and half of the rate.
 */
export function discretise(filter: Filter, rateHz: number): DiscreteFilter {
  const { cornerHz } = filter;
  if (!(cornerHz > 0 && cornerHz < rateHz / 2))
    throw new UserError(
      'usage',
      `A corner of ${hertz(cornerHz, 3)} cannot be had at a rate of ${hertz(rateHz, 4)}; it must lie between 0 and ${hertz(rateHz / 2, 4)}.`,
    );
  const warped = Math.tan((Math.PI * cornerHz) / rateHz);
  const sections = prototypeSections(filter.family, filter.order).map((section) => bilinear(section, warped));
  return { rateHz, method: 'bilinear', sections };
}

/** Gain of the discrete filter at a frequency, dB, negative for loss: |H(e^{jω})| of the sections' product. */
export function discreteGainDb(filter: DiscreteFilter, frequencyHz: number): number {
  const omega = (2 * Math.PI * frequencyHz) / filter.rateHz;
  const power = (c0: number, c1: number, c2: number) => {
    const re = c0 + c1 * Math.cos(omega) + c2 * Math.cos(2 * omega);
    const im = c1 * Math.sin(omega) + c2 * Math.sin(2 * omega);
    return re * re + im * im;
  };
  const gain = filter.sections.reduce((all, { b0, b1, b2, a1, a2 }) => (all * power(b0, b1, b2)) / power(1, a1, a2), 1);
  return 10 * Math.log10(gain);
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
