import { MAINS_HZ, mainsName } from './mains.ts';
import type { NoiseLine } from './spectrum.ts';

/** Multiples of the rate around which frequencies are listed: a sensor's own low-pass seldom lets more through. */
const HIGHEST_MULTIPLE = 4;
/** Highest harmonic of a network that is strong enough to matter: rectifiers and motors reach the 13th, 16.7 Hz seldom the 5th. */
const highestMains = (nominalHz: number) => (nominalHz < 20 ? 5 : 13);
/** A network's momentary frequency is mostly within 0.05 Hz of 50 Hz (common practice); as a part of the frequency. */
const MAINS_WANDER = 0.001;

/**
 * Frequencies above Nyquist, Hz, that a sampling at `rateHz` would fold onto a line at `frequencyHz`: m·rate ± f, m = 1 … 4
 * (Shannon 1949), rising. A harmonic of a supply network within `toleranceHz` of one, plus a thousandth, is named.
 */
export function foldedFrom(frequencyHz: number, rateHz: number, toleranceHz: number): NoiseLine['foldedFrom'] {
  const folded: number[] = [];
  for (let m = 1; m <= HIGHEST_MULTIPLE; m++) folded.push(m * rateHz - frequencyHz, m * rateHz + frequencyHz);
  return folded.map((aboveHz) => ({ frequencyHz: aboveHz, mains: mainsAt(aboveHz, toleranceHz) }));
}

function mainsAt(frequencyHz: number, toleranceHz: number): string | null {
  for (const nominalHz of MAINS_HZ) {
    const harmonic = Math.round(frequencyHz / nominalHz);
    const expectedHz = harmonic * nominalHz;
    if (harmonic < 1 || harmonic > highestMains(nominalHz)) continue;
    if (Math.abs(frequencyHz - expectedHz) <= toleranceHz + MAINS_WANDER * expectedHz)
      return mainsName(nominalHz, harmonic);
  }
  return null;
}
