import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { uniformNumbers } from '../../../src/core/advice/random.ts';
import { nameFamilies } from '../../../src/core/spectrum/harmonics.ts';

/** Names of lines at these frequencies, known to so many Hz. */
const names = (frequencies: readonly number[], toleranceHz = 0.02) =>
  nameFamilies(frequencies.map((frequencyHz) => ({ frequencyHz, toleranceHz })));

describe('nameFamilies', () => {
  it('groups a fundamental and its harmonics', () => {
    expect(names([24.31, 48.61, 72.94])).toEqual(['24.3 Hz × 1', '24.3 Hz × 2', '24.3 Hz × 3']);
    expect(names([13.1, 39.29])).toEqual(['13.1 Hz × 1', '13.1 Hz × 3']);
  });

  it('leaves lines alone that have no family', () => {
    expect(names([24.3, 55.1, 91.7])).toEqual([null, null, null]);
    expect(names([24.3])).toEqual([null]);
    expect(names([])).toEqual([]);
  });

  it('needs the fundamental itself', () => {
    expect(names([48.6, 72.9])).toEqual([null, null]);
  });

  it('tells two families apart, and gives a line to one of them only', () => {
    expect(names([7.01, 11.23, 14.02, 22.46, 28.04, 33.69])).toEqual([
      '7.01 Hz × 1',
      '11.2 Hz × 1',
      '7.01 Hz × 2',
      '11.2 Hz × 2',
      '7.01 Hz × 4',
      '11.2 Hz × 3',
    ]);
  });

  it.each([
    [[50.03], ['mains 50 Hz × 1']],
    [[99.98], ['mains 50 Hz × 2']],
    [
      [59.97, 119.95, 179.91],
      ['mains 60 Hz × 1', 'mains 60 Hz × 2', 'mains 60 Hz × 3'],
    ],
    [
      [16.7, 50.1],
      ['mains 16.7 Hz × 1', 'mains 50 Hz × 1'],
    ],
    [
      [399, 798],
      ['mains 400 Hz × 1', 'mains 400 Hz × 2'],
    ],
  ])('knows supply networks: %j', (frequencies, expected) => {
    expect(names(frequencies)).toEqual(expected);
  });

  it('names a high harmonic of a network only where the network itself is seen', () => {
    expect(names([350])).toEqual([null]);
    expect(names([50, 350])).toEqual(['mains 50 Hz × 1', 'mains 50 Hz × 7']);
    // 50.1 Hz is measured: its seventh harmonic stands at 350.7 Hz, not at 350.
    expect(names([50.1, 350.7])).toEqual(['mains 50 Hz × 1', 'mains 50 Hz × 7']);
    expect(names([50.1, 350])).toEqual(['mains 50 Hz × 1', null]);
  });

  it('does not take a fan near 50 Hz for the network', () => {
    expect(names([49.5])).toEqual([null]);
    expect(names([48.6])).toEqual([null]);
  });

  it('keeps a fan and the network apart', () => {
    expect(names([24.3, 48.6, 50.02, 72.9, 100.04])).toEqual([
      '24.3 Hz × 1',
      '24.3 Hz × 2',
      'mains 50 Hz × 1',
      '24.3 Hz × 3',
      'mains 50 Hz × 2',
    ]);
  });

  it('finds every family that is there (any fundamental off the networks)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 17.5, max: 24, noNaN: true }),
        fc.uniqueArray(fc.integer({ min: 2, max: 10 }), { minLength: 1, maxLength: 5 }),
        (fundamental, harmonics) => {
          const frequencies = [1, ...harmonics.sort((a, b) => a - b)].map((n) => n * fundamental);
          const network = (f: number) => [50, 60, 100, 120].some((mains) => Math.abs(f - mains) < 0.02 * mains);
          fc.pre(!frequencies.some(network));
          names(frequencies, 0.005).forEach((name, i) => {
            expect(name?.endsWith(` × ${Math.round(frequencies[i] / fundamental)}`)).toBe(true);
          });
        },
      ),
    );
  });

  it('sees no families by chance: four lines anywhere, 2,000 times', () => {
    const uniform = uniformNumbers(5);
    let named = 0;
    for (let trial = 0; trial < 2000; trial++) {
      const frequencies = Array.from({ length: 4 }, () => 105 + 280 * uniform()).sort((a, b) => a - b);
      if (names(frequencies).some((name) => name !== null && !name.startsWith('mains'))) named++;
    }
    expect(named).toBeLessThan(2000 * 0.01);
  });

  it('believes a family within what is known of the lines, and none where they are known so coarsely that chance would do', () => {
    expect(names([10, 20.05], 0.01)).toEqual([null, null]);
    expect(names([10, 20.05], 0.02)).toEqual(['10.0 Hz × 1', '10.0 Hz × 2']);
    expect(names([10, 20.05], 0.06)).toEqual([null, null]);
  });
});
