import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { discretise } from '../../../src/core/filter/discretise.ts';
import { prototypeSections } from '../../../src/core/filter/families.ts';
import type { Filter } from '../../../src/core/filter/filter.ts';
import { filterName } from '../../../src/core/filter/name.ts';
import { cornerForGain, gainDb, groupDelaySeconds, phaseRadians } from '../../../src/core/filter/response.ts';
import { stepFigures, stepResponse } from '../../../src/core/filter/step.ts';
import { UserError } from '../../../src/core/user-error.ts';

const anyFilter = fc.record({
  shape: fc.constant('low-pass' as const),
  family: fc.constantFrom('butterworth' as const, 'bessel' as const),
  order: fc.integer({ min: 1, max: 8 }),
  cornerHz: fc.double({ min: 1e-3, max: 1e5, noNaN: true }),
});

describe('response', () => {
  it('is −3.0103 dB at the corner, and falls all the way', () => {
    fc.assert(
      fc.property(anyFilter, (filter) => {
        expect(gainDb(filter, filter.cornerHz)).toBeCloseTo(-10 * Math.log10(2), 9);
        const gains = [0.01, 0.1, 0.3, 0.9, 1.1, 2, 5, 20].map((ratio) => gainDb(filter, ratio * filter.cornerHz));
        expect([...gains].sort((a, b) => b - a)).toEqual(gains);
      }),
    );
  });

  it('cornerForGain is the inverse of gainDb', () => {
    fc.assert(
      fc.property(anyFilter, fc.double({ min: 0.1, max: 80, noNaN: true }), (filter, attenuationDb) => {
        const cornerHz = cornerForGain(filter, filter.cornerHz, attenuationDb);
        expect(gainDb({ ...filter, cornerHz }, filter.cornerHz)).toBeCloseTo(-attenuationDb, 8);
      }),
    );
  });

  it('has the slope of its phase for group delay', () => {
    fc.assert(
      fc.property(anyFilter, fc.double({ min: 0.05, max: 4, noNaN: true }), (filter, ratio) => {
        const f = ratio * filter.cornerHz;
        const step = 1e-5 * f;
        const slope = (phaseRadians(filter, f + step) - phaseRadians(filter, f - step)) / (4 * Math.PI * step);
        expect(groupDelaySeconds(filter, f) / -slope).toBeCloseTo(1, 5);
      }),
    );
  });
});

describe('step figures', () => {
  it('scale with the corner', () => {
    fc.assert(
      fc.property(anyFilter, fc.double({ min: 0.01, max: 100, noNaN: true }), (filter, factor) => {
        const one = stepFigures(filter);
        const other = stepFigures({ ...filter, cornerHz: filter.cornerHz * factor });
        expect(other.settlingSeconds * factor).toBeCloseTo(one.settlingSeconds, 9);
        expect(other.overshoot).toBe(one.overshoot);
      }),
    );
  });

  it('describe the response that stepResponse draws', () => {
    const filter: Filter = { shape: 'low-pass', family: 'butterworth', order: 5, cornerHz: 2 };
    const { settlingSeconds, overshoot } = stepFigures(filter);
    const times = Float64Array.from({ length: 40001 }, (_, i) => i * 1e-4);
    const values = stepResponse(filter, times);
    expect(Math.max(...values) - 1).toBeCloseTo(overshoot, 6);
    expect(times.findLast((_, i) => Math.abs(values[i] - 1) > 0.01)).toBeCloseTo(settlingSeconds, 3);
    expect(stepResponse(filter, Float64Array.of(-1, 0))[0]).toBe(0);
    expect(Math.abs(values[0])).toBeLessThan(1e-12);
  });
});

describe('wrong use', () => {
  it('names an order that a family does not have', () => {
    expect(() => prototypeSections('butterworth', 9)).toThrow(/no butterworth filter of order 9.*1 to 8/);
    expect(() => prototypeSections('rc', 0)).toThrow(UserError);
  });

  it('refuses a corner beyond half of the rate', () => {
    const filter: Filter = { shape: 'low-pass', family: 'rc', order: 1, cornerHz: 50 };
    expect(() => discretise(filter, 100)).toThrow(/50\.0 Hz cannot be had at a rate of 100\.0 Hz/);
  });
});

describe('filterName', () => {
  it('says a filter as people do', () => {
    expect(filterName({ shape: 'low-pass', family: 'rc', order: 1, cornerHz: 3 })).toBe(
      'one-pole RC low-pass, corner 3.0 Hz',
    );
    expect(filterName({ shape: 'low-pass', family: 'bessel', order: 4, cornerHz: 12345 })).toBe(
      'Bessel low-pass, order 4, corner 12.3 kHz',
    );
  });
});
