import { describe, expect, it } from 'vitest';
import { corner, count, decibels, hertz, percent, quantity, seconds, significant } from '../../src/core/figure.ts';

describe('figures for people', () => {
  it('show significant digits, no more and no fewer', () => {
    expect(significant(0.0036)).toBe('0.00360');
    expect(significant(1234567)).toBe('1.23·10⁶');
    expect(significant(-0.00001234, 2)).toBe('−1.2·10⁻⁵');
    expect(significant(9.999)).toBe('10.0');
    expect(significant(0)).toBe('0');
    expect(significant(Number.POSITIVE_INFINITY)).toBe('∞');
    expect(significant(Number.NaN)).toBe('not known');
  });

  it('carry the unit that fits', () => {
    expect([hertz(3), hertz(24300), hertz(0.685, 3)]).toEqual(['3.0 Hz', '24.3 kHz', '0.685 Hz']);
    expect([seconds(0.0796), seconds(4e-5), seconds(2e-8), seconds(90), seconds(900), seconds(9000)]).toEqual([
      '79.6 ms',
      '40.0 µs',
      '20.0 ns',
      '90.0 s',
      '15.0 min',
      '2.50 h',
    ]);
    expect([decibels(20.04), decibels(-3.01), percent(0.973, 3), quantity(0.0529, 'm/s²'), quantity(5, '')]).toEqual([
      '20.0 dB',
      '−3.0 dB',
      '97.3 %',
      '0.0529 m/s²',
      '5.00',
    ]);
    expect(count(2000000)).toBe('2,000,000');
  });

  it('say a corner as it is built', () => {
    expect([corner(2), corner(2.5), corner(2.86), corner(184.704), corner(180)]).toEqual([
      '2.0 Hz',
      '2.5 Hz',
      '2.86 Hz',
      '185 Hz',
      '180 Hz',
    ]);
  });
});
