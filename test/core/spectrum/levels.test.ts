import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lineLevel, lineSegmentSamples, segmentLengths } from '../../../src/core/spectrum/levels.ts';
import type { LevelSpectrum } from '../../../src/core/spectrum/spectrum.ts';

describe('segmentLengths', () => {
  it.each([
    [64, [32]],
    [160, [64]],
    [1083, [256]],
    [24_000, [8192, 4096, 1024, 256]],
    [2_000_000, [524_288, 262_144, 65_536, 16_384, 4096, 1024, 256]],
    [100_000_000, [524_288, 262_144, 65_536, 16_384, 4096, 1024, 256]],
    [20, [16]],
  ])('of a run of %d samples', (samples, lengths) => {
    expect(segmentLengths(samples)).toEqual(lengths);
  });

  it('are the longest that gives four segments, and the ladder 256·4ᵏ below it (any length)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 80, max: 50_000_000 }), (samples) => {
        const [longest, ...ladder] = segmentLengths(samples);
        expect(Number.isInteger(Math.log2(longest))).toBe(true);
        expect(Math.floor(samples / (longest / 2)) - 1).toBeGreaterThanOrEqual(4);
        if (longest < 2 ** 19) expect(Math.floor(samples / longest) - 1).toBeLessThan(4);
        ladder.reverse().forEach((length, k) => {
          expect(length).toBe(256 * 4 ** k);
        });
        expect(256 * 4 ** ladder.length).toBeGreaterThanOrEqual(longest);
      }),
    );
  });

  it('always fit into the run (from 8 samples on)', () => {
    for (let samples = 8; samples < 300; samples++) expect(segmentLengths(samples)[0]).toBeLessThanOrEqual(samples);
  });
});

describe('lineSegmentSamples', () => {
  it('is the longest with 16 segments, between 256 and 2¹⁷ samples (any length)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 8, max: 50_000_000 }), (samples) => {
        const length = lineSegmentSamples(samples);
        const segments = (of: number) => Math.floor(samples / (of / 2)) - 1;
        if (length > 256) expect(segments(length)).toBeGreaterThanOrEqual(16);
        else expect(length).toBe(256);
        if (length < 2 ** 17) expect(segments(2 * length)).toBeLessThan(16);
        else expect(length).toBe(2 ** 17);
      }),
    );
  });
});

describe('lineLevel', () => {
  const level = (segmentSamples: number, segments: number) => ({ segmentSamples, segments }) as LevelSpectrum;

  it('is the longest with 16 segments', () => {
    expect(lineLevel([level(512, 300), level(8192, 16), level(32_768, 5)]).segmentSamples).toBe(8192);
  });

  it('is the finer one where those with 16 segments are too coarse', () => {
    expect(lineLevel([level(256, 7), level(64, 33)]).segmentSamples).toBe(256);
  });

  it('stays with the steady one where the finer has too few segments', () => {
    expect(lineLevel([level(256, 3), level(64, 20)]).segmentSamples).toBe(64);
  });

  it('is the longest where there is nothing better', () => {
    expect(lineLevel([level(32, 3)]).segmentSamples).toBe(32);
    expect(() => lineLevel([])).toThrow(RangeError);
  });
});
