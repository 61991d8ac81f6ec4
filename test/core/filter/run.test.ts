import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { discretise } from '../../../src/core/filter/discretise.ts';
import type { Filter } from '../../../src/core/filter/filter.ts';
import { FilterFold } from '../../../src/core/filter/run.ts';

const anyFilter = fc.record({
  shape: fc.constant('low-pass' as const),
  family: fc.constantFrom('butterworth' as const, 'bessel' as const),
  order: fc.integer({ min: 1, max: 8 }),
  cornerHz: fc.double({ min: 0.5, max: 40, noNaN: true }),
});
const anySamples = fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 1, maxLength: 200 });
const run = (filter: Filter, samples: readonly number[]) =>
  new FilterFold(discretise(filter, 100)).push(Float64Array.from(samples), true);

describe('FilterFold', () => {
  it('gives the same bits for any block size', () => {
    fc.assert(
      fc.property(anyFilter, anySamples, fc.integer({ min: 1, max: 50 }), (filter, samples, size) => {
        const whole = run(filter, samples);
        const fold = new FilterFold(discretise(filter, 100));
        const pieces: number[] = [];
        for (let i = 0; i < samples.length; i += size)
          pieces.push(...fold.push(Float64Array.from(samples.slice(i, i + size)), i === 0));
        expect(pieces).toEqual([...whole]);
      }),
    );
  });

  it('keeps a constant from the first sample on', () => {
    fc.assert(
      fc.property(anyFilter, fc.double({ min: -1e3, max: 1e3, noNaN: true }), (filter, value) => {
        for (const y of run(filter, new Array(50).fill(value)))
          expect(Math.abs(y - value)).toBeLessThanOrEqual(1e-7 * Math.max(1, Math.abs(value)));
      }),
    );
  });

  it('is linear', () => {
    fc.assert(
      fc.property(anyFilter, anySamples, fc.double({ min: -5, max: 5, noNaN: true }), (filter, samples, factor) => {
        const other = samples.map((_, i) => Math.sin(i));
        const sum = run(
          filter,
          samples.map((value, i) => factor * value + other[i]),
        );
        const [a, b] = [run(filter, samples), run(filter, other)];
        sum.forEach((value, i) => {
          expect(Math.abs(value - (factor * a[i] + b[i]))).toBeLessThan(1e-6);
        });
      }),
    );
  });

  it('starts every run anew', () => {
    const filter: Filter = { shape: 'low-pass', family: 'butterworth', order: 4, cornerHz: 5 };
    const fold = new FilterFold(discretise(filter, 100));
    fold.push(Float64Array.of(1, 5, -3), true);
    expect(fold.push(Float64Array.of(7, 2, 9), true)).toEqual(run(filter, [7, 2, 9]));
  });
});
