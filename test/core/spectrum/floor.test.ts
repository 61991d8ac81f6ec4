import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { estimateFloor, noiseFloor } from '../../../src/core/spectrum/floor.ts';
import { segmentLengths } from '../../../src/core/spectrum/levels.ts';
import { mergeLevels } from '../../../src/core/spectrum/merge.ts';
import { levelFrom, levelsFrom, normalNumbers, samplesFor, samplesOf } from './noise.ts';

const decibels = (ratio: number) => 10 * Math.log10(ratio);

/** Points on equal bins with one number of degrees of freedom. */
function points(count: number, density: (bin: number) => number, dof = 1e6) {
  const frequencyHz = samplesOf(count, (i) => i + 1);
  return { frequencyHz, density: frequencyHz.map(density), degreesOfFreedom: frequencyHz.map(() => dof) };
}

describe('noiseFloor', () => {
  it('is the density itself where that is a power of frequency, to the very ends (any slope)', () => {
    fc.assert(
      fc.property(fc.double({ min: -4, max: 4, noNaN: true }), fc.integer({ min: 2, max: 700 }), (slope, count) => {
        const spectrum = points(count, (bin) => 7 * bin ** slope);
        noiseFloor(spectrum).forEach((value, i) => {
          expect(Math.abs(decibels(value / spectrum.density[i]))).toBeLessThan(0.05);
        });
      }),
      { numRuns: 60 },
    );
  });

  it('scales with the density (any factor)', () => {
    const level = levelFrom(samplesOf(4000, normalNumbers(1)), 256, 256);
    const spectrum = points(128, (bin) => level.density[bin], level.degreesOfFreedom);
    const plain = noiseFloor(spectrum);
    fc.assert(
      fc.property(fc.double({ min: 1e-12, max: 1e12, noNaN: true }), (factor) => {
        noiseFloor({ ...spectrum, density: spectrum.density.map((value) => value * factor) }).forEach((value, i) => {
          expect(value / (factor * plain[i])).toBeCloseTo(1, 9);
        });
      }),
      { numRuns: 30 },
    );
  });

  it('passes under lines of any strength', () => {
    const lines = [20, 21, 22, 60, 61, 62, 100, 101, 102, 180, 181, 182];
    const spectrum = points(256, (bin) => (lines.includes(bin) ? 1e6 : 3));
    for (const value of noiseFloor(spectrum)) expect(value).toBeCloseTo(3, 4);
  });

  it('follows a step within a quarter of an octave', () => {
    const floor = noiseFloor(points(400, (bin) => (bin < 100 ? 1 : 100)));
    expect(floor[70]).toBeCloseTo(1, 1);
    expect(floor[130]).toBeCloseTo(100, -1);
  });

  it('is without bias on noise of few averages, where the median lies far below the mean', () => {
    for (const segments of [2, 6, 30]) {
      const normal = normalNumbers(segments);
      const sum = new Float64Array(128);
      const trials = 200;
      for (let trial = 0; trial < trials; trial++) {
        const level = levelFrom(samplesOf(samplesFor(256, segments), normal), 256, 2);
        const spectrum = points(126, (bin) => level.density[bin + 1], level.degreesOfFreedom);
        noiseFloor(spectrum).forEach((value, i) => {
          sum[i] += value / trials;
        });
      }
      // White noise of variance 1 at 2 Hz stands at 1.
      for (const bin of [8, 30, 60, 110]) expect(Math.abs(decibels(sum[bin]))).toBeLessThan(0.35);
    }
  });

  it('corrects each level of a merged spectrum by its own degrees of freedom', () => {
    const sum = { low: 0, high: 0 };
    const normal = normalNumbers(5);
    for (let trial = 0; trial < 30; trial++) {
      const spectrum = mergeLevels(levelsFrom(samplesOf(12_000, normal), segmentLengths(12_000), 2));
      const floor = noiseFloor(spectrum);
      const mean = (from: number, to: number) => {
        const inside = floor.filter((_, i) => spectrum.frequencyHz[i] >= from && spectrum.frequencyHz[i] < to);
        return inside.reduce((all, value) => all + value, 0) / inside.length;
      };
      sum.low += mean(0.002, 0.02) / 30;
      sum.high += mean(0.2, 0.9) / 30;
    }
    expect(Math.abs(decibels(sum.low))).toBeLessThan(0.3);
    expect(Math.abs(decibels(sum.high))).toBeLessThan(0.1);
  });

  it('survives a spectrum of nothing', () => {
    for (const value of noiseFloor(points(40, () => 0))) expect(value).toBeLessThan(1e-300);
    expect(() => noiseFloor(points(0, () => 1))).toThrow(RangeError);
  });
});

describe('estimateFloor', () => {
  it('knows its scatter within a factor, at the ends and between', () => {
    const normal = normalNumbers(9);
    const trials = 300;
    const found = Array.from({ length: trials }, () => {
      const level = levelFrom(samplesOf(samplesFor(256, 16), normal), 256, 2);
      return estimateFloor(points(124, (bin) => level.density[bin + 2], level.degreesOfFreedom));
    });
    for (const bin of [0, 20, 60, 123]) {
      const values = found.map((floor) => floor.density[bin]);
      const mean = values.reduce((sum, value) => sum + value, 0) / trials;
      const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / trials;
      const dof = (2 * mean ** 2) / variance;
      const ratio = dof / found[0].degreesOfFreedom[bin];
      expect(ratio).toBeGreaterThan(0.5);
      expect(ratio).toBeLessThan(3);
    }
  });
});
