import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { LevelSpectrum } from '../../../src/core/spectrum/spectrum.ts';
import { WelchFold } from '../../../src/core/spectrum/welch.ts';
import { levelFrom, levelsFrom, normalNumbers, samplesFor, samplesOf } from './noise.ts';

const RATE = 100;
const SEGMENTS = [256, 64, 16];

const power = ({ density, segmentSamples, rateHz }: LevelSpectrum) =>
  density.reduce((sum, value) => sum + value, 0) * (rateHz / segmentSamples);

const variance = (samples: Float64Array) => {
  const mean = samples.reduce((sum, value) => sum + value, 0) / samples.length;
  return samples.reduce((sum, value) => sum + (value - mean) ** 2, 0) / samples.length;
};

/** Pushes runs in blocks whose lengths repeat. */
function inBlocks(runs: readonly Float64Array[], blocks: readonly number[]): LevelSpectrum[] {
  const expectedSamples = runs.reduce((sum, run) => sum + run.length, 0);
  const fold = new WelchFold({ rateHz: RATE, segmentSamples: SEGMENTS, expectedSamples });
  for (const run of runs) {
    let next = 0;
    for (let from = 0; from < run.length; ) {
      const to = Math.min(run.length, from + blocks[next++ % blocks.length]);
      fold.push(run.subarray(from, to), from === 0);
      from = to;
    }
  }
  return fold.result();
}

describe('WelchFold', () => {
  const noise = samplesOf(1500, normalNumbers(1));

  it('gives the same bits whatever the blocks (any cuts, any runs)', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 400 }), { minLength: 1, maxLength: 6 }),
        fc.array(fc.integer({ min: 1, max: 1499 }), { maxLength: 3 }),
        (blocks, cuts) => {
          const edges = [0, ...new Set(cuts), 1500].sort((a, b) => a - b);
          const runs = edges.slice(1).map((edge, i) => noise.subarray(edges[i], edge));
          expect(inBlocks(runs, blocks)).toEqual(inBlocks(runs, [1500]));
        },
      ),
      { numRuns: 60 },
    );
  });

  it('takes rows one by one', () => {
    expect(inBlocks([noise], [1])).toEqual(inBlocks([noise], [65_536]));
  });

  it('scales with the square of the samples (any factor)', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e6, noNaN: true }), (factor) => {
        const [plain, scaled] = [noise, noise.map((value) => value * factor)].map((x) => levelFrom(x, 64, RATE));
        plain.density.forEach((value, k) => {
          expect(scaled.density[k] / (value * factor ** 2)).toBeCloseTo(1, 9);
        });
      }),
      { numRuns: 30 },
    );
  });

  it('does not see a constant (any constant)', () => {
    const plain = levelFrom(noise, 64, RATE);
    fc.assert(
      fc.property(fc.double({ min: -1e4, max: 1e4, noNaN: true }), (constant) => {
        const moved = levelFrom(
          noise.map((value) => value + constant),
          64,
          RATE,
        );
        plain.density.forEach((value, k) => {
          // The mean is known to 1e-16 of the constant; only bins 0 and 1 hold what is left of it.
          expect(Math.abs(moved.density[k] - value)).toBeLessThan(1e-9 * plain.density[20]);
        });
      }),
      { numRuns: 30 },
    );
  });

  it('holds exactly the variance of a sine that fits its segments', () => {
    for (const bin of [2, 7, 20, 30]) {
      const sine = samplesOf(samplesFor(64, 9), (i) => 3 * Math.sin((2 * Math.PI * bin * i) / 64 + 1));
      expect(power(levelFrom(sine, 64, RATE))).toBeCloseTo(4.5, 10);
    }
  });

  it('holds the variance of white noise, within χ² limits', () => {
    const samples = samplesOf(65_536, normalNumbers(2));
    for (const level of levelsFrom(samples, [1024, 256, 64], RATE)) {
      // The mean of each segment takes one in `segmentSamples`; 4σ of a variance of that many samples.
      const expected = variance(samples) * (1 - 1 / level.segmentSamples);
      expect(Math.abs(power(level) / expected - 1)).toBeLessThan(4 * Math.sqrt(2 / 65_536));
    }
  });

  it('leaves out a run shorter than a segment, and levels without one', () => {
    const fold = new WelchFold({ rateHz: RATE, segmentSamples: [256, 16], expectedSamples: 500 });
    fold.push(noise.subarray(0, 255), true);
    fold.push(noise.subarray(255, 500), true);
    expect(fold.result().map((level) => level.segmentSamples)).toEqual([16]);
  });

  it('does not read across a gap', () => {
    const jump = [new Float64Array(100).fill(-50), new Float64Array(100).fill(50)];
    const [level] = inBlocks(jump, [1000]).filter(({ segmentSamples }) => segmentSamples === 64);
    expect(Math.max(...level.density)).toBe(0);
  });

  it('refuses lengths that are no powers of two', () => {
    const make = (samples: number) => () => new WelchFold({ rateHz: 1, segmentSamples: [samples], expectedSamples: 9 });
    expect(make(48)).toThrow(RangeError);
    expect(make(2)).toThrow(RangeError);
  });

  it('gives the same twice', () => {
    const fold = new WelchFold({ rateHz: RATE, segmentSamples: [64], expectedSamples: 1500 });
    fold.push(noise, true);
    expect(fold.result()).toEqual(fold.result());
  });
});

describe('groups for resampling', () => {
  const groupsOf = (segments: number, groups?: number) => {
    const samples = samplesOf(samplesFor(16, segments), normalNumbers(3));
    const options = { rateHz: 1, segmentSamples: [16], expectedSamples: samples.length };
    const fold = new WelchFold(groups === undefined ? options : { ...options, groups });
    fold.push(samples, true);
    return fold.result()[0];
  };

  it.each([1, 3, 8, 9, 61, 200])(
    'of %d segments are up to eight of nearly equal size, and average to the density',
    (segments) => {
      const { groups, density } = groupsOf(segments);
      const sizes = groups.map((group) => group.segments);
      expect(sizes.length).toBe(Math.min(8, segments));
      expect(Math.max(...sizes) - Math.min(...sizes)).toBeLessThanOrEqual(1);
      density.forEach((value, k) => {
        const sum = groups.reduce((all, group) => all + group.segments * group.density[k], 0);
        expect(sum / segments / value).toBeCloseTo(1, 12);
      });
    },
  );

  it('are as many as asked for', () => {
    expect(groupsOf(61, 1).groups.length).toBe(1);
    expect(groupsOf(61, 20).groups.length).toBe(20);
  });

  it('hold consecutive segments', () => {
    const samples = samplesOf(1600, (i) => (i < 800 ? 0 : Math.sin(i)));
    const { groups } = levelFrom(samples, 16, 1);
    expect(Math.max(...groups[0].density)).toBe(0);
    expect(Math.max(...groups[7].density)).toBeGreaterThan(0.1);
  });
});
