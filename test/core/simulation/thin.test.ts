import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ThinFold } from '../../../src/core/simulation/thin.ts';

describe('ThinFold', () => {
  it('keeps the largest and the smallest sample of every recording, wherever they stand', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 2, maxLength: 500 }),
        fc.integer({ min: 1, max: 50 }),
        (values, columns) => {
          const fold = new ThinFold({ columns, durationSeconds: (values.length - 1) / 10, rateHz: 10 });
          fold.push(Float64Array.from(values), 0);
          const { low, high } = fold.result();
          expect(Math.max(...high.filter((v) => !Number.isNaN(v)))).toBe(Math.max(...values));
          expect(Math.min(...low.filter((v) => !Number.isNaN(v)))).toBe(Math.min(...values));
        },
      ),
    );
  });

  it('gives the same columns for any block size', () => {
    const values = Float64Array.from({ length: 1000 }, (_, i) => Math.sin(i * i));
    const thin = (size: number) => {
      const fold = new ThinFold({ columns: 37, durationSeconds: 99.9, rateHz: 10 });
      for (let i = 0; i < values.length; i += size) fold.push(values.subarray(i, i + size), i / 10);
      return fold.result();
    };
    expect(thin(1)).toEqual(thin(1000));
    expect(thin(7)).toEqual(thin(1000));
  });

  it('leaves columns within a gap empty', () => {
    const fold = new ThinFold({ columns: 10, durationSeconds: 9.9, rateHz: 10 });
    fold.push(new Float64Array(20).fill(1), 0);
    fold.push(new Float64Array(20).fill(1), 8);
    expect([...fold.result().high].map(Number.isNaN)).toEqual([
      false,
      false,
      true,
      true,
      true,
      true,
      true,
      true,
      false,
      false,
    ]);
  });
});
