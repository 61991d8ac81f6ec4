import { describe, expect, it } from 'vitest';
import { jitterNoiseRms } from '../../src/core/health/jitter.ts';
import { effectiveBits, QuantisationFold, roundingRms } from '../../src/core/health/quantisation.ts';
import { MAD } from '../../src/core/health/spikes.ts';
import { seededRandom } from '../campaign/seeded-random.ts';
import entries from './recording-health.json' with { type: 'json' };

// biome-ignore lint/suspicious/noExplicitAny: the entries differ in shape; each test knows its own.
const entry = (id: string): any => entries.find((each) => each.id === id);
const ratioDb = (jitter: number, hz: number) => -20 * Math.log10(jitterNoiseRms(jitter, hz, 1));

describe('jitter noise', () => {
  it('is 20·log10(2πfσ) below the signal (small-jitter formula, scipy 1.10)', () => {
    const { inputs, expected } = entry('jitter.snr');
    expect(inputs.f_sigma).toHaveLength(10);
    inputs.f_sigma.forEach(([hz, sigma]: number[], i: number) => {
      expect(ratioDb(sigma, hz)).toBeCloseTo(expected.SNR_dB[i], 9);
    });
  });

  it('for 100 fs is 84, 64, 50 and 44 dB at 0.1, 1, 5 and 10 GHz (published table, see the entry)', () => {
    const { inputs, expected, tolerance } = entry('book.jitter.100fs');
    inputs.f_Hz.forEach((hz: number, i: number) => {
      expect(Math.abs(ratioDb(inputs.sigma_s, hz) - expected.SNR_dB[i])).toBeLessThan(tolerance.SNR_abs);
    });
  });

  it('of a clock rounded to q is that of q/√12 (uniform rounding error, scipy 1.10)', () => {
    const { inputs, expected } = entry('jitter.quantised_clock');
    inputs.q_s.forEach((q: number, i: number) => {
      expect(ratioDb(roundingRms(q), inputs.f_Hz)).toBeCloseTo(expected.SNR_dB[i], 9);
    });
  });

  it('is what a sine shows that is sampled at jittering instants (simulation, scipy 1.10: 30.08 dB)', () => {
    const { inputs, expected, tolerance } = entry('jitter.sim');
    const random = seededRandom(8);
    let error = 0;
    for (let i = 0; i < inputs.n; i++) {
      const t = i / inputs.fs + 0.0123 * Math.floor(i / 20);
      error +=
        (Math.sin(2 * Math.PI * inputs.f * (t + inputs.sigma * random.normal())) -
          Math.sin(2 * Math.PI * inputs.f * t)) **
        2;
    }
    const simulatedDb = -10 * Math.log10(error / inputs.n / 0.5);
    expect(Math.abs(simulatedDb - expected.SNR_dB)).toBeLessThan(tolerance.SNR_abs);
    expect(Math.abs(simulatedDb - ratioDb(inputs.sigma, inputs.f))).toBeLessThan(tolerance.SNR_abs);
  });
});

describe('rounding', () => {
  it('makes q/√12 (table of steps and noise of converters)', () => {
    const { expected } = entry('adc.lsb');
    expect(expected.length).toBeGreaterThan(8);
    for (const [, , step, rms] of expected) expect(roundingRms(step) / rms).toBeCloseTo(1, 9);
  });

  it('of a full-scale sine to N bits leaves 6.02 N + 1.76 dB (data sheet MAX1080/1081) and N effective bits', () => {
    const table = entry('adc.snr').expected.filter(([bits]: number[]) => bits <= 16);
    expect(table).toHaveLength(5);
    for (const [bits, ruleDb, exactDb] of table) {
      const levels = 2 ** bits;
      const wave = Float64Array.from({ length: 50_000 }, (_, i) => (levels / 2 - 0.5) * Math.sin(i * 0.7548776662));
      const fold = new QuantisationFold();
      fold.push(
        wave.map((x) => Math.round(x)),
        true,
      );
      const step = fold.result();
      expect(step).toBe(1);
      const error = wave.reduce((sum, x) => sum + (x - Math.round(x)) ** 2, 0) / wave.length;
      const measuredDb = 10 * Math.log10((levels / 2) ** 2 / 2 / error);
      const computedDb = 20 * Math.log10(levels / 2 / Math.SQRT2 / roundingRms(step as number));
      expect(Math.abs(measuredDb - exactDb)).toBeLessThan(0.2);
      expect(computedDb).toBeCloseTo(exactDb, 9);
      expect(Math.abs(computedDb - ruleDb)).toBeLessThan(0.04);
      expect(Math.abs(effectiveBits(levels - 1, Math.sqrt(error)) - bits)).toBeLessThan(0.04);
    }
  });

  it('effective bits are (SINAD − 1.76 dB)/6.02 of the largest sine in the range (IEEE 1241)', () => {
    const { inputs, expected } = entry('adc.enob');
    inputs.SINAD_dB.forEach((sinadDb: number, i: number) => {
      const noise = 1 / (2 * Math.SQRT2) / 10 ** (sinadDb / 20);
      expect(effectiveBits(1, noise)).toBeCloseTo(expected.bits[i], 2);
    });
  });
});

describe('median absolute deviation', () => {
  it('of normal numbers times 1.4826 is their standard deviation (Hampel 1974; normal tables: Φ⁻¹(3/4) = 0.67449)', () => {
    const { expected, tolerance } = entry('mad.normal');
    expect(Math.abs(MAD - expected.factor)).toBeLessThan(tolerance.abs);
    const random = seededRandom(5);
    const sorted = Float64Array.from({ length: 200_001 }, () => Math.abs(3 * random.normal())).sort();
    expect((MAD * sorted[100_000]) / 3).toBeCloseTo(1, 2);
  });
});
