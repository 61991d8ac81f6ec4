import { describe, expect, it } from 'vitest';
import { HANN, hann, hannLobe, hannSideLobes } from '../../src/core/spectrum/window.ts';
import { levelFrom, samplesOf } from '../core/spectrum/noise.ts';
import reference from './windows.json' with { type: 'json' };

const decibels = (power: number) => 10 * Math.log10(power);

/** Distance at which the lobe has fallen to a power, by bisection within the main lobe. */
function halfWidth(power: number): number {
  let [near, far] = [0, 2];
  while (far - near > 1e-12) {
    const middle = (near + far) / 2;
    if (hannLobe(middle) > power) near = middle;
    else far = middle;
  }
  return near;
}

/** Highest side lobe, by a fine walk over the first three. */
function highestSideLobe(): { at: number; power: number } {
  let best = { at: 0, power: 0 };
  for (let d = 2; d < 5; d += 1e-4) if (hannLobe(d) > best.power) best = { at: d, power: hannLobe(d) };
  return best;
}

describe.each([
  [64, reference['win.finite.N64']],
  [1024, reference['win.finite.N1024']],
])('periodic Hann window of %d samples', (samples, entry) => {
  const weights = hann(samples);
  const sum = weights.reduce((all, weight) => all + weight, 0);
  const squares = weights.reduce((all, weight) => all + weight * weight, 0);

  it(`has the sums of ${entry.source} (${entry.provenance})`, () => {
    const { hann: expected } = entry.expected;
    expect(sum).toBeCloseTo(expected.sum, 8);
    expect(squares).toBeCloseTo(expected.sum_sq, 8);
    expect((samples * squares) / sum ** 2).toBeCloseTo(expected.enbw_bins, 10);
    expect(weights[1] / expected.w1).toBeCloseTo(1, 10);
    expect(weights[samples / 2]).toBe(expected.w_mid);
  });

  it('has the constants that the estimates use', () => {
    expect(sum / samples).toBeCloseTo(HANN.coherentGain, 12);
    expect((samples * squares) / sum ** 2).toBeCloseTo(HANN.noiseBandwidthBins, 12);
    const half = samples / 2;
    const overlap = weights.subarray(0, half).reduce((all, weight, n) => all + weight * weights[n + half], 0) / squares;
    expect(overlap).toBeCloseTo(HANN.overlapCorrelation, 12);
  });
});

describe('Hann main and side lobes', () => {
  const exact = reference['win.hann'];
  const lobe = highestSideLobe();

  it(`agree with the closed-form kernel (${exact.provenance})`, () => {
    const { expected } = exact;
    expect(decibels(hannLobe(0.5))).toBeCloseTo(expected.scalloping_dB, 6);
    expect(2 * halfWidth(0.5)).toBeCloseTo(expected.width_halfpower_bins, 6);
    expect(2 * halfWidth(0.25)).toBeCloseTo(expected.width_6dB_bins, 2);
    expect(decibels(lobe.power)).toBeCloseTo(expected.highest_sidelobe_dB, 2);
    expect(lobe.at).toBeCloseTo(expected.highest_sidelobe_at_bins, 3);
    expect(HANN.overlapCorrelation).toBeCloseTo(expected.overlap_corr_50, 6);
  });

  it(`agree with Heinzel, Rüdiger & Schilling 2002, Appendix C (${reference['book.heinzel.hann'].provenance})`, () => {
    const { expected, tolerance } = reference['book.heinzel.hann'];
    expect(Math.abs(-decibels(lobe.power) - expected.sidelobe_dB)).toBeLessThan(tolerance.sidelobe_abs);
    expect(Math.abs(HANN.noiseBandwidthBins - expected.nenbw_bins)).toBeLessThan(tolerance.nenbw_abs);
    expect(Math.abs(2 * halfWidth(10 ** -0.3) - expected.width_3dB_bins)).toBeLessThan(tolerance.width_abs);
    expect(Math.abs(decibels(hannLobe(0.5)) - expected.flatness_dB)).toBeLessThan(tolerance.flatness_abs);
  });

  it(`agree with Harris 1978, Table I (${reference['book.harris.hann'].provenance})`, () => {
    const { expected, tolerance } = reference['book.harris.hann'];
    expect(Math.abs(decibels(lobe.power) - expected.sidelobe_dB)).toBeLessThan(tolerance.sidelobe_abs);
    expect(Math.abs(HANN.coherentGain - expected.coherent_gain)).toBeLessThan(tolerance.others_abs);
    expect(Math.abs(HANN.noiseBandwidthBins - expected.enbw_bins)).toBeLessThan(tolerance.others_abs);
    expect(Math.abs(2 * halfWidth(0.5) - expected.width_3dB)).toBeLessThan(tolerance.others_abs);
    expect(Math.abs(2 * halfWidth(0.25) - expected.width_6dB)).toBeLessThan(tolerance.others_abs);
    expect(Math.abs(-decibels(hannLobe(0.5)) - expected.scallop_dB)).toBeLessThan(tolerance.others_abs);
    expect(Math.abs(100 * HANN.overlapCorrelation - expected.corr50_pct)).toBeLessThan(tolerance.corr_pct_abs);
  });

  it('fall 18 dB an octave (Harris 1978, Table I), which bounds every side lobe', () => {
    expect(decibels(hannSideLobes(40) / hannSideLobes(80))).toBeCloseTo(60 * Math.log10(2), 1);
    for (let d = 2; d < 20; d += 0.01) expect(hannLobe(d)).toBeLessThanOrEqual(hannSideLobes(d) * (1 + 1e-9));
  });

  const readings = reference['win.sine_reading'];
  it.each(readings.expected.map(([, offset, reading]) => [Number(offset), Number(reading)]))(
    `show a unit sine %d bins off as %d (${readings.source}, ${readings.provenance})`,
    (offset, reading) => {
      expect(Math.sqrt(hannLobe(offset))).toBeCloseTo(reading, 4);
      const level = levelFrom(
        samplesOf(1024, (n) => Math.sin((2 * Math.PI * (100 + offset) * n) / 1024)),
        1024,
        1024,
      );
      const power = level.density[100] * HANN.noiseBandwidthBins;
      expect(Math.sqrt(2 * power)).toBeCloseTo(reading, 3);
    },
  );
});
