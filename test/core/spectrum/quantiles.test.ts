import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chiSquareQuantile, fQuantile, fUpperTail } from '../../../src/core/spectrum/quantiles.ts';

const dof = fc.double({ min: 1, max: 2000, noNaN: true });

describe('quantiles', () => {
  it('and upper tails of F are inverse to each other, tails down to 1e-9', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -9, max: -0.1, noNaN: true }),
        dof,
        fc.double({ min: 3, max: 2000, noNaN: true }),
        (exponent, dof1, dof2) => {
          const tail = 10 ** exponent;
          expect(fUpperTail(fQuantile(1 - tail, dof1, dof2), dof1, dof2) / tail).toBeCloseTo(1, 4);
        },
      ),
      { numRuns: 60 },
    );
  });

  it('of F become those of χ² where the denominator is known well', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 0.9999, noNaN: true }), dof, (p, dof1) => {
        expect(fQuantile(p, dof1, 1e7) / (chiSquareQuantile(p, dof1) / dof1)).toBeCloseTo(1, 3);
      }),
      { numRuns: 60 },
    );
  });

  it('refuse what lies outside their domain', () => {
    expect(() => chiSquareQuantile(1, 3)).toThrow(RangeError);
    expect(() => chiSquareQuantile(-0.1, 3)).toThrow(RangeError);
    expect(() => chiSquareQuantile(Number.NaN, 3)).toThrow(RangeError);
    expect(() => chiSquareQuantile(0.5, 0)).toThrow(RangeError);
    expect(() => fQuantile(0.5, 3, Number.POSITIVE_INFINITY)).toThrow(RangeError);
    expect(() => fQuantile(0.5, Number.NaN, 3)).toThrow(RangeError);
    expect(() => fUpperTail(-1, 3, 3)).toThrow(RangeError);
  });

  it('of F far out with hardly a denominator are ∞, not nothing', () => {
    expect(fQuantile(1 - 1e-10, 50, 1)).toBe(Number.POSITIVE_INFINITY);
  });

  it('of χ² rise with p and with the degrees of freedom, also where the expansion takes over (any two)', () => {
    const many = fc.double({ min: 1400, max: 1600, noNaN: true });
    fc.assert(
      fc.property(many, fc.double({ min: 0.02, max: 0.999, noNaN: true }), (dof, p) => {
        expect(chiSquareQuantile(p, dof + 0.01)).toBeGreaterThan(chiSquareQuantile(p, dof));
        expect(chiSquareQuantile(p + 1e-5, dof)).toBeGreaterThan(chiSquareQuantile(p, dof));
      }),
    );
  });

  it('an F of nothing is exceeded for certain', () => {
    expect(fUpperTail(0, 3, 3)).toBe(1);
  });
});
