import { describe, expect, it } from 'vitest';
import { VarianceFold } from '../../../src/core/simulation/variance.ts';

describe('VarianceFold', () => {
  it('gives the RMS about the mean, whatever the offset', () => {
    for (const offset of [0, 9.81, 1e8]) {
      const fold = new VarianceFold(0);
      fold.push(
        Float64Array.from([1, -1, 1, -1], (v) => v + offset),
        true,
      );
      expect(fold.result()).toBeCloseTo(1, 6);
    }
  });

  it('takes each stretch about its own mean and leaves out what is skipped', () => {
    const fold = new VarianceFold(1);
    fold.push(Float64Array.of(1000, 1, -1), true);
    fold.push(Float64Array.of(-1000, 6, 4), true);
    expect(fold.result()).toBeCloseTo(1, 12);
  });

  it('is 0 where nothing is left', () => {
    const fold = new VarianceFold(10);
    fold.push(Float64Array.of(1, 2), true);
    expect(fold.result()).toBe(0);
  });
});
