import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hann, hannLobe, hannOffset } from '../../../src/core/spectrum/window.ts';

describe('hann', () => {
  it('is zero at its first sample, one in the middle, and periodic', () => {
    const weights = hann(16);
    expect(weights[0]).toBe(0);
    expect(weights[8]).toBe(1);
    for (let n = 1; n < 16; n++) expect(weights[n]).toBeCloseTo(weights[16 - n], 15);
  });

  it('refuses lengths that leave nothing', () => {
    expect(() => hann(2)).toThrow(RangeError);
    expect(() => hann(8.5)).toThrow(RangeError);
  });
});

describe('hannOffset', () => {
  it('is exact for any sine alone (all offsets)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        fc.double({ min: 1e-9, max: 1e9, noNaN: true }),
        (offset, power) => {
          const at = (bin: number) => power * hannLobe(bin - offset);
          expect(hannOffset(at(-1), at(0), at(1))).toBeCloseTo(offset, 6);
        },
      ),
    );
  });

  it('stays within half a bin for powers that noise has made negative', () => {
    expect(hannOffset(-1, 1, 5)).toBe(0.5);
    expect(hannOffset(-1, -1, -1)).toBe(0);
  });
});
