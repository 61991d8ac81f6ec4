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

  it('keeps a constant to the last bit from the first sample on', () => {
    const anyConstant = fc.double({ noNaN: true, min: -1e9, max: 1e9 }).filter((value) => !Object.is(value, -0));
    fc.assert(
      fc.property(anyFilter, anyConstant, (filter, value) => {
        expect(run(filter, new Array(50).fill(value))).toEqual(new Float64Array(50).fill(value));
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
          expect(Math.abs(value - (factor * a[i] + b[i]))).toBeLessThan(1e-9);
        });
      }),
    );
  });

  it('passes an offset without loss of digits, however far the corner lies below the rate', () => {
    // Steps of 2⁻³⁰ on an offset of 9 are exact; what a large offset costs is then the filter's doing alone.
    const samples = Array.from({ length: 20000 }, (_, i) => Math.round(Math.sin(i * i) * 2 ** 20) / 2 ** 30);
    const filter: Filter = { shape: 'low-pass', family: 'butterworth', order: 4, cornerHz: 1e-3 };
    const without = run(filter, samples);
    const withOffset = run(
      filter,
      samples.map((value) => value + 9),
    );
    withOffset.forEach((value, i) => {
      expect(Math.abs(value - 9 - without[i])).toBeLessThan(1e-14);
    });
  });

  it('takes a sine at the corner down to 1/√2 once it has settled', () => {
    fc.assert(
      fc.property(anyFilter, (filter) => {
        const omega = (2 * Math.PI * filter.cornerHz) / 100;
        const output = run(
          filter,
          Array.from({ length: 12000 }, (_, i) => Math.sin(omega * i)),
        ).subarray(9000);
        // Amplitude by least squares on sine and cosine over what is left.
        let [ss, sc, cc, ys, yc] = [0, 0, 0, 0, 0];
        output.forEach((y, i) => {
          const [sine, cosine] = [Math.sin(omega * (9000 + i)), Math.cos(omega * (9000 + i))];
          ss += sine * sine;
          sc += sine * cosine;
          cc += cosine * cosine;
          ys += y * sine;
          yc += y * cosine;
        });
        const size = ss * cc - sc * sc;
        expect(Math.hypot((ys * cc - yc * sc) / size, (yc * ss - ys * sc) / size)).toBeCloseTo(Math.SQRT1_2, 9);
      }),
      { numRuns: 30 },
    );
  });

  it('takes an empty block, also at the start of a run', () => {
    const filter: Filter = { shape: 'low-pass', family: 'bessel', order: 3, cornerHz: 5 };
    const fold = new FilterFold(discretise(filter, 100));
    const none = new Float64Array(0);
    expect(fold.push(none, true)).toEqual(none);
    const head = fold.push(Float64Array.of(4, 6), true);
    expect(fold.push(none, false)).toEqual(none);
    expect([...head, ...fold.push(Float64Array.of(5), false)]).toEqual([...run(filter, [4, 6, 5])]);
  });

  it('starts every run anew', () => {
    const filter: Filter = { shape: 'low-pass', family: 'butterworth', order: 4, cornerHz: 5 };
    const fold = new FilterFold(discretise(filter, 100));
    fold.push(Float64Array.of(1, 5, -3), true);
    expect(fold.push(Float64Array.of(7, 2, 9), true)).toEqual(run(filter, [7, 2, 9]));
  });
});
