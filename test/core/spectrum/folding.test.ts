import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { foldedFrom } from '../../../src/core/spectrum/folding.ts';

describe('foldedFrom', () => {
  it('lists frequencies that sampling cannot tell from the line (any line, any rate)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1, max: 1e5, noNaN: true }),
        fc.double({ min: 0.01, max: 0.49, noNaN: true }),
        (rateHz, part) => {
          const found = foldedFrom(part * rateHz, rateHz, 0);
          expect(found.length).toBe(8);
          found.forEach(({ frequencyHz }, i) => {
            expect(frequencyHz).toBeGreaterThan(i === 0 ? rateHz / 2 : found[i - 1].frequencyHz);
            expect(frequencyHz).toBeLessThan(4.5 * rateHz);
            // A cosine at either frequency takes the same values at the sampling instants.
            for (let n = 0; n < 20; n++)
              expect(Math.cos((2 * Math.PI * frequencyHz * n) / rateHz)).toBeCloseTo(
                Math.cos(2 * Math.PI * part * n),
                6,
              );
          });
        },
      ),
    );
  });

  const mains = (frequencyHz: number, rateHz: number, toleranceHz = 0.02) =>
    foldedFrom(frequencyHz, rateHz, toleranceHz).flatMap((from) => from.mains ?? []);

  it('names mains harmonics among them', () => {
    // At 90.9 Hz the network's 50 Hz folds to 40.9 Hz, its second harmonic to 9.1 Hz.
    expect(mains(40.9, 90.9)).toContain('mains 50 Hz × 1');
    expect(mains(9.1, 90.9)).toContain('mains 50 Hz × 2');
    expect(mains(20, 80)).toContain('mains 60 Hz × 1');
    expect(mains(31.4, 90.9)).toEqual([]);
  });

  it('counts in how well the line is known', () => {
    expect(mains(40.5, 90.9)).not.toContain('mains 50 Hz × 1');
    expect(mains(40.5, 90.9, 0.5)).toContain('mains 50 Hz × 1');
  });
});
