import { prototypeSections } from './families.ts';
import type { Filter, PrototypeSection } from './filter.ts';

/**
 * Magnitude and continuous phase (radians, 0 at 0 Hz, falling) of a low-pass prototype at `ratio` = frequency/corner:
 * product of 1/(1 + s/ω₀) and 1/(1 + s/(Q·ω₀) + s²/ω₀²) at s = j·ratio.
 */
export function respond(
  sections: readonly PrototypeSection[],
  ratio: number,
): readonly [magnitude: number, phase: number] {
  let power = 1;
  let phase = 0;
  for (const { frequency, q } of sections) {
    const x = ratio / frequency;
    if (q === null) {
      power /= 1 + x * x;
      phase -= Math.atan(x);
    } else {
      const real = 1 - x * x;
      const imaginary = x / q;
      power /= real * real + imaginary * imaginary;
      phase -= Math.atan2(imaginary, real);
    }
  }
  return [Math.sqrt(power), phase];
}

/** Gain at a frequency, linear. */
export function gain(filter: Filter, frequencyHz: number): number {
  return respond(prototypeSections(filter.family, filter.order), frequencyHz / filter.cornerHz)[0];
}

/** Gain at a frequency, dB, negative for loss. */
export function gainDb(filter: Filter, frequencyHz: number): number {
  return 20 * Math.log10(gain(filter, frequencyHz));
}

/** Phase at a frequency, radians, continuous from 0 at 0 Hz. */
export function phaseRadians(filter: Filter, frequencyHz: number): number {
  return respond(prototypeSections(filter.family, filter.order), frequencyHz / filter.cornerHz)[1];
}

/** Group delay −dφ/dω at a frequency, seconds: the sum over the sections in closed form. */
export function groupDelaySeconds(filter: Filter, frequencyHz: number): number {
  const delay = prototypeSections(filter.family, filter.order).reduce((sum, { frequency, q }) => {
    const x = frequencyHz / filter.cornerHz / frequency;
    if (q === null) return sum + 1 / (frequency * (1 + x * x));
    return sum + (1 + x * x) / (q * frequency * ((1 - x * x) ** 2 + (x / q) ** 2));
  }, 0);
  return delay / (2 * Math.PI * filter.cornerHz);
}

/**
 * The corner in Hz at which a family and order attenuate `frequencyHz` by exactly `attenuationDb` (positive).
 * Bisection in the logarithm, the gain of every family here being monotone.
 */
export function cornerForGain(filter: Omit<Filter, 'cornerHz'>, frequencyHz: number, attenuationDb: number): number {
  const sections = prototypeSections(filter.family, filter.order);
  const wanted = 10 ** (-attenuationDb / 20);
  let low = -20;
  let high = 20;
  for (let round = 0; round < 70; round++) {
    const middle = (low + high) / 2;
    if (respond(sections, Math.exp(middle))[0] > wanted) low = middle;
    else high = middle;
  }
  return frequencyHz / Math.exp((low + high) / 2);
}
