import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { discreteGainDb, discretise } from '../../../src/core/filter/discretise.ts';
import { prototypeSections } from '../../../src/core/filter/families.ts';
import type { Filter } from '../../../src/core/filter/filter.ts';
import { filterName } from '../../../src/core/filter/name.ts';
import { stepInvariantOnePole } from '../../../src/core/filter/one-pole.ts';
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

  it('keeps −3.0103 dB at the corner when it is made discrete', () => {
    fc.assert(
      fc.property(anyFilter, fc.double({ min: 2.01, max: 1e4, noNaN: true }), (filter, ratesPerCorner) => {
        const discrete = discretise(filter, filter.cornerHz * ratesPerCorner);
        expect(discreteGainDb(discrete, filter.cornerHz)).toBeCloseTo(-10 * Math.log10(2), 6);
        expect(discreteGainDb(discrete, 0)).toBeCloseTo(0, 6);
        const q = discrete.sections.map(({ a1, a2 }) => (a2 === 0 ? 0 : Math.sqrt((1 + a2) ** 2 - a1 * a1) / (1 - a2)));
        expect([...q].sort((a, b) => a - b)).toEqual(q);
      }),
    );
  });

  it('has phase 0 at 0 Hz and ends at a quarter turn for every pole', () => {
    fc.assert(
      fc.property(anyFilter, (filter) => {
        expect(phaseRadians(filter, 0)).toBeCloseTo(0, 12);
        expect(phaseRadians(filter, 1e9 * filter.cornerHz)).toBeCloseTo((-filter.order * Math.PI) / 2, 6);
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
        for (const figure of ['delaySeconds', 'riseSeconds', 'settlingSeconds'] as const)
          expect((other[figure] * factor) / one[figure]).toBeCloseTo(1, 12);
        expect(other.overshoot).toBe(one.overshoot);
      }),
    );
  });

  it('describe the response that stepResponse draws', () => {
    fc.assert(
      fc.property(anyFilter, (shape) => {
        const filter = { ...shape, cornerHz: 2 };
        const { riseSeconds, settlingSeconds, overshoot } = stepFigures(filter);
        const times = Float64Array.from({ length: 40001 }, (_, i) => i * 1e-4);
        const values = stepResponse(filter, times);
        const first = (level: number) => times[values.findIndex((value) => value >= level)];
        expect(Math.max(0, ...values.map((value) => value - 1))).toBeCloseTo(overshoot, 6);
        expect(times.findLast((_, i) => Math.abs(values[i] - 1) > 0.01)).toBeCloseTo(settlingSeconds, 3);
        expect(first(0.9) - first(0.1)).toBeCloseTo(riseSeconds, 3);
      }),
      { numRuns: 16 },
    );
  });

  it('begin at 0 s: nothing comes before the step', () => {
    const filter: Filter = { shape: 'low-pass', family: 'butterworth', order: 5, cornerHz: 2 };
    expect([...stepResponse(filter, Float64Array.of(-1, 0))]).toEqual([0, 0]);
    expect(Math.abs(stepResponse(filter, Float64Array.of(1e-4))[0])).toBeLessThan(1e-12);
  });
});

describe('wrong use', () => {
  it('names an order that a family does not have', () => {
    expect(() => prototypeSections('butterworth', 9)).toThrow(/no butterworth filter of order 9.*1 to 8/);
    expect(() => prototypeSections('rc', 0)).toThrow(UserError);
  });

  it.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY, 50])(
    'refuses a corner of %d Hz at a rate of 100 Hz',
    (cornerHz) => {
      expect(() => discretise({ shape: 'low-pass', family: 'bessel', order: 2, cornerHz }, 100)).toThrow(UserError);
      expect(() => stepInvariantOnePole(cornerHz, 100)).toThrow(UserError);
      expect(() => stepInvariantOnePole(1, Number.POSITIVE_INFINITY)).toThrow(UserError);
    },
  );

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
