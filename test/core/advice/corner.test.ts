import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { leastErrorCorner, roundCorner } from '../../../src/core/advice/corner.ts';

describe('leastErrorCorner', () => {
  it('finds the minimum of any bowl in the logarithm of the corner', () => {
    fc.assert(
      fc.property(fc.double({ min: -2, max: 3, noNaN: true }), (centre) => {
        const error = (corner: number) => (Math.log10(corner) - centre) ** 2;
        const found = leastErrorCorner({ lowHz: 1e-3, highHz: 1e4 }, error);
        expect(Math.abs(Math.log10(found) - centre)).toBeLessThan(0.01);
      }),
    );
  });

  it('takes the border where the error falls towards it', () => {
    expect(leastErrorCorner({ lowHz: 2, highHz: 5 }, (corner) => corner)).toBe(2);
    expect(leastErrorCorner({ lowHz: 2, highHz: 5 }, (corner) => -corner)).toBe(5);
  });
});

describe('roundCorner', () => {
  const flat = () => 0;
  const steep = (corner: number) => Math.abs(corner - 2.8628);

  it('takes the roundest number there is where rounding may cost anything', () => {
    expect(roundCorner(2.8628, { lowHz: 2.8628, highHz: 3.015 }, steep, Number.POSITIVE_INFINITY)).toBe(3);
  });

  it('stays where rounding costs more than it may', () => {
    expect(roundCorner(2.8628, { lowHz: 2, highHz: 4 }, steep, 1e-6)).toBe(2.8628);
    expect(roundCorner(2.8628, { lowHz: 2, highHz: 4 }, steep, 0.04)).toBe(2.9);
  });

  it('never leaves the allowed interval', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-3, max: 1e4, noNaN: true }),
        fc.double({ min: 1.0001, max: 10, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (lowHz, ratio, part) => {
          const allowed = { lowHz, highHz: lowHz * ratio };
          const found = roundCorner(lowHz * ratio ** part, allowed, flat, 1);
          expect(found).toBeGreaterThanOrEqual(allowed.lowHz * (1 - 1e-12));
          expect(found).toBeLessThanOrEqual(allowed.highHz * (1 + 1e-12));
        },
      ),
    );
  });
});
