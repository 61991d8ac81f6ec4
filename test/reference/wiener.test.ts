import { describe, expect, it } from 'vitest';
import { leastErrorCorner } from '../../src/core/advice/corner.ts';
import { layEvidence } from '../../src/core/advice/evidence.ts';
import { expectedError } from '../../src/core/advice/expected-error.ts';
import { powersOf, spectrumOf } from '../core/advice/synthetic.ts';
import reference from './wiener.json' with { type: 'json' };

/** First-order Markov signal in white noise; one-sided densities in Hz, to 2 kHz so that little is cut off. */
function markov(lambda: number) {
  const noise = 2 / lambda;
  const options = { rateHz: 4000, binHz: 0.002, dof: 100 };
  const signal = (f: number) => (2 * 2) / ((2 * Math.PI * f) ** 2 + 1);
  const active = spectrumOf({ ...options, density: (f) => signal(f) + 2 * noise });
  const quiet = spectrumOf({ ...options, density: () => 2 * noise });
  return layEvidence(powersOf(active), powersOf(quiet), quiet, {
    rateHz: 1e6,
    noiseGainPower: 1,
    keep: { lowHz: 0, highHz: 2000 },
    signalHighHz: 2000,
    inUse: [],
  });
}

// The filter is taken to run at 1 MHz, where it answers as the analog one of the closed form.
describe('Wiener bound', () => {
  it.each(reference.nonCausalBound.rows)('of a Markov signal, Λ = %d, is %d (closed form)', (lambda, bound) => {
    // The bins leave out 0 to 1 mHz, and the noise bound beyond 2 kHz is below the tolerance.
    expect(markov(lambda).wienerPower / bound).toBeCloseTo(1, 2);
  });

  it('of a flat band in white noise is 2BSN/(S+N) (closed form)', () => {
    const options = { rateHz: 100, binHz: 0.001, dof: 100 };
    const active = spectrumOf({ ...options, density: (f) => (f < 10.0005 ? 2.2 : 0.2) });
    const quiet = spectrumOf({ ...options, density: () => 0.2 });
    const { wienerPower } = layEvidence(powersOf(active), powersOf(quiet), quiet, {
      rateHz: 100,
      noiseGainPower: 1,
      keep: { lowHz: 0, highHz: 10.0005 },
      signalHighHz: 11,
      inUse: [],
    });
    expect(wienerPower).toBeCloseTo(reference.flatBand.bound, 3);
  });
});

describe('expected error of a one-pole RC on a Markov signal, Λ = 100 (closed form, minimum 0.19 at ωc = 9)', () => {
  const evidence = markov(100);
  const sections = [{ frequency: 1, q: null }];
  /** The white noise beyond 2 kHz, which the closed form counts and the recording does not. */
  const noiseBeyond = (wc: number) =>
    (2 * 0.02 * wc * (Math.PI / 2 - Math.atan((2000 * 2 * Math.PI) / wc))) / (2 * Math.PI);

  it.each(reference.rcErrorCurve.wc.map((wc, i) => [wc, reference.rcErrorCurve.error[i]]))(
    'ωc = %d: %d',
    (wc, error) => {
      const found = expectedError(evidence, sections, wc / (2 * Math.PI), 0).errorPower;
      expect((found + noiseBeyond(wc)) / error).toBeCloseTo(1, 2);
    },
  );

  it('is least at ωc = 9', () => {
    const at = (corner: number) => expectedError(evidence, sections, corner, 0).errorPower;
    const corner = leastErrorCorner({ lowHz: 0.1, highHz: 100 }, at);
    expect(corner * 2 * Math.PI).toBeGreaterThan(8.7);
    expect(corner * 2 * Math.PI).toBeLessThan(9.3);
  });
});
