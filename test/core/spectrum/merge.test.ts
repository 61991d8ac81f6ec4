import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { segmentLengths } from '../../../src/core/spectrum/levels.ts';
import { mergeLevels } from '../../../src/core/spectrum/merge.ts';
import type { Spectrum } from '../../../src/core/spectrum/spectrum.ts';
import { levelsFrom, normalNumbers, samplesOf } from './noise.ts';

const RATE = 200;
const power = ({ density, widthHz }: Spectrum) => density.reduce((sum, value, i) => sum + value * widthHz[i], 0);
const merged = (samples: Float64Array) => mergeLevels(levelsFrom(samples, segmentLengths(samples.length), RATE));

describe('mergeLevels', () => {
  it('covers 0 Hz to Nyquist without hole or overlap, frequencies rising (any length)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 64, max: 60_000 }), (samples) => {
        const spectrum = merged(new Float64Array(samples));
        const { frequencyHz, widthHz } = spectrum;
        expect(widthHz.reduce((sum, width) => sum + width, 0)).toBeCloseTo(RATE / 2, 9);
        expect(frequencyHz[0]).toBe(RATE / segmentLengths(samples)[0]);
        expect(frequencyHz.at(-1)).toBe(RATE / 2);
        let edge = 0;
        frequencyHz.forEach((frequency, i) => {
          if (i > 0) expect(frequency).toBeGreaterThan(frequencyHz[i - 1]);
          // Each point lies within the stretch it stands for.
          expect(frequency).toBeGreaterThan(edge);
          edge += widthHz[i];
          expect(frequency).toBeLessThanOrEqual(edge * (1 + 1e-12));
        });
      }),
      { numRuns: 40 },
    );
  });

  it('reads every frequency from the shortest segment that resolves it in 32 bins', () => {
    const levels = levelsFrom(samplesOf(24_000, normalNumbers(1)), [8192, 2048, 512, 128], RATE);
    const { frequencyHz, density, degreesOfFreedom } = mergeLevels(levels);
    for (const [segment, from, to] of [
      [8192, 1, 126],
      [2048, 32, 126],
      [512, 32, 126],
      [128, 32, 64],
    ]) {
      const level = levels.find(({ segmentSamples }) => segmentSamples === segment);
      for (let bin = from; bin < to; bin++) {
        const at = frequencyHz.indexOf((bin * RATE) / segment);
        expect(density[at]).toBe(level?.density[bin]);
        expect(degreesOfFreedom[at]).toBe(level?.degreesOfFreedom);
      }
    }
  });

  it('holds the variance of white noise, and one density throughout', () => {
    const samples = samplesOf(100_000, normalNumbers(2));
    const spectrum = merged(samples);
    expect(power(spectrum)).toBeGreaterThan(0.98);
    expect(power(spectrum)).toBeLessThan(1.02);
    // 2s²/rate = 0.01, Nyquist included; 5σ of each point.
    spectrum.density.forEach((value, i) => {
      expect(Math.abs(value / 0.01 - 1)).toBeLessThan(5 * Math.sqrt(2 / spectrum.degreesOfFreedom[i]));
    });
  });

  it.each([0.4, 3.7, 12, 33.3, 71, 95])('holds the power of a sine at %d Hz within 1 %', (frequency) => {
    const spectrum = merged(samplesOf(24_000, (i) => Math.sin((2 * Math.PI * frequency * i) / RATE)));
    expect(power(spectrum)).toBeGreaterThan(0.495);
    expect(power(spectrum)).toBeLessThan(0.505);
  });

  it('needs a level', () => {
    expect(() => mergeLevels([])).toThrow(RangeError);
  });
});

describe('mergeLevels with weights', () => {
  const levels = levelsFrom(samplesOf(4000, normalNumbers(3)), segmentLengths(4000), RATE);
  const plain = mergeLevels(levels);

  it('changes nothing where all weigh alike (any weight, any number of weights)', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 100, noNaN: true }), fc.integer({ min: 1, max: 12 }), (weight, count) => {
        mergeLevels(levels, new Array<number>(count).fill(weight)).density.forEach((value, i) => {
          expect(value / plain.density[i]).toBeCloseTo(1, 10);
        });
      }),
      { numRuns: 20 },
    );
  });

  it('reads only the groups that have weight', () => {
    const only = mergeLevels(levels, [0, 0, 0, 0, 0, 1, 0, 0]);
    const last = levels.find(({ segmentSamples }) => segmentSamples === 256);
    expect(last?.groups.length).toBe(8);
    expect(only.density.at(-2)).toBeCloseTo(last?.groups[5].density[127] ?? Number.NaN, 15);
  });

  it('gives groups that lie at the same time the same weight, however many a level has', () => {
    const loud = samplesOf(4000, (i) => Math.sin(i * 2.7) * (i < 2000 ? 1 : 100));
    const both = levelsFrom(loud, segmentLengths(4000), RATE);
    expect(both.map((level) => level.groups.length)).toEqual([6, 8]);
    const first = power(mergeLevels(both, [1, 1, 1, 0, 0, 0, 0, 0]));
    expect(first).toBeLessThan(0.6);
    expect(power(mergeLevels(both, [0, 0, 0, 0, 0, 1, 1, 1]))).toBeGreaterThan(4000);
  });

  it('refuses weights that sum to nothing', () => {
    expect(() => mergeLevels(levels, [0, 0])).toThrow(RangeError);
  });
});
