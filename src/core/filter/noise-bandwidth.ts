import { divide, plus, times } from './complex.ts';
import type { Filter } from './filter.ts';
import { stepTerms } from './partial-fractions.ts';

/**
 * Equivalent noise bandwidth ∫|H|² df over all positive frequencies, Hz: the width of an ideal low-pass that lets as much
 * white noise through. Exact: by Parseval's theorem half of ∫h² dt, h being the impulse response in partial fractions.
 * One pole gives π/2 corners.
 */
export function noiseBandwidthHz({ family, order, cornerHz }: Filter): number {
  const terms = stepTerms(family, order).map(({ pole, residue }) => ({ pole, residue: times(pole, residue) }));
  let energy = 0;
  for (const a of terms)
    for (const b of terms) {
      const mirror = { pole: { re: b.pole.re, im: -b.pole.im }, residue: { re: b.residue.re, im: -b.residue.im } };
      // ∫ Re(r·e^{pt})·Re(s·e^{qt}) dt = −Re(r·s/(p + q) + r·s*/(p + q*))/2.
      for (const { pole, residue } of [b, mirror])
        energy -= divide(times(a.residue, residue), plus(a.pole, pole)).re / 2;
    }
  return Math.PI * cornerHz * energy;
}
