import { describe, expect, it } from 'vitest';
import { uniformNumbers } from '../../src/core/advice/random.ts';
import { noiseFloor } from '../../src/core/spectrum/floor.ts';
import { chiSquareQuantile } from '../../src/core/spectrum/quantiles.ts';
import type { LevelSpectrum } from '../../src/core/spectrum/spectrum.ts';
import { WelchFold } from '../../src/core/spectrum/welch.ts';
import { HANN, hannLobe, hannOffset } from '../../src/core/spectrum/window.ts';
import { levelFrom, normalNumbers, samplesFor, samplesOf } from '../core/spectrum/noise.ts';
import reference from './welch.json' with { type: 'json' };
import scipy from './welch-scipy.json' with { type: 'json' };

/** Largest difference relative to the expected value, bin by bin. */
function worst(found: Float64Array, expected: readonly number[]): number {
  expect(found.length).toBe(expected.length);
  return Math.max(...expected.map((value, k) => Math.abs(found[k] / value - 1)));
}

describe(`scipy.signal.welch, full precision (${scipy.provenance}; scripts/welch_levels.py)`, () => {
  const { rateHz } = scipy.inputs;
  const uniform = uniformNumbers(20011);
  const samples = samplesOf(
    6000,
    (i) => uniform() - 0.5 + 0.8 * Math.sin((2 * Math.PI * 31.3 * i) / 250) + 1e-4 * i + 9.81,
  );

  it.each([256, 1024] as const)('segments of %d samples agree to 1e-9 in every bin', (segment) => {
    const { density } = levelFrom(samples, segment, rateHz);
    expect(worst(density, scipy.expected.whole[segment])).toBeLessThan(scipy.tolerance.rel);
  });

  it('two runs agree with the mean over the segments of both', () => {
    const fold = new WelchFold({ rateHz, segmentSamples: [256], expectedSamples: samples.length });
    fold.push(samples.subarray(0, 1700), true);
    fold.push(samples.subarray(1700), true);
    const [level] = fold.result();
    expect(level.segments).toBe(scipy.expected.runs256.segments);
    expect(worst(level.density, scipy.expected.runs256.density)).toBeLessThan(scipy.tolerance.rel);
  });
});

describe('scipy vectors of ten digits', () => {
  const head = reference['welch.lcg.input_head'];
  const uniform = uniformNumbers(1234567890);
  const samples = samplesOf(1000, (i) => uniform() - 0.5 + 0.8 * Math.sin((2 * Math.PI * 12.5 * i) / 100) + 0.3);

  it(`start from the Park–Miller sequence (${head.provenance})`, () => {
    head.expected.head.forEach((value, i) => {
      expect(samples[i]).toBeCloseTo(value, 11);
    });
  });

  it.each([
    [64, reference['welch.lcg.hann64_50']],
    [128, reference['welch.lcg.hann128_50']],
  ])('segments of %d samples', (segment, { expected, inputs, tolerance }) => {
    const level = levelFrom(samples, segment, 100);
    expect(level.segments).toBe(inputs.segments);
    expect(worst(level.density, expected.P)).toBeLessThan(tolerance.rel);
  });

  it(`two impulses (${reference['welch.vec.even'].source}, ${reference['welch.vec.even'].provenance})`, () => {
    const level = levelFrom(
      samplesOf(16, (i) => (i % 8 === 0 ? 1 : 0)),
      8,
      1,
    );
    reference['welch.vec.even'].expected.P.forEach((value, k) => {
      expect(level.density[k]).toBeCloseTo(value, 7);
    });
  });

  it(`a sine on a bin: density, and power within three bins (${reference['welch.sine_scaling'].source})`, () => {
    const { inputs, expected } = reference['welch.sine_scaling'];
    const { density } = levelFrom(
      samplesOf(4096, (i) => inputs.A * Math.sin((2 * Math.PI * inputs.f_Hz * i) / inputs.fs)),
      inputs.nperseg,
      inputs.fs,
    );
    expect(density[inputs.f_Hz]).toBeCloseTo(expected.density_peak, 6);
    const power = density.subarray(inputs.f_Hz - 3, inputs.f_Hz + 4).reduce((sum, value) => sum + value, 0);
    expect(power).toBeCloseTo(expected.integral_pm3, 6);
  });
});

describe('bookkeeping', () => {
  it('counts segments as scipy does', () => {
    const { inputs, expected } = reference['welch.bookkeeping'];
    const halfOverlapped = inputs.cases
      .map((row, i) => ({ row, count: expected.K[i] }))
      .filter(({ row }) => row[2] * 2 === row[1]);
    expect(halfOverlapped.length).toBe(4);
    for (const { row, count } of halfOverlapped)
      expect(levelFrom(new Float64Array(row[0]), row[1], 1)?.segments ?? 0).toBe(count);
  });

  const formula = reference['welch.neff.hann50_formula'];
  it.each(formula.inputs.K.map((count, i) => [count, formula.expected.nu[i]]).filter(([count]) => count <= 1000))(
    `%d segments have %d degrees of freedom (${formula.source}, ${formula.provenance})`,
    (count, dof) => {
      const level = levelFrom(new Float64Array(samplesFor(8, count)), 8, 1);
      expect(level.segments).toBe(count);
      expect(level.degreesOfFreedom / dof).toBeCloseTo(1, 10);
    },
  );

  it(`agrees with the table of averages (${reference['welch.neff'].source})`, () => {
    const [row] = reference['welch.neff'].expected;
    [2, 4, 8, 16, 64].forEach((count, i) => {
      const level = levelFrom(new Float64Array(samplesFor(8, count)), 8, 1);
      expect(level.degreesOfFreedom / 2 / Number(row[2 + i])).toBeCloseTo(1, 5);
    });
  });

  it('runs do not overlap each other: their averages add up', () => {
    const fold = new WelchFold({ rateHz: 1, segmentSamples: [8], expectedSamples: 64 });
    for (let run = 0; run < 5; run++) fold.push(new Float64Array(8), true);
    expect(fold.result()[0]).toMatchObject({ segments: 5, degreesOfFreedom: 10 });
  });
});

describe('scatter of the estimate on white noise (simulated, 1,500 spectra)', () => {
  const { inputs, expected, tolerance } = reference['welch.neff.mc'];
  const normal = normalNumbers(7);
  const levels: LevelSpectrum[] = Array.from({ length: inputs.trials }, () =>
    levelFrom(samplesOf(samplesFor(64, inputs.K), normal), 64, 2),
  );
  const at = (bin: number) => levels.map((level) => level.density[bin]);
  const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const variance = (values: readonly number[]) => mean(values.map((value) => (value - mean(values)) ** 2));

  it(`is that of ${expected.n_eff} averages for eight segments (Welch 1967)`, () => {
    const averages = mean(Array.from({ length: 24 }, (_, i) => mean(at(i + 4)) ** 2 / variance(at(i + 4))));
    expect(Math.abs(averages / expected.n_eff - 1)).toBeLessThan(tolerance.rel);
    expect(Math.abs(levels[0].degreesOfFreedom / 2 / expected.n_eff - 1)).toBeLessThan(1e-9);
  });

  it(`stands at 2s²/rate (${reference['welch.white_density'].source}), within χ² limits`, () => {
    // s = 1, rate 2 Hz: density 1. 1,500 spectra, 15 degrees of freedom each.
    const limit = Math.sqrt(2 / (1500 * levels[0].degreesOfFreedom));
    for (const bin of [4, 10, 20, 28]) expect(Math.abs(mean(at(bin)) - 1)).toBeLessThan(4 * limit);
  });

  it('is correlated between neighbouring bins as `neighbourInflation` says', () => {
    const bands = levels.map((level) => level.density.subarray(6, 26).reduce((sum, value) => sum + value, 0) / 20);
    // 20 bins: 1 + 2·(4/9·19/20 + 1/36·18/20), a little under the limit for many bins.
    const inflation = (variance(bands) / variance(at(15))) * 20;
    expect(Math.abs(inflation / (1 + 2 * ((4 / 9) * 0.95 + (1 / 36) * 0.9)) - 1)).toBeLessThan(0.12);
    expect(HANN.neighbourInflation).toBeCloseTo(1 + 2 * (4 / 9 + 1 / 36), 12);
  });
});

describe('lines and floors', () => {
  const median = reference['chi2.median_over_mean'];
  it.each(median.inputs.nu.map((dof, i) => [dof, median.expected.exact[i]]))(
    `the median of χ² with %d degrees of freedom is %d of its mean (${median.source}, ${median.provenance})`,
    (dof, ratio) => {
      expect(chiSquareQuantile(0.5, dof) / dof / ratio).toBeCloseTo(1, 9);
      const flat = { length: 40 };
      const floor = noiseFloor({
        frequencyHz: Float64Array.from(flat, (_, i) => i + 1),
        density: Float64Array.from(flat, () => ratio),
        degreesOfFreedom: Float64Array.from(flat, () => dof),
      });
      for (const value of floor) expect(value).toBeCloseTo(1, 8);
    },
  );

  const thresholds = reference['peak.threshold'];
  it(`thresholds of ${thresholds.expected.length} cases for the largest of M bins, as Bonferroni bounds them (${thresholds.source})`, () => {
    for (const [bins, dof, chance, threshold] of thresholds.expected) {
      const bonferroni = chiSquareQuantile(1 - chance / bins, dof) / dof;
      expect(bonferroni).toBeGreaterThanOrEqual(threshold * (1 - 1e-7));
      expect(bonferroni / threshold).toBeLessThan(1.005);
    }
  });

  const exact = reference['peak.hann_exact'];
  it.each(exact.inputs.delta.map((delta, i) => [delta, exact.expected.alpha[i]]))(
    `a sine %d bins off has a neighbour of %d times the amplitude (${exact.source})`,
    (delta, alpha) => {
      expect(Math.sqrt(hannLobe(1 - delta) / hannLobe(delta))).toBeCloseTo(alpha, 9);
      expect(hannOffset(hannLobe(1 + delta), hannLobe(delta), hannLobe(1 - delta))).toBeCloseTo(delta, 9);
    },
  );
});
